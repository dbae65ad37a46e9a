import { inTransaction, type Tx } from "db/client.server";
import { editions, printPictures, prints, scans } from "db/schema/schema";
import { and, asc, eq } from "drizzle-orm";
import { lockEditions } from "~/domain/editions/ledger.server";
import type { Crop } from "~/domain/imaging/proof-sizes";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { dropPrintProofs, requestPrintProofs } from "~/domain/rolls/build-print-proofs.server";
import { AppError } from "~/platform/errors";
import { enqueue } from "~/platform/queue.server";
import { isSameCrop } from "./crop";
import { addPictures, isSlugTaken, type PrintFields, seriesOf, slugFor } from "./make-print.server";
import type { PrintAct } from "./print-form";
import { picturesFixedBecause, slugFixedBecause } from "./publishing";

export type EditOutcome = { kind: "done" } | { kind: "refused"; sentence: string };

const refuse = (sentence: string): EditOutcome => ({ kind: "refused", sentence });
const DONE: EditOutcome = { kind: "done" };

type PrintRow = typeof prints.$inferSelect;

async function lockPrint(tx: Tx, printId: string): Promise<PrintRow> {
  const [print] = await tx.db.select().from(prints).where(eq(prints.id, printId)).for("update");
  if (print === undefined) throw new AppError("not_found");
  return print;
}

/** Why the pictures stay, or null; the print's editions are locked, so that none is opened meanwhile. */
async function fixedBecause(tx: Tx, printId: string): Promise<string | null> {
  const own = await tx.db.select({ id: editions.id }).from(editions).where(eq(editions.printId, printId));
  const locked = await lockEditions(
    tx,
    own.map((edition) => edition.id),
  );
  return picturesFixedBecause([...locked.values()]);
}

/** Changes title, year, series, statement and, while it is a draft, the address. Throws AppError `not_allowed`, `not_found`. */
export async function editWords(
  actor: Actor,
  printId: string,
  fields: PrintFields,
): Promise<EditOutcome | { kind: "slug_taken" }> {
  mustBeAllowed(actor, "prints.change");
  try {
    return await inTransaction(async (tx): Promise<EditOutcome> => {
      const print = await lockPrint(tx, printId);
      // A field that is out of use is not sent: then the address stays.
      const slug =
        fields.slug !== ""
          ? fields.slug
          : print.state === "draft"
            ? await slugFor(tx, fields.title, printId)
            : print.slug;
      const fixed = slugFixedBecause(print.state);
      if (slug !== print.slug && fixed !== null) return refuse(fixed);
      if (print.state === "published" && fields.year === null) {
        return refuse("A print in the shop has its year of exposure.");
      }
      await tx.db
        .update(prints)
        .set({
          title: fields.title,
          year: fields.year,
          seriesId: await seriesOf(tx, fields),
          slug,
          statement: fields.statement,
          shownBeforeRelease: fields.shownBeforeRelease,
        })
        .where(eq(prints.id, printId));
      if (print.shownBeforeRelease !== fields.shownBeforeRelease) {
        await enqueue("publish-proofs", { printId }, { client: tx.client });
      }
      return DONE;
    });
  } catch (error) {
    if (isSlugTaken(error)) return { kind: "slug_taken" };
    throw error;
  }
}

/** Changes the description of a picture and, while no edition was opened, its crop and scan version. */
export async function editPicture(
  actor: Actor,
  printId: string,
  change: { pictureId: string; scanId?: string | undefined; crop?: Crop | undefined; description: string },
): Promise<EditOutcome> {
  mustBeAllowed(actor, "prints.change");
  return inTransaction(async (tx): Promise<EditOutcome> => {
    const print = await lockPrint(tx, printId);
    const picture = await pictureOf(tx, printId, change.pictureId);
    const crop = change.crop ?? picture.crop;
    const scanId = change.scanId ?? picture.scanId;
    const rebuilt = scanId !== picture.scanId || !isSameCrop(crop, picture.crop);
    if (rebuilt) {
      const fixed = await fixedBecause(tx, printId);
      if (fixed !== null) return refuse(fixed);
    }
    if (print.state === "published" && change.description === "") {
      return refuse("A print in the shop keeps a description for those who cannot see it.");
    }
    if (scanId !== picture.scanId) {
      const [scan] = await tx.db
        .select({ id: scans.id })
        .from(scans)
        .where(and(eq(scans.id, scanId), eq(scans.frameId, picture.frameId), eq(scans.state, "ready")));
      if (scan === undefined) return refuse("That version of the scan cannot be used.");
    }
    await tx.db
      .update(printPictures)
      .set({ crop, scanId, description: change.description })
      .where(eq(printPictures.id, picture.id));
    if (rebuilt) await requestPrintProofs(tx, picture.id);
    return DONE;
  });
}

async function pictureOf(tx: Tx, printId: string, pictureId: string) {
  const [picture] = await tx.db
    .select()
    .from(printPictures)
    .where(and(eq(printPictures.id, pictureId), eq(printPictures.printId, printId)))
    .for("update");
  if (picture === undefined) throw new AppError("not_found");
  return picture;
}

/** Adds frames to a print whose editions are all drafts; what is in it already is left out. */
export async function addToPrint(
  actor: Actor,
  printId: string,
  frameIds: readonly string[],
): Promise<EditOutcome> {
  mustBeAllowed(actor, "prints.change");
  return inTransaction(async (tx): Promise<EditOutcome> => {
    const print = await lockPrint(tx, printId);
    const fixed = await fixedBecause(tx, printId);
    if (fixed !== null) return refuse(fixed);
    if (print.state === "published") {
      return refuse(
        "Withdraw the print from the shop first: a new picture needs its description before it is shown.",
      );
    }
    return (await addPictures(tx, printId, frameIds)) > 0
      ? DONE
      : refuse("None of these frames could be added: each needs a checked scan and is in a print once.");
  });
}

/** Moves a picture of a portfolio one place earlier or later. */
export async function movePicture(
  actor: Actor,
  printId: string,
  pictureId: string,
  to: "earlier" | "later",
): Promise<EditOutcome> {
  mustBeAllowed(actor, "prints.change");
  return inTransaction(async (tx): Promise<EditOutcome> => {
    await lockPrint(tx, printId);
    const fixed = await fixedBecause(tx, printId);
    if (fixed !== null) return refuse(fixed);
    const all = await tx.db
      .select()
      .from(printPictures)
      .where(eq(printPictures.printId, printId))
      .orderBy(asc(printPictures.position));
    const at = all.findIndex((picture) => picture.id === pictureId);
    const [one, other] = [all[at], all[to === "earlier" ? at - 1 : at + 1]];
    if (one === undefined || other === undefined) return DONE;
    // Positions are unique: one of the two steps aside first.
    const place = (id: string, position: number) =>
      tx.db.update(printPictures).set({ position }).where(eq(printPictures.id, id));
    await place(one.id, -1);
    await place(other.id, one.position);
    await place(one.id, other.position);
    return DONE;
  });
}

/** Takes a picture out of a portfolio; the last one stays. */
export async function removePicture(actor: Actor, printId: string, pictureId: string): Promise<EditOutcome> {
  mustBeAllowed(actor, "prints.change");
  return inTransaction(async (tx): Promise<EditOutcome> => {
    await lockPrint(tx, printId);
    const fixed = await fixedBecause(tx, printId);
    if (fixed !== null) return refuse(fixed);
    const all = await tx.db.select().from(printPictures).where(eq(printPictures.printId, printId));
    const picture = all.find((one) => one.id === pictureId);
    if (picture === undefined) return DONE;
    if (all.length === 1) return refuse("A print needs a picture: add another one first.");
    await dropPrintProofs(tx, picture);
    await tx.db.delete(printPictures).where(eq(printPictures.id, picture.id));
    return DONE;
  });
}

/** Throws a print away that was never in the shop and has no edition, not even a planned one. */
export async function deletePrint(actor: Actor, printId: string): Promise<EditOutcome> {
  mustBeAllowed(actor, "prints.change");
  return inTransaction(async (tx): Promise<EditOutcome> => {
    const [print] = await tx.db.select().from(prints).where(eq(prints.id, printId)).for("update");
    if (print === undefined) return DONE;
    if (print.state !== "draft")
      return refuse("A print that has been in the shop is withdrawn, not deleted.");
    const own = await tx.db.select({ id: editions.id }).from(editions).where(eq(editions.printId, printId));
    if (own.length > 0) return refuse("The print has editions: delete their drafts first.");
    const pictures = await tx.db.select().from(printPictures).where(eq(printPictures.printId, printId));
    for (const picture of pictures) {
      await dropPrintProofs(tx, picture);
      await tx.db.delete(printPictures).where(eq(printPictures.id, picture.id));
    }
    await tx.db.delete(prints).where(eq(prints.id, printId));
    return DONE;
  });
}

/** Does what a press of the print's page asks of its pictures, or of the print as a whole. */
export function actOnPictures(
  actor: Actor,
  printId: string,
  form: Exclude<PrintAct, { intent: "words" | "publish" | "withdraw" }>,
): Promise<EditOutcome> {
  switch (form.intent) {
    case "picture":
      return editPicture(actor, printId, form);
    case "add-pictures":
      return addToPrint(actor, printId, form.frames);
    case "move-picture:earlier":
      return movePicture(actor, printId, form.pictureId, "earlier");
    case "move-picture:later":
      return movePicture(actor, printId, form.pictureId, "later");
    case "remove-picture":
      return removePicture(actor, printId, form.pictureId);
    case "delete":
      return deletePrint(actor, printId);
  }
}
