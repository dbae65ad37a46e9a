import { db, inTransaction } from "db/client.server";
import { scans } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { examineScan, type ScanFacts } from "~/domain/imaging/examine.server";
import { refusals } from "~/domain/imaging/refusals";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { enqueue } from "~/platform/queue.server";
import { removeObject } from "~/platform/storage.server";
import { fingerprint, ScanGone, withScanFile } from "./scan-file.server";

type Verdict =
  | { ok: true; facts: ScanFacts; bytes: number; sha256: string }
  | { ok: false; reason: string; bytes: number | null };

/**
 * Looks at a file that has arrived: it counts as a scan only when all of it has been read. A refused file is removed
 * from storage, its reason kept. Safe to run again at any point.
 */
export async function checkScan(scanId: string): Promise<void> {
  const [scan] = await db.select().from(scans).where(eq(scans.id, scanId));
  if (scan === undefined) return;
  if (scan.state === "checking") {
    const verdict = await judge(scan.objectKey, scan.declaredBytes);
    if (verdict.ok) {
      await accept(scanId, verdict);
      return;
    }
    await db
      .update(scans)
      .set({
        state: "refused",
        refusedReason: verdict.reason,
        checkedAt: now(),
        proofState: "waiting",
        proofFailure: null,
      })
      .where(and(eq(scans.id, scanId), eq(scans.state, "checking")));
  }
  const [after] = await db.select({ state: scans.state }).from(scans).where(eq(scans.id, scanId));
  if (after?.state === "refused") await removeObject("private", scan.objectKey);
}

async function judge(objectKey: string, declaredBytes: number): Promise<Verdict> {
  const { pixelLimitMegapixels } = await theStudio();
  try {
    return await withScanFile(objectKey, async (path): Promise<Verdict> => {
      const { bytes, sha256 } = await fingerprint(path);
      if (bytes === 0) return { ok: false, reason: refusals.empty(), bytes };
      if (bytes !== declaredBytes)
        return { ok: false, reason: refusals.sizeDiffers(bytes, declaredBytes), bytes };
      const examined = await examineScan(path, { pixelLimitMegapixels });
      return examined.ok
        ? { ok: true, facts: examined.facts, bytes, sha256 }
        : { ok: false, reason: examined.reason, bytes };
    });
  } catch (error) {
    if (error instanceof ScanGone) return { ok: false, reason: refusals.notInStorage(), bytes: null };
    throw error;
  }
}

async function accept(scanId: string, { facts, bytes, sha256 }: Verdict & { ok: true }): Promise<void> {
  await inTransaction(async (tx) => {
    const taken = await tx.db
      .update(scans)
      .set({
        state: "ready",
        ...facts,
        bytes,
        sha256,
        checkedAt: now(),
        proofState: "waiting",
        proofFailure: null,
      })
      .where(and(eq(scans.id, scanId), eq(scans.state, "checking")))
      .returning({ id: scans.id });
    if (taken.length > 0) await enqueue("build-proofs", { scanId }, { client: tx.client });
  });
}
