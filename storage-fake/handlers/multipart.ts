import { readAttributes } from "../attributes";
import type { NamedPart } from "../bucket-uploads";
import { parseRange } from "../byte-ranges";
import {
  CHECKSUM_ALGORITHMS,
  type ChecksumAlgorithm,
  type ChecksumType,
  checksumElement,
  checksumHeader,
  type DigestName,
  defaultChecksumType,
  type PartChecksum,
  parseChecksumAlgorithm,
  supportsChecksumType,
} from "../checksums";
import { stripETag } from "../conditions";
import type { TemporaryFile } from "../durable-files";
import { StorageError } from "../errors";
import { checksumValues, IncomingContent } from "../incoming-content";
import { compareKeys } from "../key-order";
import type { PartRecord, UploadRecord } from "../records";
import { parseCount, quoteETag, type RequestContext } from "../request-context";
import { readRequestXml } from "../request-xml";
import { encodeUriPath } from "../uri";
import { childrenNamed, childText, element, type Markup, optionalElement, type XmlNode } from "../xml";
import { openCopySource, sendCopyResult } from "./copying";
import { keyWriter, MAXIMUM_ENTRIES, owner } from "./listing";
import { readWriteConditions } from "./objects";

const MAXIMUM_PARTS = 10_000;
/** Room for ten thousand parts, each with its number, entity tag and longest checksum. */
const MAXIMUM_DOCUMENT_BYTES = 8 * 1024 * 1024;

/** POST ?uploads: begins an object that is to be sent in parts. */
export async function createMultipartUpload(context: RequestContext): Promise<void> {
  const { bucket, key } = context;
  const attributes = readAttributes(context);
  const checksum = readChecksumPlan(context);
  const upload = await bucket.uploads.create({
    key,
    initiatedAt: context.now().getTime(),
    attributes,
    checksum,
  });
  const headers: Record<string, string> = checksum
    ? {
        "x-amz-checksum-algorithm": checksum.algorithm.toUpperCase(),
        "x-amz-checksum-type": checksum.type,
      }
    : {};
  context.sendXml(
    "InitiateMultipartUploadResult",
    [element("Bucket", bucket.name), element("Key", key), element("UploadId", upload.uploadId)],
    headers,
  );
}

function readChecksumPlan(context: RequestContext): UploadRecord["checksum"] {
  const algorithmName = context.amz("x-amz-checksum-algorithm");
  const typeName = context.amz("x-amz-checksum-type");
  if (algorithmName === undefined) {
    if (typeName === undefined) return undefined;
    throw new StorageError("InvalidRequest", "x-amz-checksum-type needs x-amz-checksum-algorithm.");
  }
  const algorithm = parseChecksumAlgorithm(algorithmName);
  if (!algorithm) throw new StorageError("InvalidRequest", "x-amz-checksum-algorithm is not known here.");
  const type = typeName === undefined ? defaultChecksumType(algorithm) : parseChecksumType(typeName);
  if (!supportsChecksumType(algorithm, type)) {
    throw new StorageError("InvalidRequest", `The ${algorithmName} checksum of an upload cannot be ${type}.`);
  }
  return { algorithm, type };
}

function parseChecksumType(name: string): ChecksumType {
  if (name === "FULL_OBJECT" || name === "COMPOSITE") return name;
  throw new StorageError("InvalidRequest", "x-amz-checksum-type must be FULL_OBJECT or COMPOSITE.");
}

function readPartNumber(context: RequestContext): number {
  const number = parseCount(context.requireQuery("partNumber"), "partNumber", 0);
  if (number < 1 || number > MAXIMUM_PARTS) {
    throw new StorageError("InvalidArgument", `A part's number is from 1 to ${MAXIMUM_PARTS}.`, {
      details: { ArgumentName: "partNumber", ArgumentValue: String(number) },
    });
  }
  return number;
}

/** PUT ?partNumber&uploadId: one part, streamed to the disk. */
export async function uploadPart(context: RequestContext): Promise<void> {
  const { bucket, key } = context;
  const number = readPartNumber(context);
  const uploadId = context.requireQuery("uploadId");
  const upload = bucket.uploads.get(key, uploadId);
  const content = IncomingContent.describe(context.incoming);
  requirePlannedChecksum(upload, content.checksumAlgorithm);

  const planned = upload.checksum?.algorithm;
  const digestNames: DigestName[] = planned ? [...content.digestNames, planned] : content.digestNames;
  const file = await context.store.receive(content.pieces(), digestNames, (digests) =>
    content.verify(digests),
  );
  const part = await bucket.uploads.putPart(key, uploadId, file, {
    number,
    etag: file.digests.hex("md5"),
    modifiedAt: context.now().getTime(),
    checksum: partChecksum(file, planned ?? content.checksumAlgorithm),
  });
  const checksumHeaders: Record<string, string> = part.checksum
    ? { [checksumHeader(part.checksum.algorithm)]: part.checksum.value }
    : {};
  context.sendEmpty(200, { ETag: quoteETag(part.etag), ...checksumHeaders });
}

function partChecksum(
  file: TemporaryFile,
  algorithm: ChecksumAlgorithm | undefined,
): PartChecksum | undefined {
  return algorithm && { algorithm, value: file.digests.base64(algorithm) };
}

/**
 * A part's checksum must be of the algorithm the upload was begun for, and must be given when the checksum of the
 * whole is made of the parts' own. An upload that was begun for none takes any: the SDK by its own default begins
 * one so, and then gives a checksum with each part.
 */
function requirePlannedChecksum(upload: UploadRecord, given: ChecksumAlgorithm | undefined): void {
  const planned = upload.checksum;
  if (!planned || given === planned.algorithm) return;
  if (given === undefined && planned.type === "FULL_OBJECT") return;
  throw new StorageError(
    "InvalidRequest",
    `The upload was begun for ${planned.algorithm} checksums; the part has ${given ?? "none"}.`,
  );
}

/** PUT ?partNumber&uploadId with x-amz-copy-source: a part made of (a range of) another object. */
export async function uploadPartCopy(context: RequestContext): Promise<void> {
  const { bucket, key } = context;
  const number = readPartNumber(context);
  const uploadId = context.requireQuery("uploadId");
  const planned = bucket.uploads.get(key, uploadId).checksum?.algorithm;
  const source = openCopySource(context);
  try {
    const { size } = source.reader.record;
    const rangeHeader = context.amz("x-amz-copy-source-range");
    const range = parseRange(rangeHeader, size);
    if (rangeHeader !== undefined && range.kind !== "part") {
      throw new StorageError("InvalidArgument", "x-amz-copy-source-range lies outside the source.");
    }
    const { start, end } = range.kind === "part" ? range : { start: 0, end: size };
    const digestNames: DigestName[] = planned ? ["md5", planned] : ["md5"];
    const file = await context.store.receive(source.reader.read(start, end), digestNames);
    const part = await bucket.uploads.putPart(key, uploadId, file, {
      number,
      etag: file.digests.hex("md5"),
      modifiedAt: context.now().getTime(),
      checksum: partChecksum(file, planned),
    });
    sendCopyResult(context, "CopyPartResult", part.etag, part.modifiedAt, part.checksum);
  } finally {
    source.reader.close();
  }
}

/** GET ?uploadId: the parts that have arrived. */
export function listParts(context: RequestContext): void {
  const { bucket, key } = context;
  const { query } = context.target;
  const uploadId = context.requireQuery("uploadId");
  const upload = bucket.uploads.get(key, uploadId);
  const { encodingType, write } = keyWriter(context);
  const marker = parseCount(query.get("part-number-marker"), "part-number-marker", 0);
  const maxParts = Math.min(
    parseCount(query.get("max-parts"), "max-parts", MAXIMUM_ENTRIES),
    MAXIMUM_ENTRIES,
  );
  const waiting = bucket.uploads.parts(key, uploadId).filter((part) => part.number > marker);
  const page = waiting.slice(0, maxParts);
  const truncated = page.length > 0 && page.length < waiting.length;
  context.sendXml("ListPartsResult", [
    element("Bucket", bucket.name),
    element("Key", write(key)),
    ...optionalElement("EncodingType", encodingType),
    element("UploadId", uploadId),
    owner("Initiator"),
    owner("Owner"),
    element("StorageClass", "STANDARD"),
    element("PartNumberMarker", marker),
    ...optionalElement("NextPartNumberMarker", page.at(-1)?.number),
    element("MaxParts", maxParts),
    element("IsTruncated", truncated),
    ...optionalElement("ChecksumAlgorithm", upload.checksum?.algorithm.toUpperCase()),
    ...optionalElement("ChecksumType", upload.checksum?.type),
    ...page.map((part) => describePart(part)),
  ]);
}

function describePart(part: PartRecord): Markup {
  return element("Part", [
    element("PartNumber", part.number),
    element("LastModified", new Date(part.modifiedAt).toISOString()),
    element("ETag", quoteETag(part.etag)),
    element("Size", part.segment.size),
    ...(part.checksum ? [element(checksumElement(part.checksum.algorithm), part.checksum.value)] : []),
  ]);
}

/** POST ?uploadId: joins parts into the object. */
export async function completeMultipartUpload(context: RequestContext): Promise<void> {
  const { bucket, key } = context;
  const uploadId = context.requireQuery("uploadId");
  const conditions = readWriteConditions(context);
  // Checksums in the headers of a completion are of the object, not of the document that is sent.
  const [wholeChecksum] = checksumValues(context.headers, context.target.query, context.signed);
  const { root } = await readRequestXml(context, {
    rootName: "CompleteMultipartUpload",
    maximumBytes: MAXIMUM_DOCUMENT_BYTES,
    checksumsAreOfBody: false,
  });
  const size = context.amz("x-amz-mp-object-size");
  const record = await bucket.uploads.complete(key, uploadId, {
    parts: childrenNamed(root, "Part").map(readNamedPart),
    conditions,
    expectedChecksum: wholeChecksum,
    expectedSize: size === undefined ? undefined : parseCount(size, "x-amz-mp-object-size", 0),
    modifiedAt: context.now().getTime(),
  });
  const { checksum } = record;
  context.sendXml("CompleteMultipartUploadResult", [
    element("Location", `http://${context.header("host") ?? ""}/${encodeUriPath(`${bucket.name}/${key}`)}`),
    element("Bucket", bucket.name),
    element("Key", key),
    element("ETag", quoteETag(record.etag)),
    ...(checksum
      ? [element(checksumElement(checksum.algorithm), checksum.value), element("ChecksumType", checksum.type)]
      : []),
  ]);
}

function readNamedPart(node: XmlNode): NamedPart {
  const number = Number(childText(node, "PartNumber"));
  const etag = childText(node, "ETag");
  if (!Number.isInteger(number) || number < 1 || etag === undefined) {
    throw new StorageError("MalformedXML", "Each part needs its PartNumber and its ETag.");
  }
  const checksums = CHECKSUM_ALGORITHMS.flatMap((algorithm): PartChecksum[] => {
    const value = childText(node, checksumElement(algorithm));
    return value ? [{ algorithm, value: value.trim() }] : [];
  });
  return { number, etag: stripETag(etag), checksum: checksums[0] };
}

/** DELETE ?uploadId: gives an upload up. */
export async function abortMultipartUpload(context: RequestContext): Promise<void> {
  await context.bucket.uploads.abort(context.key, context.requireQuery("uploadId"));
  context.sendEmpty(204);
}

/** GET ?uploads: the uploads that are under way in a bucket. */
export function listMultipartUploads(context: RequestContext): void {
  const { bucket } = context;
  const { query } = context.target;
  const { encodingType, write } = keyWriter(context);
  const prefix = query.get("prefix") ?? "";
  const delimiter = query.get("delimiter") ?? "";
  const keyMarker = query.get("key-marker") ?? "";
  const uploadIdMarker = query.get("upload-id-marker") ?? "";
  const maxUploads = Math.min(
    parseCount(query.get("max-uploads"), "max-uploads", MAXIMUM_ENTRIES),
    MAXIMUM_ENTRIES,
  );

  const waiting = bucket.uploads
    .all()
    .filter((upload) => upload.key.startsWith(prefix) && isBehind(upload, keyMarker, uploadIdMarker));
  const shown: UploadRecord[] = [];
  const commonPrefixes = new Set<string>();
  let last: { key: string; uploadId: string } | undefined;
  let truncated = false;
  for (const upload of waiting) {
    const end = delimiter === "" ? -1 : upload.key.indexOf(delimiter, prefix.length);
    const common = end === -1 ? undefined : upload.key.slice(0, end + delimiter.length);
    if (common === undefined || !commonPrefixes.has(common)) {
      if (shown.length + commonPrefixes.size === maxUploads) {
        truncated = maxUploads > 0;
        break;
      }
      if (common === undefined) shown.push(upload);
      else commonPrefixes.add(common);
    }
    last = upload;
  }

  context.sendXml("ListMultipartUploadsResult", [
    element("Bucket", bucket.name),
    element("KeyMarker", write(keyMarker)),
    element("UploadIdMarker", uploadIdMarker),
    ...(truncated && last
      ? [element("NextKeyMarker", write(last.key)), element("NextUploadIdMarker", last.uploadId)]
      : []),
    element("Prefix", write(prefix)),
    ...optionalElement("Delimiter", delimiter === "" ? undefined : write(delimiter)),
    ...optionalElement("EncodingType", encodingType),
    element("MaxUploads", maxUploads),
    element("IsTruncated", truncated),
    ...shown.map((upload) =>
      element("Upload", [
        element("Key", write(upload.key)),
        element("UploadId", upload.uploadId),
        owner("Initiator"),
        owner("Owner"),
        element("StorageClass", "STANDARD"),
        element("Initiated", new Date(upload.initiatedAt).toISOString()),
        ...optionalElement("ChecksumAlgorithm", upload.checksum?.algorithm.toUpperCase()),
        ...optionalElement("ChecksumType", upload.checksum?.type),
      ]),
    ),
    ...[...commonPrefixes].map((common) => element("CommonPrefixes", [element("Prefix", write(common))])),
  ]);
}

/** A key marker alone is past every upload of that key; with an id marker, past those up to it. */
function isBehind(upload: UploadRecord, keyMarker: string, uploadIdMarker: string): boolean {
  if (keyMarker === "") return true;
  const order = compareKeys(upload.key, keyMarker);
  return order > 0 || (order === 0 && uploadIdMarker !== "" && upload.uploadId > uploadIdMarker);
}
