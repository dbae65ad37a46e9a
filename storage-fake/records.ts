import { z } from "zod";
import { CHECKSUM_ALGORITHMS } from "./checksums";

/* The documents kept beside the data, one for each object, upload and part. */

const checksumSchema = z.object({
  algorithm: z.enum(CHECKSUM_ALGORITHMS),
  type: z.enum(["FULL_OBJECT", "COMPOSITE"]),
  value: z.string(),
});

const attributesSchema = z.object({
  contentType: z.string(),
  cacheControl: z.string().optional(),
  contentDisposition: z.string().optional(),
  contentEncoding: z.string().optional(),
  contentLanguage: z.string().optional(),
  expires: z.string().optional(),
  /** User metadata: names without `x-amz-meta-`, in lower case. Pairs, since a name may be anything. */
  metadata: z.array(z.tuple([z.string(), z.string()])),
});

/** What a client says about an object, given back with it. */
export type ObjectAttributes = z.infer<typeof attributesSchema>;

const segmentSchema = z.object({
  /** Name of the data file, in the folder of the document. */
  file: z.string().regex(/^[\w.-]+\.data$/),
  /** Bytes. */
  size: z.number().int().nonnegative(),
});

/** One data file of an object. An object put whole has one, one put together from parts has one for each part. */
export type Segment = z.infer<typeof segmentSchema>;

export const objectRecordSchema = z.object({
  version: z.literal(1),
  key: z.string().min(1),
  /** Without quotes. */
  etag: z.string(),
  /** Bytes, the sum of the segments. */
  size: z.number().int().nonnegative(),
  /** Milliseconds since the epoch. */
  modifiedAt: z.number(),
  attributes: attributesSchema,
  checksum: checksumSchema.optional(),
  segments: z.array(segmentSchema),
  /** The multipart upload it came from: lets a repeated completion be recognised. */
  uploadId: z.string().optional(),
});

export type ObjectRecord = z.infer<typeof objectRecordSchema>;

export const uploadRecordSchema = z.object({
  version: z.literal(1),
  uploadId: z.string(),
  key: z.string().min(1),
  /** Milliseconds since the epoch. */
  initiatedAt: z.number(),
  attributes: attributesSchema,
  /** The checksum every part and the object will have, when the client asked for one. */
  checksum: checksumSchema.omit({ value: true }).optional(),
});

export type UploadRecord = z.infer<typeof uploadRecordSchema>;

export const partRecordSchema = z.object({
  version: z.literal(1),
  number: z.number().int().min(1).max(10_000),
  /** The MD5 as hex, without quotes. */
  etag: z.string(),
  modifiedAt: z.number(),
  /** By the algorithm of the upload; where that has none, the one the client gave of its own accord. */
  checksum: checksumSchema.omit({ type: true }).optional(),
  segment: segmentSchema,
});

export type PartRecord = z.infer<typeof partRecordSchema>;
