import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { mkdtemp, rm, stat } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { pipeline } from "node:stream/promises";
import { downloadTo } from "~/platform/storage.server";

/** Storage had no such object. */
export class ScanGone extends Error {
  override name = "ScanGone";
}

/**
 * Fetches a scan into a file that lasts as long as `work`. Throws `ScanGone` where storage has none. A process that is
 * killed leaves the file to the system's temporary folder.
 */
export async function withScanFile<T>(objectKey: string, work: (path: string) => Promise<T>): Promise<T> {
  const folder = await mkdtemp(join(tmpdir(), "numberleaf-scan-"));
  try {
    const path = join(folder, "scan");
    try {
      await downloadTo(objectKey, path);
    } catch (error) {
      if (error instanceof Error && (error.name === "NoSuchKey" || error.name === "NotFound"))
        throw new ScanGone();
      throw error;
    }
    return await work(path);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** Size in bytes and SHA-256 (hex) of a file. */
export async function fingerprint(path: string): Promise<{ bytes: number; sha256: string }> {
  const hash = createHash("sha256");
  await pipeline(createReadStream(path), hash);
  return { bytes: (await stat(path)).size, sha256: hash.digest("hex") };
}
