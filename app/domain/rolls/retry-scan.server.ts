import { inTransaction } from "db/client.server";
import { frames, scans } from "db/schema/schema";
import { and, eq, inArray } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { enqueue } from "~/platform/queue.server";

/**
 * Tries again what the queue has given up for a roll, or for one frame of it: checking a file or building its proofs.
 * Answers how many scans that were. Throws AppError `not_allowed`.
 */
export async function retryScans(actor: Actor, of: { rollId: string; frameId?: string }): Promise<number> {
  mustBeAllowed(actor, "rolls.change");
  return inTransaction(async (tx) => {
    const failed = await tx.db
      .select({ id: scans.id })
      .from(scans)
      .innerJoin(frames, eq(frames.id, scans.frameId))
      .where(
        and(
          eq(frames.rollId, of.rollId),
          eq(scans.proofState, "failed"),
          of.frameId === undefined ? undefined : eq(frames.id, of.frameId),
        ),
      );
    if (failed.length === 0) return 0;
    // Only the request that takes a scan out of "failed" makes a job of it.
    const taken = await tx.db
      .update(scans)
      .set({ proofState: "waiting", proofFailure: null })
      .where(
        and(
          inArray(
            scans.id,
            failed.map((scan) => scan.id),
          ),
          eq(scans.proofState, "failed"),
        ),
      )
      .returning({ id: scans.id, state: scans.state });
    for (const scan of taken) {
      if (scan.state === "checking") await enqueue("check-scan", { scanId: scan.id }, { client: tx.client });
      if (scan.state === "ready") await enqueue("build-proofs", { scanId: scan.id }, { client: tx.client });
    }
    return taken.length;
  });
}
