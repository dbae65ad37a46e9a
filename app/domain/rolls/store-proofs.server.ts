import type { Tx } from "db/client.server";
import { proofs } from "db/schema/schema";
import { and, eq, isNull } from "drizzle-orm";
import type { Crop } from "~/domain/imaging/proof-sizes";
import {
  PROOF_TYPE,
  proofKey,
  type RenderedProof,
  renderProofs,
} from "~/domain/imaging/render-proofs.server";
import { theStudio } from "~/domain/studio/studio.server";
import { newId } from "~/platform/ids.server";
import { putObject } from "~/platform/storage.server";
import { ScanGone, withScanFile } from "./scan-file.server";

/** All proofs of a scan or a crop of it: a few megabytes at most, held so that their rows appear together. */
export async function renderAll(
  objectKey: string,
  crop: Crop,
  widths: readonly number[],
): Promise<RenderedProof[]> {
  const { pixelLimitMegapixels } = await theStudio();
  return withScanFile(objectKey, async (path) => {
    const made: RenderedProof[] = [];
    for await (const proof of renderProofs(path, { crop, widths, pixelLimitMegapixels })) made.push(proof);
    return made;
  });
}

/**
 * Puts proofs into the private bucket and their rows in place of the former ones of the same scan or print's picture,
 * all or none. The caller holds the lock for writing proofs. Returns the keys that the former rows had and the new ones
 * have not.
 */
export async function replaceProofs(
  tx: Tx,
  of: { scanId: string; printPictureId: string | null },
  made: readonly RenderedProof[],
): Promise<string[]> {
  await Promise.all(
    made.map((proof) => putObject("private", proofKey(proof), proof.data, PROOF_TYPE[proof.format])),
  );
  const mine =
    of.printPictureId === null
      ? and(eq(proofs.scanId, of.scanId), isNull(proofs.printPictureId))
      : eq(proofs.printPictureId, of.printPictureId);
  const former = await tx.db.delete(proofs).where(mine).returning({ key: proofs.objectKey });
  await tx.db.insert(proofs).values(
    made.map((proof) => ({
      id: newId(),
      ...of,
      format: proof.format,
      width: proof.width,
      height: proof.height,
      bytes: proof.data.length,
      sha256: proof.sha256,
      objectKey: proofKey(proof),
    })),
  );
  const kept = new Set(made.map(proofKey));
  return [...new Set(former.map((row) => row.key))].filter((key) => !kept.has(key));
}

/** Why proofs could not be built, for the photographer. */
export function failureWords(error: unknown): string {
  if (error instanceof ScanGone) return "The scan has gone from storage.";
  if (error instanceof Error && "$metadata" in error) return "Storage did not answer.";
  return "The scan could not be decoded, or the machine ran out of room.";
}
