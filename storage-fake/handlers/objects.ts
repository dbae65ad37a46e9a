import { pipeline } from "node:stream/promises";
import { checksumHeaders, describeObject, readAttributes, validatorHeaders } from "../attributes";
import type { WriteConditions } from "../bucket-objects";
import { parseRange } from "../byte-ranges";
import type { Checksum } from "../checksums";
import { type Conditions, evaluateConditions, stripETag } from "../conditions";
import { StorageError } from "../errors";
import { IncomingContent } from "../incoming-content";
import type { ObjectRecord } from "../records";
import { parseCount, quoteETag, type RequestContext } from "../request-context";

/** PUT of an object, streamed to the disk and put in place when all of it is there and is what was announced. */
export async function putObject(context: RequestContext): Promise<void> {
  const { bucket, key } = context;
  const attributes = readAttributes(context);
  const content = IncomingContent.describe(context.incoming);
  const conditions = readWriteConditions(context);
  bucket.objects.checkConditions(key, conditions);

  let checksum: Checksum | undefined;
  const file = await context.store.receive(content.pieces(), content.digestNames, (digests) => {
    checksum = content.verify(digests);
  });
  const record = await bucket.objects.commit(
    key,
    [{ path: file.path, size: file.size, mode: "move" }],
    { etag: file.digests.hex("md5"), modifiedAt: context.now().getTime(), attributes, checksum },
    conditions,
  );
  context.sendEmpty(200, { ETag: quoteETag(record.etag), ...checksumHeaders(record) });
}

/**
 * The conditions of a write. Others than `If-None-Match: *` and `If-Match` mean nothing for one, as in S3.
 * @throws StorageError NotImplemented
 */
export function readWriteConditions(context: RequestContext): WriteConditions {
  const { ifMatch, ifNoneMatch } = context.conditions();
  if (ifNoneMatch !== undefined && ifNoneMatch.trim() !== "*") {
    throw new StorageError("NotImplemented", "A write's If-None-Match can only be *.");
  }
  return { ifMatch, ifNoneMatch };
}

/** GET and HEAD of an object: whole, a byte range or one of its parts, if the conditions of the request hold. */
export async function getObject(context: RequestContext): Promise<void> {
  const reader = context.bucket.objects.open(context.key);
  if (!reader) {
    // To tell a stranger whether a key exists would be a listing of the bucket, which they may not have.
    if (context.authentication.kind === "anonymous") throw new StorageError("AccessDenied", "Access Denied");
    throw new StorageError("NoSuchKey", "There is no object at this key.", { details: { Key: context.key } });
  }
  try {
    const { record } = reader;
    const conditions = context.conditions();
    const outcome = evaluateConditions(conditions, record);
    if (outcome === "failed") throw failedCondition(conditions);
    if (outcome === "not-modified") {
      context.sendEmpty(304, validatorHeaders(record));
      return;
    }
    const { start, end, status, headers } = selectBytes(context, record);
    context.response.writeHead(status, {
      ...describeObject(context, record),
      ...headers,
      "Content-Length": String(end - start),
    });
    if (context.isHead) context.response.end();
    else await pipeline(reader.read(start, end), context.response);
  } finally {
    reader.close();
  }
}

/** The refusal when a condition does not hold, naming it. */
export function failedCondition(conditions: Conditions): StorageError {
  return new StorageError("PreconditionFailed", "A condition of the request does not hold.", {
    details: { Condition: conditions.ifMatch !== undefined ? "If-Match" : "If-Unmodified-Since" },
  });
}

interface SelectedBytes {
  status: 200 | 206;
  start: number;
  /** The position after the last byte. */
  end: number;
  headers: Record<string, string>;
}

function selectBytes(context: RequestContext, record: ObjectRecord): SelectedBytes {
  const { size } = record;
  const contentRange = (start: number, end: number) => `bytes ${start}-${end - 1}/${size}`;
  const partNumber = context.target.query.get("partNumber");
  const rangeHeader = context.header("range");
  if (partNumber !== undefined) {
    if (rangeHeader !== undefined) {
      throw new StorageError("InvalidRequest", "A request names a range or a part, not both.");
    }
    const { start, end } = findPart(record, parseCount(partNumber, "partNumber", 1));
    const headers: Record<string, string> = isMultipart(record)
      ? { "x-amz-mp-parts-count": String(record.segments.length) }
      : {};
    // An empty body has no byte positions to name.
    if (end > start) headers["Content-Range"] = contentRange(start, end);
    return { status: end > start ? 206 : 200, start, end, headers };
  }

  const range = rangeStillHolds(context, record) ? parseRange(rangeHeader, size) : { kind: "whole" as const };
  if (range.kind === "unsatisfiable") {
    throw new StorageError("InvalidRange", "The range lies outside the object.", {
      details: { RangeRequested: rangeHeader ?? "", ActualObjectSize: String(size) },
      headers: { "Content-Range": `bytes */${size}` },
    });
  }
  if (range.kind === "part") {
    const { start, end } = range;
    return { status: 206, start, end, headers: { "Content-Range": contentRange(start, end) } };
  }
  // A checksum is of the whole, so it is given with nothing less.
  const wanted = context.amz("x-amz-checksum-mode")?.toUpperCase() === "ENABLED";
  return { status: 200, start: 0, end: size, headers: wanted ? checksumHeaders(record) : {} };
}

/** If-Range: a range counts only while the object is the one the reader has begun with (RFC 9110 section 13.1.5). */
function rangeStillHolds(context: RequestContext, record: ObjectRecord): boolean {
  const ifRange = context.header("if-range")?.trim();
  if (ifRange === undefined) return true;
  if (ifRange.startsWith('"')) return stripETag(ifRange) === record.etag;
  return Date.parse(ifRange) / 1000 === Math.floor(record.modifiedAt / 1000);
}

function isMultipart(record: ObjectRecord): boolean {
  return record.etag.includes("-");
}

function findPart(record: ObjectRecord, number: number): { start: number; end: number } {
  let start = 0;
  for (const [index, segment] of record.segments.entries()) {
    const end = start + segment.size;
    if (index + 1 === number) return { start, end };
    start = end;
  }
  throw new StorageError("InvalidPartNumber", "The object has no such part.", {
    details: { PartNumberRequested: String(number), ActualPartCount: String(record.segments.length) },
  });
}

/** DELETE of an object. */
export async function deleteObject(context: RequestContext): Promise<void> {
  await context.bucket.objects.delete(context.key, { ifMatch: context.conditions().ifMatch });
  context.sendEmpty(204);
}
