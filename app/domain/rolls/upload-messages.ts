import { z } from "zod";

/*
 * What the roll's page and the server say to each other while scans are sent. The files themselves go from the browser
 * straight to storage; every request there is signed here, one by one, for one scan.
 */

/** A single scan may have so many bytes: what S3 takes in 10,000 parts of the size the page sends. */
export const LARGEST_SCAN = 16 * 1024 * 1024 * 10_000;
export const MOST_FILES_AT_ONCE = 200;

const file = z.object({
  name: z.string().min(1).max(255),
  size: z.number().int().min(0).max(LARGEST_SCAN),
});

export const uploadMessage = z.discriminatedUnion("act", [
  z.object({
    act: z.literal("begin"),
    /** Another version of this frame's scan; otherwise every file becomes a frame of its own. */
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
]);

export type UploadMessage = z.input<typeof uploadMessage>;

/** In the order in which the files were named. */
export type BegunScan = {
  scanId: string;
  frameId: string;
  /** Why nothing need be sent, if so. */
  refused: string | null;
};

export type UploadAnswer = {
  begin: { scans: BegunScan[] };
  sign: { url: string; headers: Record<string, string> };
  finished: { arrived: boolean };
};
