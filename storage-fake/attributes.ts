import { checksumHeader } from "./checksums";
import { StorageError } from "./errors";
import type { ObjectAttributes, ObjectRecord } from "./records";
import { quoteETag, type RequestContext } from "./request-context";

const METADATA_PREFIX = "x-amz-meta-";
/** User metadata, names and values together, has at most 2 KB (S3 user guide, "Working with object metadata"). */
const MAXIMUM_METADATA_BYTES = 2048;
const DEFAULT_CONTENT_TYPE = "binary/octet-stream";

/**
 * What a client says about an object it puts: content headers and user metadata.
 * @throws StorageError MetadataTooLarge; InvalidArgument for what could not be given back in a header;
 *   and a refusal of every field that would mean more than this server does
 */
export function readAttributes(context: RequestContext): ObjectAttributes {
  refuseUnsupported(context);
  const attributes: ObjectAttributes = {
    contentType: context.header("content-type") || DEFAULT_CONTENT_TYPE,
    cacheControl: context.header("cache-control"),
    contentDisposition: context.header("content-disposition"),
    contentEncoding: withoutAwsChunked(context.header("content-encoding")),
    contentLanguage: context.header("content-language"),
    expires: context.header("expires"),
    metadata: readMetadata(context),
  };
  return attributes;
}

/** The transfer coding of the SDK is not a property of the object. */
function withoutAwsChunked(encoding: string | undefined): string | undefined {
  const kept = (encoding ?? "")
    .split(",")
    .map((coding) => coding.trim())
    .filter((coding) => coding !== "" && coding.toLowerCase() !== "aws-chunked");
  return kept.length > 0 ? kept.join(",") : undefined;
}

function readMetadata(context: RequestContext): [string, string][] {
  const names = new Set(context.headers.names());
  if (context.authentication.kind === "signed" && context.authentication.place === "query") {
    for (const [name] of context.target.query.entries) names.add(name.toLowerCase());
  }
  const metadata: [string, string][] = [];
  let bytes = 0;
  for (const name of [...names].sort()) {
    if (!name.startsWith(METADATA_PREFIX)) continue;
    const shortName = name.slice(METADATA_PREFIX.length);
    const value = (context.amz(name) ?? "").trim();
    if (!/^[!#$%&'*+.^_`|~0-9a-z-]+$/.test(shortName)) {
      throw new StorageError("InvalidArgument", "A metadata name cannot stand in a header.");
    }
    requireHeaderValue(value, name);
    bytes += Buffer.byteLength(shortName) + Buffer.byteLength(value);
    metadata.push([shortName, value]);
  }
  if (bytes > MAXIMUM_METADATA_BYTES) {
    throw new StorageError("MetadataTooLarge", "The metadata is larger than allowed.", {
      details: { Size: String(bytes), MaxSizeAllowed: String(MAXIMUM_METADATA_BYTES) },
    });
  }
  return metadata;
}

/** A value from a query may hold what a header cannot. @throws StorageError InvalidArgument */
function requireHeaderValue(value: string, name: string): void {
  if (!/^[\t\u0020-\u007e\u0080-\u00ff]*$/.test(value)) {
    throw new StorageError("InvalidArgument", `The value of ${name} cannot stand in a header.`, {
      details: { ArgumentName: name },
    });
  }
}

/** Fields whose wish would be silently dropped: better to refuse than to look as if it were granted. */
const UNSUPPORTED_PREFIXES = [
  "x-amz-server-side-encryption",
  "x-amz-object-lock-",
  "x-amz-tagging",
  "x-amz-website-redirect-location",
  "x-amz-write-offset-bytes",
];

/** @throws StorageError NotImplemented, AccessControlListNotSupported, InvalidStorageClass */
function refuseUnsupported(context: RequestContext): void {
  const names = [
    ...context.headers.names(),
    ...context.target.query.entries.map(([name]) => name.toLowerCase()),
  ];
  const unsupported = names.find((name) => UNSUPPORTED_PREFIXES.some((prefix) => name.startsWith(prefix)));
  if (unsupported !== undefined && unsupported !== "x-amz-tagging-directive") {
    throw new StorageError("NotImplemented", `${unsupported} is not supported here.`);
  }
  const acl = context.amz("x-amz-acl");
  const granted = names.some((name) => name.startsWith("x-amz-grant-"));
  if (granted || (acl !== undefined && acl !== "private" && acl !== "bucket-owner-full-control")) {
    throw new StorageError("AccessControlListNotSupported", "Who may read is decided by the bucket alone.");
  }
  const storageClass = context.amz("x-amz-storage-class");
  if (storageClass !== undefined && storageClass !== "STANDARD") {
    throw new StorageError("InvalidStorageClass", "STANDARD is the only storage class.");
  }
}

/** Query parameters by which a signed reader replaces headers of the answer, and the header each replaces. */
const RESPONSE_OVERRIDES: readonly (readonly [parameter: string, header: string])[] = [
  ["response-content-type", "Content-Type"],
  ["response-content-language", "Content-Language"],
  ["response-expires", "Expires"],
  ["response-cache-control", "Cache-Control"],
  ["response-content-disposition", "Content-Disposition"],
  ["response-content-encoding", "Content-Encoding"],
];

/**
 * The headers that describe an object in answers to GET and HEAD, overrides applied.
 * @throws StorageError InvalidRequest when someone anonymous asks for an override
 */
export function describeObject(context: RequestContext, record: ObjectRecord): Record<string, string> {
  const { attributes } = record;
  const headers: Record<string, string> = {
    ...validatorHeaders(record),
    "Accept-Ranges": "bytes",
    "Content-Type": attributes.contentType,
  };
  if (attributes.contentDisposition !== undefined)
    headers["Content-Disposition"] = attributes.contentDisposition;
  if (attributes.contentEncoding !== undefined) headers["Content-Encoding"] = attributes.contentEncoding;
  if (attributes.contentLanguage !== undefined) headers["Content-Language"] = attributes.contentLanguage;
  if (attributes.expires !== undefined) headers.Expires = attributes.expires;
  for (const [name, value] of attributes.metadata) headers[`${METADATA_PREFIX}${name}`] = value;
  for (const [parameter, header] of RESPONSE_OVERRIDES) {
    const value = context.target.query.get(parameter);
    if (value === undefined) continue;
    if (context.authentication.kind === "anonymous") {
      throw new StorageError(
        "InvalidRequest",
        "An anonymous request cannot choose the headers of its answer.",
      );
    }
    requireHeaderValue(value, parameter);
    headers[header] = value;
  }
  return headers;
}

/** The headers a 304 needs as much as a 200 (RFC 9110 section 15.4.5). */
export function validatorHeaders(record: ObjectRecord): Record<string, string> {
  const headers: Record<string, string> = {
    ETag: quoteETag(record.etag),
    "Last-Modified": new Date(record.modifiedAt).toUTCString(),
  };
  if (record.attributes.cacheControl !== undefined) headers["Cache-Control"] = record.attributes.cacheControl;
  return headers;
}

/** The headers that carry an object's checksum, if it has one. */
export function checksumHeaders(record: Pick<ObjectRecord, "checksum">): Record<string, string> {
  if (!record.checksum) return {};
  const { algorithm, type, value } = record.checksum;
  return { [checksumHeader(algorithm)]: value, "x-amz-checksum-type": type };
}
