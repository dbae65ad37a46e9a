import { readAttributes } from "../attributes";
import type { ObjectReader } from "../bucket-objects";
import {
  type Checksum,
  type ChecksumAlgorithm,
  checksumElement,
  type DigestName,
  type PartChecksum,
  parseChecksumAlgorithm,
} from "../checksums";
import { evaluateConditions } from "../conditions";
import { StorageError } from "../errors";
import type { ObjectAttributes } from "../records";
import { quoteETag, type RequestContext } from "../request-context";
import { decodeUri } from "../uri";
import { element, type Markup, optionalElement } from "../xml";
import { readWriteConditions } from "./objects";

/** PUT with x-amz-copy-source: makes an object of another one's bytes, without their passing through the client. */
export async function copyObject(context: RequestContext): Promise<void> {
  const { bucket, key, store } = context;
  const replaces = readDirective(context) === "REPLACE";
  const attributes = readAttributes(context);
  const conditions = readWriteConditions(context);
  const source = openCopySource(context);
  try {
    if (source.bucketName === bucket.name && source.key === key && !replaces) {
      throw new StorageError("InvalidRequest", "A copy onto itself must change the metadata.");
    }
    const kept: ObjectAttributes = replaces ? attributes : source.reader.record.attributes;
    const algorithm = readRequestedAlgorithm(context);
    const modifiedAt = context.now().getTime();
    const shared = shareable(source.reader, algorithm);
    if (shared) {
      const record = await bucket.objects.commit(
        key,
        [{ ...shared, mode: "share" }],
        {
          etag: source.reader.record.etag,
          modifiedAt,
          attributes: kept,
          checksum: source.reader.record.checksum,
        },
        conditions,
      );
      sendCopyResult(context, "CopyObjectResult", record.etag, record.modifiedAt, record.checksum);
      return;
    }

    const { record: sourceRecord } = source.reader;
    const wanted = algorithm ?? sourceRecord.checksum?.algorithm;
    const digestNames: DigestName[] = wanted ? ["md5", wanted] : ["md5"];
    const file = await store.receive(source.reader.read(0, sourceRecord.size), digestNames);
    const checksum: Checksum | undefined = wanted && {
      algorithm: wanted,
      type: "FULL_OBJECT",
      value: file.digests.base64(wanted),
    };
    const record = await bucket.objects.commit(
      key,
      [{ path: file.path, size: file.size, mode: "move" }],
      { etag: file.digests.hex("md5"), modifiedAt, attributes: kept, checksum },
      conditions,
    );
    sendCopyResult(context, "CopyObjectResult", record.etag, record.modifiedAt, record.checksum);
  } finally {
    source.reader.close();
  }
}

function readDirective(context: RequestContext): "COPY" | "REPLACE" {
  const directive = context.amz("x-amz-metadata-directive") ?? "COPY";
  if (directive !== "COPY" && directive !== "REPLACE") {
    throw new StorageError("InvalidArgument", "x-amz-metadata-directive must be COPY or REPLACE.");
  }
  return directive;
}

function readRequestedAlgorithm(context: RequestContext): ChecksumAlgorithm | undefined {
  const name = context.amz("x-amz-checksum-algorithm");
  if (name === undefined) return undefined;
  const algorithm = parseChecksumAlgorithm(name);
  if (!algorithm) throw new StorageError("InvalidRequest", "x-amz-checksum-algorithm is not known here.");
  return algorithm;
}

/**
 * The source's data file, when the copy may share it. An object in parts becomes one whole by being copied, with an
 * ETag and a checksum of its bytes, so it must be read through.
 */
function shareable(
  reader: ObjectReader,
  algorithm: ChecksumAlgorithm | undefined,
): { path: string; size: number } | undefined {
  const { record, segmentPaths } = reader;
  const [path] = segmentPaths;
  const whole = segmentPaths.length === 1 && !record.etag.includes("-");
  const checksumFits = algorithm === undefined || record.checksum?.algorithm === algorithm;
  return whole && checksumFits && path !== undefined ? { path, size: record.size } : undefined;
}

export interface CopySource {
  bucketName: string;
  key: string;
  reader: ObjectReader;
}

/**
 * Opens what x-amz-copy-source names, if the x-amz-copy-source-if-* conditions hold. Close its reader in any case.
 * @throws StorageError InvalidArgument, NoSuchBucket, NoSuchKey, PreconditionFailed
 */
export function openCopySource(context: RequestContext): CopySource {
  const header = context.amz("x-amz-copy-source") ?? "";
  const questionMark = header.indexOf("?");
  if (questionMark !== -1) throw new StorageError("NotImplemented", "Objects have no versions here.");
  const source = decodeUri(header).replace(/^\//, "");
  const slash = source.indexOf("/");
  const bucketName = source.slice(0, Math.max(slash, 0));
  const key = source.slice(slash + 1);
  if (bucketName === "" || key === "") {
    throw new StorageError("InvalidArgument", "x-amz-copy-source must be bucket/key, percent-encoded.", {
      details: { ArgumentName: "x-amz-copy-source", ArgumentValue: header },
    });
  }
  const reader = context.store.bucket(bucketName).objects.open(key);
  if (!reader) {
    throw new StorageError("NoSuchKey", "There is no object at the source's key.", { details: { Key: key } });
  }
  // A copy that is not wanted because nothing has changed is a failed condition too: there is no 304 for it.
  if (evaluateConditions(context.conditions("x-amz-copy-source-"), reader.record) !== "proceed") {
    reader.close();
    throw new StorageError("PreconditionFailed", "A condition on the source does not hold.", {
      details: { Condition: "x-amz-copy-source-if-*" },
    });
  }
  return { bucketName, key, reader };
}

/** Answers a copy of an object or of a part. */
export function sendCopyResult(
  context: RequestContext,
  root: "CopyObjectResult" | "CopyPartResult",
  etag: string,
  modifiedAt: number,
  checksum: PartChecksum | undefined,
): void {
  const checksumMarkup: Markup[] = checksum
    ? optionalElement(checksumElement(checksum.algorithm), checksum.value)
    : [];
  context.sendXml(root, [
    element("LastModified", new Date(modifiedAt).toISOString()),
    element("ETag", quoteETag(etag)),
    ...checksumMarkup,
  ]);
}
