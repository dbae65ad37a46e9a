import { StorageError } from "../errors";
import type { ListPosition } from "../key-order";
import type { ObjectRecord } from "../records";
import { parseCount, quoteETag, type RequestContext } from "../request-context";
import { encodeUriPath } from "../uri";
import { element, type Markup, optionalElement } from "../xml";

/** The most entries a page has, and what it has when the client does not say. */
export const MAXIMUM_ENTRIES = 1000;

/**
 * How keys are written in a listing: as they are, or percent-encoded when the client asked for it, since XML cannot
 * hold every character a key can.
 * @throws StorageError InvalidArgument
 */
export function keyWriter(context: RequestContext): {
  encodingType: string | undefined;
  write: (key: string) => string;
} {
  const encodingType = context.target.query.get("encoding-type");
  if (encodingType === undefined) return { encodingType, write: (key) => key };
  if (encodingType.toLowerCase() !== "url") {
    throw new StorageError("InvalidArgument", "encoding-type can only be url.", {
      details: { ArgumentName: "encoding-type", ArgumentValue: encodingType },
    });
  }
  return { encodingType: "url", write: encodeUriPath };
}

/** GET ?list-type=2: one page of a bucket's objects. */
export function listObjectsV2(context: RequestContext): void {
  const { query } = context.target;
  const bucket = context.bucket;
  const { encodingType, write } = keyWriter(context);
  const prefix = query.get("prefix") ?? "";
  const delimiter = query.get("delimiter") ?? "";
  const token = query.get("continuation-token");
  const startAfter = query.get("start-after");
  const maxKeys = Math.min(parseCount(query.get("max-keys"), "max-keys", MAXIMUM_ENTRIES), MAXIMUM_ENTRIES);
  const after: ListPosition | undefined =
    token !== undefined ? readToken(token) : startAfter ? { kind: "key", value: startAfter } : undefined;
  const withOwner = query.get("fetch-owner") === "true";

  const page = bucket.objects.list({ prefix, delimiter, after, limit: maxKeys });
  context.sendXml("ListBucketResult", [
    element("Name", bucket.name),
    element("Prefix", write(prefix)),
    ...optionalElement("Delimiter", delimiter === "" ? undefined : write(delimiter)),
    ...optionalElement("StartAfter", startAfter === undefined ? undefined : write(startAfter)),
    ...optionalElement("ContinuationToken", token),
    ...optionalElement("NextContinuationToken", page.next && writeToken(page.next)),
    ...optionalElement("EncodingType", encodingType),
    element("KeyCount", page.records.length + page.commonPrefixes.length),
    element("MaxKeys", maxKeys),
    element("IsTruncated", page.next !== undefined),
    ...page.records.map((record) => describeEntry(record, write, withOwner)),
    ...page.commonPrefixes.map((common) => element("CommonPrefixes", [element("Prefix", write(common))])),
  ]);
}

function describeEntry(record: ObjectRecord, write: (key: string) => string, withOwner: boolean): Markup {
  const { checksum } = record;
  return element("Contents", [
    element("Key", write(record.key)),
    element("LastModified", new Date(record.modifiedAt).toISOString()),
    element("ETag", quoteETag(record.etag)),
    ...optionalElement("ChecksumAlgorithm", checksum?.algorithm.toUpperCase()),
    ...optionalElement("ChecksumType", checksum?.type),
    element("Size", record.size),
    ...(withOwner ? [owner("Owner")] : []),
    element("StorageClass", "STANDARD"),
  ]);
}

/** The one account there is, as listings name it. */
export function owner(elementName: string): Markup {
  return element(elementName, [element("ID", "studio"), element("DisplayName", "studio")]);
}

function writeToken(position: ListPosition): string {
  const mark = position.kind === "key" ? "k" : "p";
  return Buffer.from(`${mark}${position.value}`, "utf8").toString("base64url");
}

/** @throws StorageError InvalidArgument for a token we did not make */
function readToken(token: string): ListPosition {
  const text = Buffer.from(token, "base64url").toString("utf8");
  const value = text.slice(1);
  if (Buffer.from(text, "utf8").toString("base64url") === token) {
    if (text.startsWith("k")) return { kind: "key", value };
    if (text.startsWith("p")) return { kind: "prefix", value };
  }
  throw new StorageError("InvalidArgument", "The continuation token is not one of ours.", {
    details: { ArgumentName: "continuation-token" },
  });
}

/** GET of the root: all buckets. */
export function listBuckets(context: RequestContext): void {
  context.sendXml("ListAllMyBucketsResult", [
    owner("Owner"),
    element(
      "Buckets",
      context.store.bucketNames().map((name) => element("Bucket", [element("Name", name)])),
    ),
  ]);
}
