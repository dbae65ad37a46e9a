import { db } from "db/client.server";
import { frames, proofs, rolls, scans } from "db/schema/schema";
import { and, asc, eq, inArray, isNull, ne } from "drizzle-orm";

/** A proof by its id; the studio reads it at `/studio/proofs/:proofId`. */
export type FrameProof = { id: string; format: "avif" | "webp" | "jpeg"; width: number; height: number };

/** The whole-frame proofs of scans, by scan. */
export async function frameProofs(scanIds: readonly string[]): Promise<Map<string, FrameProof[]>> {
  if (scanIds.length === 0) return new Map();
  const rows = await db
    .select({
      scanId: proofs.scanId,
      id: proofs.id,
      format: proofs.format,
      width: proofs.width,
      height: proofs.height,
    })
    .from(proofs)
    .where(and(inArray(proofs.scanId, [...scanIds]), isNull(proofs.printPictureId)))
    .orderBy(asc(proofs.width));
  const found = new Map<string, FrameProof[]>();
  for (const { scanId, ...proof } of rows) found.set(scanId, [...(found.get(scanId) ?? []), proof]);
  return found;
}

export type ScanRow = typeof scans.$inferSelect;

/** The versions of the scans of these frames, newest first, by frame. */
export async function scansOfFrames(frameIds: readonly string[]): Promise<Map<string, ScanRow[]>> {
  if (frameIds.length === 0) return new Map();
  const rows = await db
    .select()
    .from(scans)
    .where(inArray(scans.frameId, [...frameIds]))
    .orderBy(asc(scans.version));
  const found = new Map<string, ScanRow[]>();
  for (const row of rows) found.set(row.frameId, [row, ...(found.get(row.frameId) ?? [])]);
  return found;
}

/** The newest version that has proofs, to be looked at while a newer one is still on its way. */
export function shownScan(versions: readonly ScanRow[]): ScanRow | null {
  return (
    versions.find((scan) => scan.state === "ready" && scan.proofState === "ready") ??
    versions.find((scan) => scan.state === "ready") ??
    null
  );
}

/** For scans whose very file lies in the studio already: "frame 3 of roll 12", by scan. */
export async function sameFiles(of: readonly ScanRow[]): Promise<Map<string, string>> {
  const hashes = [...new Set(of.flatMap((scan) => scan.sha256 ?? []))];
  if (hashes.length === 0) return new Map();
  const others = await db
    .select({
      id: scans.id,
      frameId: scans.frameId,
      sha256: scans.sha256,
      label: frames.label,
      roll: rolls.number,
    })
    .from(scans)
    .innerJoin(frames, eq(frames.id, scans.frameId))
    .innerJoin(rolls, eq(rolls.id, frames.rollId))
    .where(and(inArray(scans.sha256, hashes), ne(scans.state, "refused")))
    .orderBy(asc(scans.createdAt));
  const found = new Map<string, string>();
  for (const scan of of) {
    if (scan.sha256 === null) continue;
    const other = others.find((candidate) => candidate.sha256 === scan.sha256 && candidate.id !== scan.id);
    if (other === undefined) continue;
    const where =
      other.frameId === scan.frameId
        ? "another version of this frame"
        : `frame ${other.label} of roll ${other.roll}`;
    found.set(scan.id, where);
  }
  return found;
}
