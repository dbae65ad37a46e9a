import { inTransaction } from "db/client.server";
import { frames, printPictures, proofs, rolls, scans } from "db/schema/schema";
import { and, eq, inArray } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";
import { removeObject } from "~/platform/storage.server";
import { lockForRemovingProofs } from "./proof-locks.server";
import { removeUnused } from "./publish-proofs.server";

export type FrameRemoved = { code: "removed" } | { code: "in_a_print" } | { code: "has_a_scan" };

/**
 * Takes a frame off its roll, with its scans and proofs: one that was refused, never arrived or shows nothing. A frame
 * that a print rests on stays. One with a scan that counts goes only with `sure`. The frames after it move up; their
 * numbers on the film's edge stay. Throws AppError `not_allowed`, `not_found`.
 */
export async function removeFrame(
  actor: Actor,
  { rollId, frameId, sure }: { rollId: string; frameId: string; sure: boolean },
): Promise<FrameRemoved> {
  mustBeAllowed(actor, "rolls.change");
  const outcome = await inTransaction(async (tx): Promise<{ code: FrameRemoved["code"]; keys: string[] }> => {
    await lockForRemovingProofs(tx);
    await tx.db.select({ id: rolls.id }).from(rolls).where(eq(rolls.id, rollId)).for("update");
    const [frame] = await tx.db
      .select({ id: frames.id })
      .from(frames)
      .where(and(eq(frames.id, frameId), eq(frames.rollId, rollId)))
      .for("update");
    if (frame === undefined) throw new AppError("not_found");
    const [used] = await tx.db
      .select({ id: printPictures.id })
      .from(printPictures)
      .where(eq(printPictures.frameId, frameId))
      .limit(1);
    if (used !== undefined) return { code: "in_a_print", keys: [] };
    const versions = await tx.db.select().from(scans).where(eq(scans.frameId, frameId));
    if (!sure && versions.some((scan) => scan.state === "ready" || scan.state === "checking")) {
      return { code: "has_a_scan", keys: [] };
    }
    const ids = versions.map((scan) => scan.id);
    if (ids.length > 0) {
      const gone = await tx.db
        .delete(proofs)
        .where(inArray(proofs.scanId, ids))
        .returning({ key: proofs.objectKey });
      await tx.db.delete(scans).where(inArray(scans.id, ids));
      await removeUnused(tx, [...new Set(gone.map((row) => row.key))]);
    }
    await tx.db.delete(frames).where(eq(frames.id, frameId));
    await closeGaps(tx, rollId);
    return { code: "removed", keys: versions.map((scan) => scan.objectKey) };
  });
  // After the commit: a scan whose frame is still there must never be missing.
  for (const key of outcome.keys) await removeObject("private", key);
  return { code: outcome.code };
}

type Tx = Parameters<Parameters<typeof inTransaction>[0]>[0];

async function closeGaps(tx: Tx, rollId: string): Promise<void> {
  const order = await tx.db
    .select({ id: frames.id, position: frames.position })
    .from(frames)
    .where(eq(frames.rollId, rollId))
    .orderBy(frames.position);
  for (const [i, frame] of order.entries()) {
    if (frame.position !== i + 1) {
      await tx.db
        .update(frames)
        .set({ position: i + 1 })
        .where(eq(frames.id, frame.id));
    }
  }
}
