import { z } from "zod";
import { LARGEST_SCAN, MOST_FILES_AT_ONCE, type UploadMessage } from "./uploading";

const file = z.object({
  name: z.string().min(1).max(255),
  size: z.number().int().min(0).max(LARGEST_SCAN),
});

/** What the roll's page may say while scans are sent; see `uploading.ts`. */
export const uploadMessage = z.discriminatedUnion("act", [
  z.object({
    act: z.literal("begin"),
    frameId: z.uuid().optional(),
    files: z.array(file).min(1).max(MOST_FILES_AT_ONCE),
  }),
  z.object({
    act: z.literal("sign"),
    scanId: z.uuid(),
    method: z.enum(["PUT", "POST", "GET", "DELETE"]),
    uploadId: z.string().min(1).max(1_024).optional(),
    partNumber: z.number().int().min(1).max(10_000).optional(),
  }),
  z.object({ act: z.literal("finished"), scanId: z.uuid() }),
]) satisfies z.ZodType<UploadMessage>;
