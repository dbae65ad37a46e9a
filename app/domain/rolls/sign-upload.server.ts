import { db } from "db/client.server";
import { frames, scans } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";
import { presignMultipart, presignPut } from "~/platform/storage.server";

/** Enough for a part or a small scan on a slow line; each further request is signed anew. */
const SECONDS = 3600;

/** What a scan is stored as: its real type is what its contents say, once they have been read. */
const STORED_AS = "application/octet-stream";

type Wanted = {
  rollId: string;
  scanId: string;
  method: "PUT" | "POST" | "GET" | "DELETE";
  uploadId?: string | undefined;
  partNumber?: number | undefined;
};

/**
 * Signs one request of an upload: the whole file, or one step of an upload in parts. Only for a scan of this roll that
 * is still expected; its key is ours, never the browser's.
 *
 * Throws AppError `not_allowed`, `not_found`, `gone` (it has arrived already), `bad_request`.
 */
export async function signUpload(
  actor: Actor,
  wanted: Wanted,
): Promise<{ url: string; headers: Record<string, string> }> {
  mustBeAllowed(actor, "rolls.change");
  const [scan] = await db
    .select({ key: scans.objectKey, bytes: scans.declaredBytes, state: scans.state })
    .from(scans)
    .innerJoin(frames, eq(frames.id, scans.frameId))
    .where(and(eq(scans.id, wanted.scanId), eq(frames.rollId, wanted.rollId)));
  if (scan === undefined) throw new AppError("not_found");
  if (scan.state !== "expected") throw new AppError("gone", "the scan has arrived already");

  const { method, uploadId, partNumber } = wanted;
  const typed = { "Content-Type": STORED_AS };
  if (uploadId === undefined) {
    if (method === "PUT") {
      return { url: await presignPut(scan.key, STORED_AS, scan.bytes, SECONDS), headers: typed };
    }
    if (method === "POST") {
      const create = { step: "create", contentType: STORED_AS } as const;
      return { url: await presignMultipart(scan.key, create, SECONDS), headers: typed };
    }
    throw new AppError("bad_request", "no such step of an upload");
  }
  if (method === "PUT") {
    if (partNumber === undefined) throw new AppError("bad_request", "a part has a number");
    const part = { step: "part", uploadId, partNumber } as const;
    return { url: await presignMultipart(scan.key, part, SECONDS), headers: {} };
  }
  const step = ({ POST: "complete", GET: "list", DELETE: "abort" } as const)[method];
  return { url: await presignMultipart(scan.key, { step, uploadId }, SECONDS), headers: {} };
}
