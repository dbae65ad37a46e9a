import { db, inTransaction } from "db/client.server";
import { frames, scans } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { enqueue } from "~/platform/queue.server";
import { objectSize } from "~/platform/storage.server";

/**
 * The browser says that a scan has been sent. What counts is whether it lies in storage: if so, it goes to be checked.
 * Saying it twice is harmless. Throws AppError `not_allowed`, `not_found`.
 */
export async function finishUpload(
  actor: Actor,
  wanted: { rollId: string; scanId: string },
): Promise<{ arrived: boolean }> {
  mustBeAllowed(actor, "rolls.change");
  const [scan] = await db
    .select({ id: scans.id })
    .from(scans)
    .innerJoin(frames, eq(frames.id, scans.frameId))
    .where(and(eq(scans.id, wanted.scanId), eq(frames.rollId, wanted.rollId)));
  if (scan === undefined) throw new AppError("not_found");
  return { arrived: await takeIfArrived(scan.id) };
}

/** Whether the scan's object is in storage or has been taken before; if it has just come, it goes to be checked. */
export async function takeIfArrived(scanId: string): Promise<boolean> {
  const [scan] = await db
    .select({ key: scans.objectKey, state: scans.state })
    .from(scans)
    .where(eq(scans.id, scanId));
  if (scan === undefined) return false;
  if (scan.state !== "expected") return true;
  const bytes = await objectSize("private", scan.key);
  if (bytes === null) return false;
  await inTransaction(async (tx) => {
    const taken = await tx.db
      .update(scans)
      .set({ state: "checking", bytes, uploadedAt: now() })
      .where(and(eq(scans.id, scanId), eq(scans.state, "expected")))
      .returning({ id: scans.id });
    if (taken.length > 0) await enqueue("check-scan", { scanId }, { client: tx.client });
  });
  return true;
}
