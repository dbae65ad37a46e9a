import { db, inTransaction } from "db/client.server";
import { scans } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { FRAME_PROOF_WIDTHS, WHOLE } from "~/domain/imaging/proof-sizes";
import { lockForWritingProofs } from "./proof-locks.server";
import { renderAll, replaceProofs } from "./store-proofs.server";

/**
 * Builds the proofs of a whole frame, for the contact sheet. Safe to run again at any point: nothing is to be seen of a
 * run that was cut off but the word "working", and the same scan gives the same objects.
 */
export async function buildProofs(scanId: string): Promise<void> {
  const [scan] = await db.select().from(scans).where(eq(scans.id, scanId));
  if (scan === undefined || scan.state !== "ready" || scan.proofState === "ready") return;
  await db.update(scans).set({ proofState: "working", proofFailure: null }).where(eq(scans.id, scanId));
  const made = await renderAll(scan.objectKey, WHOLE, FRAME_PROOF_WIDTHS);
  await inTransaction(async (tx) => {
    await lockForWritingProofs(tx);
    const [still] = await tx.db
      .select({ id: scans.id })
      .from(scans)
      .where(eq(scans.id, scanId))
      .for("update");
    if (still === undefined) return;
    await replaceProofs(tx, { scanId, printPictureId: null }, made);
    await tx.db.update(scans).set({ proofState: "ready", proofFailure: null }).where(eq(scans.id, scanId));
  });
}
