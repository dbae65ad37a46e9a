import { randomUUID } from "node:crypto";
import { copyFile, type FileHandle, link, open, rename, rm } from "node:fs/promises";
import path from "node:path";
import { type DigestName, DigestSet, type Digests } from "./checksums";

/** Only the account that runs the server reads the files: scans are private. */
export const FILE_MODE = 0o600;
export const FOLDER_MODE = 0o700;

/** A finished file in the temporary folder: all of its bytes are on the disk, and it is not part of anything yet. */
export interface TemporaryFile {
  path: string;
  /** Bytes. */
  size: number;
  digests: Digests;
}

/**
 * Streams bytes into a new temporary file, forces them to the disk and takes their digests on the way. Nothing is
 * kept in memory but the piece at hand. When the source fails, the file is removed and the failure passed on.
 * @param afterwards called once the digests are known; when it throws, the file is removed too
 */
export async function writeTemporaryFile(
  folder: string,
  source: AsyncIterable<Buffer>,
  digestNames: Iterable<DigestName>,
  afterwards: (digests: Digests, size: number) => void = () => {},
): Promise<TemporaryFile> {
  const filePath = path.join(folder, randomUUID());
  const handle = await open(filePath, "wx", FILE_MODE);
  try {
    const digestSet = new DigestSet(digestNames);
    let size = 0;
    for await (const piece of source) {
      digestSet.update(piece);
      await writeAll(handle, piece);
      size += piece.length;
    }
    const digests = digestSet.finish();
    afterwards(digests, size);
    await handle.sync();
    await handle.close();
    return { path: filePath, size, digests };
  } catch (error) {
    await handle.close();
    await removeFile(filePath);
    throw error;
  }
}

async function writeAll(handle: FileHandle, data: Buffer): Promise<void> {
  let offset = 0;
  while (offset < data.length) {
    const { bytesWritten } = await handle.write(data, offset, data.length - offset);
    offset += bytesWritten;
  }
}

/** Writes a JSON document to a new temporary file, forced to the disk, and returns its path. */
export async function writeJsonTemporary(folder: string, value: unknown): Promise<string> {
  const bytes = Buffer.from(JSON.stringify(value));
  return (await writeTemporaryFile(folder, onePiece(bytes), [])).path;
}

/**
 * Puts a JSON document in place in one step: whoever reads the target sees the old document or the new one, also
 * after a power cut.
 */
export async function writeJsonFile(folder: string, target: string, value: unknown): Promise<void> {
  const temporary = await writeJsonTemporary(folder, value);
  try {
    await rename(temporary, target);
  } catch (error) {
    await removeFile(temporary);
    throw error;
  }
  await syncFolder(path.dirname(target));
}

async function* onePiece(bytes: Buffer): AsyncGenerator<Buffer> {
  yield bytes;
}

/** Makes the names in a folder durable. */
export async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, "r");
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** Gives a file that never changes a second name, or a second copy where the file system has no links. */
export async function linkOrCopy(source: string, target: string): Promise<void> {
  try {
    await link(source, target);
  } catch (error) {
    if (!hasCode(error, "EPERM", "ENOTSUP", "EMLINK", "EXDEV")) throw error;
    await copyFile(source, target);
    const handle = await open(target, "r");
    await handle.sync();
    await handle.close();
  }
}

/** Removes a file that may be gone already. */
export async function removeFile(filePath: string): Promise<void> {
  await rm(filePath, { force: true });
}

/** Whether an error of the file system has one of these codes. */
export function hasCode(error: unknown, ...codes: string[]): boolean {
  return (
    error instanceof Error && "code" in error && typeof error.code === "string" && codes.includes(error.code)
  );
}
