import { StorageError } from "./errors";
import { decodeUri } from "./uri";

/** The query of a request, decoded, in the order it came. Names are case-sensitive, as the protocol has them. */
export class QueryParameters {
  readonly entries: readonly (readonly [name: string, value: string])[];

  constructor(entries: readonly (readonly [string, string])[]) {
    this.entries = entries;
  }

  /** The first value of a parameter. A parameter without `=` has the empty string. */
  get(name: string): string | undefined {
    return this.entries.find(([entryName]) => entryName === name)?.[1];
  }

  has(name: string): boolean {
    return this.entries.some(([entryName]) => entryName === name);
  }
}

export interface RequestTarget {
  /** The decoded path, with its leading slash. */
  path: string;
  bucket: string | undefined;
  key: string | undefined;
  query: QueryParameters;
}

/** Object keys are at most this many bytes of UTF-8 (S3 user guide, "Naming Amazon S3 objects"). */
const MAXIMUM_KEY_BYTES = 1024;

/**
 * Takes a request line's target apart, path-style: `/bucket/key?query`.
 *
 * The path is not normalised: `a/../b` and `a//b` are keys like any other. `+` is a plus in the path and a
 * space in the query, as S3 reads them.
 * @throws StorageError InvalidURI for a broken escape or an absolute target; KeyTooLongError.
 */
export function parseRequestTarget(target: string): RequestTarget {
  const questionMark = target.indexOf("?");
  const rawPath = questionMark === -1 ? target : target.slice(0, questionMark);
  const rawQuery = questionMark === -1 ? "" : target.slice(questionMark + 1);
  if (!rawPath.startsWith("/")) {
    throw new StorageError("InvalidURI", "The request target must be a path.");
  }

  const path = decodeUri(rawPath);
  const slash = path.indexOf("/", 1);
  const bucket = slash === -1 ? path.slice(1) : path.slice(1, slash);
  const key = slash === -1 ? "" : path.slice(slash + 1);
  if (Buffer.byteLength(key) > MAXIMUM_KEY_BYTES) {
    throw new StorageError("KeyTooLongError", `A key has at most ${MAXIMUM_KEY_BYTES} bytes.`, {
      details: { MaxSizeAllowed: String(MAXIMUM_KEY_BYTES), Size: String(Buffer.byteLength(key)) },
    });
  }
  return {
    path,
    bucket: bucket === "" ? undefined : bucket,
    key: key === "" ? undefined : key,
    query: parseQuery(rawQuery),
  };
}

/** Decodes a query string. */
export function parseQuery(rawQuery: string): QueryParameters {
  const entries = rawQuery
    .split("&")
    .filter((pair) => pair !== "")
    .map((pair): [string, string] => {
      const equals = pair.indexOf("=");
      const name = equals === -1 ? pair : pair.slice(0, equals);
      const value = equals === -1 ? "" : pair.slice(equals + 1);
      return [decodeUri(name.replaceAll("+", " ")), decodeUri(value.replaceAll("+", " "))];
    });
  return new QueryParameters(entries);
}
