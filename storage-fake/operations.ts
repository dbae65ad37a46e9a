import { StorageError } from "./errors";
import { deleteObjects } from "./handlers/batch-deletion";
import { copyObject } from "./handlers/copying";
import { listBuckets, listObjectsV2 } from "./handlers/listing";
import {
  abortMultipartUpload,
  completeMultipartUpload,
  createMultipartUpload,
  listMultipartUploads,
  listParts,
  uploadPart,
  uploadPartCopy,
} from "./handlers/multipart";
import { deleteObject, getObject, putObject } from "./handlers/objects";
import type { RequestContext } from "./request-context";

type Handler = (context: RequestContext) => void | Promise<void>;

/**
 * Parameters that turn a request into another one, about something this server does not keep. They are refused by
 * name: `PUT ?tagging` taken for a plain PUT would overwrite the object with its own tags.
 */
const UNSUPPORTED_SUBRESOURCES = [
  "accelerate",
  "acl",
  "analytics",
  "attributes",
  "cors",
  "encryption",
  "intelligent-tiering",
  "inventory",
  "legal-hold",
  "lifecycle",
  "logging",
  "metadataTable",
  "metrics",
  "notification",
  "object-lock",
  "ownershipControls",
  "policy",
  "policyStatus",
  "publicAccessBlock",
  "renameObject",
  "replication",
  "requestPayment",
  "restore",
  "retention",
  "select",
  "session",
  "tagging",
  "torrent",
  "versionId",
  "versioning",
  "versions",
  "website",
];

/** Whether a stranger may do this in the public bucket: read one object, nothing else. */
export function isObjectRead(context: RequestContext): boolean {
  const { key, query } = context.target;
  const { method } = context.request;
  return (method === "GET" || method === "HEAD") && key !== undefined && !query.has("uploadId");
}

/**
 * Finds what a request asks for.
 * @throws StorageError NotImplemented, MethodNotAllowed
 */
export function findHandler(context: RequestContext): Handler {
  const { bucket, key, query } = context.target;
  const unsupported = UNSUPPORTED_SUBRESOURCES.find((name) => query.has(name));
  if (unsupported !== undefined)
    throw new StorageError("NotImplemented", `?${unsupported} is not supported here.`);
  if (bucket === undefined) return findServiceHandler(context);
  return key === undefined ? findBucketHandler(context) : findObjectHandler(context);
}

function findServiceHandler(context: RequestContext): Handler {
  if (context.request.method === "GET") return listBuckets;
  throw notAllowed(context);
}

function findBucketHandler(context: RequestContext): Handler {
  const { query } = context.target;
  switch (context.request.method) {
    case "HEAD":
      return headBucket;
    case "GET":
      if (query.has("uploads")) return listMultipartUploads;
      if (query.has("location")) return getBucketLocation;
      if (query.get("list-type") === "2") return listObjectsV2;
      throw new StorageError("NotImplemented", "Objects are listed with list-type=2 here.");
    case "POST":
      if (query.has("delete")) return deleteObjects;
      throw new StorageError("NotImplemented", "Uploads by a form are not supported here.");
    case "PUT":
    case "DELETE":
      throw new StorageError("NotImplemented", "Buckets are made by the server's configuration.");
    default:
      throw notAllowed(context);
  }
}

function findObjectHandler(context: RequestContext): Handler {
  const { query } = context.target;
  const ofUpload = query.has("uploadId");
  switch (context.request.method) {
    case "HEAD":
      return getObject;
    case "GET":
      return ofUpload ? listParts : getObject;
    case "PUT": {
      const copies = context.amz("x-amz-copy-source") !== undefined;
      if (ofUpload || query.has("partNumber")) return copies ? uploadPartCopy : uploadPart;
      return copies ? copyObject : putObject;
    }
    case "POST":
      if (query.has("uploads")) return createMultipartUpload;
      if (ofUpload) return completeMultipartUpload;
      throw notAllowed(context);
    case "DELETE":
      return ofUpload ? abortMultipartUpload : deleteObject;
    default:
      throw notAllowed(context);
  }
}

function notAllowed(context: RequestContext): StorageError {
  return new StorageError("MethodNotAllowed", "The method cannot be used on this.", {
    details: { Method: context.request.method ?? "" },
  });
}

/** HEAD of a bucket: is it there. */
function headBucket(context: RequestContext): void {
  if (context.bucket) context.sendEmpty(200);
}

/** GET ?location: the region, where the answer for the protocol's first region is empty. */
function getBucketLocation(context: RequestContext): void {
  const { region } = context.signed.scope;
  if (context.bucket) context.sendXml("LocationConstraint", region === "us-east-1" ? "" : region);
}
