import { db, inTransaction, type Tx } from "db/client.server";
import { printPictures, proofs, scans } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { PRINT_PROOF_WIDTHS } from "~/domain/imaging/proof-sizes";
import { enqueue } from "~/platform/queue.server";
import { lockForWritingProofs } from "./proof-locks.server";
import { renderAll, replaceProofs } from "./store-proofs.server";

/** Crops may be changed while a proof is being built; past so many changes the job is left to be tried again. */
const MOST_CHANGES = 5;

/**
 * Asks for the proofs of a print's picture to be built, in the transaction that made it or changed its scan or crop.
 * The proofs there were stay in use until the new ones are ready.
 */
export async function requestPrintProofs(tx: Tx, printPictureId: string): Promise<void> {
  await tx.db
    .update(printPictures)
    .set({ proofState: "waiting", proofFailure: null })
    .where(eq(printPictures.id, printPictureId));
  await enqueue("build-print-proofs", { printPictureId }, { client: tx.client });
}

/**
 * Takes the proofs of a print's picture out of the book and has their objects removed, in the transaction that removes
 * the picture from the print: once its row has gone, nothing would remember what lies in the public bucket.
 */
export async function dropPrintProofs(tx: Tx, picture: { id: string; printId: string }): Promise<void> {
  const dropped = await tx.db
    .delete(proofs)
    .where(eq(proofs.printPictureId, picture.id))
    .returning({ key: proofs.objectKey });
  const formerKeys = [...new Set(dropped.map((row) => row.key))];
  await enqueue("publish-proofs", { printId: picture.printId, formerKeys }, { client: tx.client });
}

/**
 * Builds the proofs of a print's picture from its scan and crop, and has them made public if the print's are. Safe to
 * run again at any point.
 */
export async function buildPrintProofs(printPictureId: string): Promise<void> {
  for (let change = 0; change < MOST_CHANGES; change++) {
    const picture = await readPicture(printPictureId);
    if (picture === undefined || picture.proofState === "ready") return;
    await db
      .update(printPictures)
      .set({ proofState: "working", proofFailure: null })
      .where(eq(printPictures.id, printPictureId));
    const made = await renderAll(picture.objectKey, picture.crop, PRINT_PROOF_WIDTHS);
    const stored = await inTransaction(async (tx) => {
      await lockForWritingProofs(tx);
      const [still] = await tx.db
        .select()
        .from(printPictures)
        .where(eq(printPictures.id, printPictureId))
        .for("update");
      if (still === undefined) return true;
      if (still.scanId !== picture.scanId || !isSameCrop(still.crop, picture.crop)) return false;
      const formerKeys = await replaceProofs(tx, { scanId: still.scanId, printPictureId }, made);
      await tx.db
        .update(printPictures)
        .set({ proofState: "ready", proofFailure: null })
        .where(eq(printPictures.id, printPictureId));
      await enqueue("publish-proofs", { printId: still.printId, formerKeys }, { client: tx.client });
      return true;
    });
    if (stored) return;
  }
  throw new Error("the crop changed again and again while its proofs were being built");
}

async function readPicture(printPictureId: string) {
  const [row] = await db
    .select({
      scanId: printPictures.scanId,
      crop: printPictures.crop,
      proofState: printPictures.proofState,
      objectKey: scans.objectKey,
    })
    .from(printPictures)
    .innerJoin(scans, eq(scans.id, printPictures.scanId))
    .where(eq(printPictures.id, printPictureId));
  return row;
}

type Crop = { x: number; y: number; width: number; height: number };

function isSameCrop(a: Crop, b: Crop): boolean {
  return a.x === b.x && a.y === b.y && a.width === b.width && a.height === b.height;
}
