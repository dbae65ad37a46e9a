/*
 * What the roll's page and the server say to each other while scans are sent. The files themselves go from the browser
 * straight to storage; every request there is signed, one by one, for one scan. Checked by `upload-messages.ts`, which
 * the browser has no need of.
 */

/** What S3 takes in 10,000 parts of the size the page sends, in bytes. */
export const LARGEST_SCAN = 16 * 1024 * 1024 * 10_000;

export const MOST_FILES_AT_ONCE = 200;

export type UploadMessage =
  | {
      act: "begin";
      /** Another version of this frame's scan; otherwise every file becomes a frame of its own. */
      frameId?: string | undefined;
      files: { name: string; size: number }[];
    }
  | {
      act: "sign";
      scanId: string;
      method: "PUT" | "POST" | "GET" | "DELETE";
      uploadId?: string | undefined;
      partNumber?: number | undefined;
    }
  | { act: "finished"; scanId: string };

export type BegunScan = {
  scanId: string;
  frameId: string;
  /** Why nothing need be sent, if so. */
  refused: string | null;
};

export type UploadAnswer = {
  /** In the order in which the files were named. */
  begin: { scans: BegunScan[] };
  sign: { url: string; headers: Record<string, string> };
  finished: { arrived: boolean };
};
