import { createWriteStream } from "node:fs";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import {
  AbortMultipartUploadCommand,
  CompleteMultipartUploadCommand,
  CopyObjectCommand,
  CreateMultipartUploadCommand,
  DeleteObjectCommand,
  GetObjectCommand,
  HeadBucketCommand,
  HeadObjectCommand,
  ListPartsCommand,
  NotFound,
  PutObjectCommand,
  S3Client,
  UploadPartCommand,
} from "@aws-sdk/client-s3";
import { getSignedUrl } from "@aws-sdk/s3-request-presigner";
import { env } from "./env.server";

const client = new S3Client({
  region: env.S3_REGION,
  ...(env.S3_ENDPOINT === "" ? {} : { endpoint: env.S3_ENDPOINT, forcePathStyle: true }),
  credentials: { accessKeyId: env.S3_ACCESS_KEY_ID, secretAccessKey: env.S3_SECRET_ACCESS_KEY },
  // Presigned addresses would otherwise carry the checksum of an empty body.
  requestChecksumCalculation: "WHEN_REQUIRED",
  responseChecksumValidation: "WHEN_REQUIRED",
  maxAttempts: 3,
  requestHandler: { connectionTimeout: 3_000, requestTimeout: 30_000 },
});

export type Bucket = "private" | "public";
const bucketName = (bucket: Bucket) => (bucket === "private" ? env.S3_BUCKET_PRIVATE : env.S3_BUCKET_PUBLIC);

/** Proofs under content-hashed names never change. */
const IMMUTABLE = "public, max-age=31536000, immutable";

/** A presigned PUT for the browser, bound to key, content type and length; `seconds` until it ends. */
export function presignPut(
  key: string,
  contentType: string,
  bytes: number,
  seconds: number,
): Promise<string> {
  return getSignedUrl(
    client,
    new PutObjectCommand({
      Bucket: env.S3_BUCKET_PRIVATE,
      Key: key,
      ContentType: contentType,
      ContentLength: bytes,
    }),
    { expiresIn: seconds, signableHeaders: new Set(["host", "content-type", "content-length"]) },
  );
}

/** One request of an upload in parts (S3 multipart upload). */
export type MultipartRequest =
  | { step: "create"; contentType: string }
  | { step: "part"; uploadId: string; partNumber: number }
  | { step: "list" | "complete" | "abort"; uploadId: string };

/** A presigned request of an upload in parts to a private object; S3 itself binds the upload's id to the key. */
export function presignMultipart(key: string, request: MultipartRequest, seconds: number): Promise<string> {
  const object = { Bucket: env.S3_BUCKET_PRIVATE, Key: key };
  const options = { expiresIn: seconds };
  switch (request.step) {
    case "create":
      return getSignedUrl(
        client,
        new CreateMultipartUploadCommand({ ...object, ContentType: request.contentType }),
        { ...options, signableHeaders: new Set(["host", "content-type"]) },
      );
    case "part":
      return getSignedUrl(
        client,
        new UploadPartCommand({ ...object, UploadId: request.uploadId, PartNumber: request.partNumber }),
        options,
      );
    case "list":
      return getSignedUrl(client, new ListPartsCommand({ ...object, UploadId: request.uploadId }), options);
    case "complete":
      return getSignedUrl(
        client,
        new CompleteMultipartUploadCommand({ ...object, UploadId: request.uploadId }),
        options,
      );
    case "abort":
      return getSignedUrl(
        client,
        new AbortMultipartUploadCommand({ ...object, UploadId: request.uploadId }),
        options,
      );
  }
}

/** A presigned GET of a private object, ending after `seconds`. */
export function presignGet(key: string, seconds: number, downloadName?: string): Promise<string> {
  return getSignedUrl(
    client,
    new GetObjectCommand({
      Bucket: env.S3_BUCKET_PRIVATE,
      Key: key,
      ...(downloadName === undefined
        ? {}
        : { ResponseContentDisposition: `attachment; filename*=UTF-8''${encodeURIComponent(downloadName)}` }),
    }),
    { expiresIn: seconds },
  );
}

/** Size in bytes of an object, or null where there is none. */
export async function objectSize(bucket: Bucket, key: string): Promise<number | null> {
  try {
    const head = await client.send(new HeadObjectCommand({ Bucket: bucketName(bucket), Key: key }));
    return head.ContentLength ?? 0;
  } catch (error) {
    if (error instanceof NotFound) return null;
    throw error;
  }
}

/** Streams a private object into a file on disk. */
export async function downloadTo(key: string, path: string): Promise<void> {
  const answer = await client.send(new GetObjectCommand({ Bucket: env.S3_BUCKET_PRIVATE, Key: key }));
  if (!(answer.Body instanceof Readable)) throw new Error("storage answered without a body");
  await pipeline(answer.Body, createWriteStream(path));
}

/** Reads a private object as a web stream, with its type and length; null where there is none. */
export async function readObject(
  key: string,
): Promise<{ body: ReadableStream; contentType: string; bytes: number } | null> {
  try {
    const answer = await client.send(new GetObjectCommand({ Bucket: env.S3_BUCKET_PRIVATE, Key: key }));
    if (answer.Body === undefined) return null;
    return {
      body: answer.Body.transformToWebStream(),
      contentType: answer.ContentType ?? "application/octet-stream",
      bytes: answer.ContentLength ?? 0,
    };
  } catch (error) {
    if (error instanceof Error && error.name === "NoSuchKey") return null;
    throw error;
  }
}

/** Writes a whole object (proofs, documents, demo scans). */
export async function putObject(
  bucket: Bucket,
  key: string,
  body: Uint8Array,
  contentType: string,
): Promise<void> {
  await client.send(
    new PutObjectCommand({
      Bucket: bucketName(bucket),
      Key: key,
      Body: body,
      ContentType: contentType,
      ...(bucket === "public" ? { CacheControl: IMMUTABLE } : {}),
    }),
  );
}

/** Copies a proof from the private to the public bucket under the same content-hashed name. */
export async function makePublic(key: string, contentType: string): Promise<void> {
  await client.send(
    new CopyObjectCommand({
      Bucket: env.S3_BUCKET_PUBLIC,
      Key: key,
      CopySource: `${env.S3_BUCKET_PRIVATE}/${key}`,
      MetadataDirective: "REPLACE",
      ContentType: contentType,
      CacheControl: IMMUTABLE,
    }),
  );
}

/** Removes an object; one that is not there is fine. */
export async function removeObject(bucket: Bucket, key: string): Promise<void> {
  await client.send(new DeleteObjectCommand({ Bucket: bucketName(bucket), Key: key }));
}

/** The address under which browsers read a public object. */
export function publicUrl(key: string): string {
  return `${env.S3_PUBLIC_URL.replace(/\/$/, "")}/${key}`;
}

/** Throws when storage does not answer. */
export async function pingStorage(): Promise<void> {
  await client.send(new HeadBucketCommand({ Bucket: env.S3_BUCKET_PRIVATE }), {
    abortSignal: AbortSignal.timeout(3_000),
  });
}
