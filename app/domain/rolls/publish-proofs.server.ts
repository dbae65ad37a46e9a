import { db, inTransaction, type Tx } from "db/client.server";
import { editions, printPictures, prints, proofs } from "db/schema/schema";
import { and, eq, inArray, isNotNull, ne } from "drizzle-orm";
import { PROOF_TYPE } from "~/domain/imaging/render-proofs.server";
import { now } from "~/platform/clock";
import { makePublic, removeObject } from "~/platform/storage.server";
import { lockForRemovingProofs } from "./proof-locks.server";
import { picturesArePublic } from "./visibility";

/**
 * Brings the public bucket into line with what may be seen of a print: its proofs lie there exactly while
 * `picturesArePublic` says so. `formerKeys` are names its pictures no longer use; they go from both buckets unless
 * something else needs them. Safe to run at any time and to be cut off. One runs at a time and reads the print after
 * its turn has come, so the one asked for by the latest change has the last word; the print's row is not locked
 * meanwhile, so that nobody at a page waits for storage.
 */
export async function publishProofs(printId: string, formerKeys: readonly string[] = []): Promise<void> {
  await inTransaction(async (tx) => {
    await lockForRemovingProofs(tx);
    const [print] = await tx.db.select().from(prints).where(eq(prints.id, printId));
    if (print === undefined) {
      await removeUnused(tx, formerKeys);
      return;
    }
    const released = await tx.db
      .select({ state: editions.state, releaseAt: editions.releaseAt })
      .from(editions)
      .where(eq(editions.printId, printId));
    const objects = await objectsOf(tx, printId);
    const shown = picturesArePublic(print, released, now());
    if (shown) {
      for (const object of objects) await makePublic(object.key, PROOF_TYPE[object.format]);
    } else {
      const keys = objects.map((object) => object.key);
      const needed = await publicElsewhere(tx, keys, printId);
      for (const key of keys) if (!needed.has(key)) await removeObject("public", key);
    }
    const proofsPublicAt = shown && objects.length > 0 ? (print.proofsPublicAt ?? now()) : null;
    await tx.db.update(prints).set({ proofsPublicAt }).where(eq(prints.id, printId));
    await removeUnused(tx, formerKeys);
  });
}

/** Prints whose proofs are public but should not be, or the other way round: releases that have come, mostly. */
export async function printsOutOfLine(): Promise<string[]> {
  const candidates = await db
    .selectDistinct({
      id: prints.id,
      state: prints.state,
      shownBeforeRelease: prints.shownBeforeRelease,
      proofsPublicAt: prints.proofsPublicAt,
    })
    .from(prints)
    .innerJoin(printPictures, eq(printPictures.printId, prints.id))
    .innerJoin(proofs, eq(proofs.printPictureId, printPictures.id));
  const released = await db
    .select({ printId: editions.printId, state: editions.state, releaseAt: editions.releaseAt })
    .from(editions);
  return candidates
    .filter((print) => {
      const own = released.filter((edition) => edition.printId === print.id);
      return picturesArePublic(print, own, now()) !== (print.proofsPublicAt !== null);
    })
    .map((print) => print.id);
}

async function objectsOf(tx: Tx, printId: string) {
  return tx.db
    .selectDistinct({ key: proofs.objectKey, format: proofs.format })
    .from(proofs)
    .innerJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
    .where(eq(printPictures.printId, printId));
}

/** Of these keys, those that another print shows to everyone. */
async function publicElsewhere(tx: Tx, keys: readonly string[], exceptPrintId: string): Promise<Set<string>> {
  if (keys.length === 0) return new Set();
  const rows = await tx.db
    .selectDistinct({ key: proofs.objectKey })
    .from(proofs)
    .innerJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
    .innerJoin(prints, eq(prints.id, printPictures.printId))
    .where(
      and(
        inArray(proofs.objectKey, [...keys]),
        ne(prints.id, exceptPrintId),
        isNotNull(prints.proofsPublicAt),
      ),
    );
  return new Set(rows.map((row) => row.key));
}

/** Removes objects that no proof uses any more, from both buckets. The caller holds the lock for removing. */
export async function removeUnused(tx: Tx, keys: readonly string[]): Promise<void> {
  if (keys.length === 0) return;
  const used = await tx.db
    .selectDistinct({ key: proofs.objectKey, public: prints.proofsPublicAt })
    .from(proofs)
    .leftJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
    .leftJoin(prints, eq(prints.id, printPictures.printId))
    .where(inArray(proofs.objectKey, [...keys]));
  const inUse = new Set(used.map((row) => row.key));
  const shown = new Set(used.filter((row) => row.public !== null).map((row) => row.key));
  for (const key of keys) {
    if (!shown.has(key)) await removeObject("public", key);
    if (!inUse.has(key)) await removeObject("private", key);
  }
}
