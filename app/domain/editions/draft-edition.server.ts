import { db as database, inTransaction, type Tx } from "db/client.server";
import { editions, formats, papers, priceSteps, prints } from "db/schema/schema";
import { asc, eq, inArray } from "drizzle-orm";
import { can, type Role } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import type { DraftEdition } from "./edition-form";
import { lockEdition } from "./ledger.server";
import { openingProblems } from "./open-edition.server";

type Who = { roles: readonly Role[] };

function mayPlan(actor: Who): void {
  if (!can(actor.roles, "editions.open")) throw new AppError("not_allowed", "editions.open");
}

export type DraftOutcome =
  | { kind: "saved"; editionId: string }
  /** A paper that is not in the list, or has been retired. */
  | { kind: "no_such_paper"; format: number }
  /** It was opened meanwhile: nothing was changed. */
  | { kind: "opened_already"; editionId: string };

/**
 * Keeps a plan as a draft: a new one under the id made with its form (sent twice, it is kept once), or in place of what
 * that draft said before. Throws AppError `not_allowed`, `not_found` (no such print).
 */
export async function saveDraft(
  actor: Who,
  { id, printId, draft }: { id: string; printId: string; draft: DraftEdition },
): Promise<DraftOutcome> {
  mayPlan(actor);
  const { currency } = await theStudio();
  return inTransaction(async (tx): Promise<DraftOutcome> => {
    const [print] = await tx.db
      .select({ id: prints.id })
      .from(prints)
      .where(eq(prints.id, printId))
      .for("share");
    if (print === undefined) throw new AppError("not_found");
    const { formats: planned, ...facts } = draft;
    const [made] = await tx.db
      .insert(editions)
      .values({ id, printId, ...facts })
      .onConflictDoNothing()
      .returning({ id: editions.id });
    const edition = await lockEdition(tx, id);
    if (edition.printId !== printId) throw new AppError("not_found");
    if (edition.state !== "draft") return { kind: "opened_already", editionId: id };
    const wrong = await unknownPaper(tx, planned, made === undefined ? id : null);
    if (wrong !== null) {
      if (made !== undefined) await tx.db.delete(editions).where(eq(editions.id, id));
      return { kind: "no_such_paper", format: wrong };
    }
    if (made === undefined) {
      await removeFormats(tx, id);
      await tx.db.update(editions).set(facts).where(eq(editions.id, id));
    }
    await insertFormats(tx, id, planned, currency);
    return { kind: "saved", editionId: id };
  });
}

/** Which format names a paper that cannot be taken; one the draft has already stays allowed after it was retired. */
async function unknownPaper(
  tx: Tx,
  planned: DraftEdition["formats"],
  editionId: string | null,
): Promise<number | null> {
  const ids = planned.map((format) => format.paperId);
  const known = await tx.db
    .select({ id: papers.id, retired: papers.retired })
    .from(papers)
    .where(inArray(papers.id, ids));
  const had =
    editionId === null
      ? []
      : await tx.db.select({ id: formats.paperId }).from(formats).where(eq(formats.editionId, editionId));
  const at = planned.findIndex((format) => {
    const paper = known.find((one) => one.id === format.paperId);
    return paper === undefined || (paper.retired && !had.some((one) => one.id === paper.id));
  });
  return at === -1 ? null : at;
}

async function removeFormats(tx: Tx, editionId: string): Promise<void> {
  const own = tx.db.select({ id: formats.id }).from(formats).where(eq(formats.editionId, editionId));
  await tx.db.delete(priceSteps).where(inArray(priceSteps.formatId, own));
  await tx.db.delete(formats).where(eq(formats.editionId, editionId));
}

async function insertFormats(
  tx: Tx,
  editionId: string,
  planned: DraftEdition["formats"],
  currency: string,
): Promise<void> {
  for (const [position, { steps, ...format }] of planned.entries()) {
    const formatId = newId();
    await tx.db.insert(formats).values({ id: formatId, editionId, position, ...format });
    if (steps.length > 0) {
      await tx.db
        .insert(priceSteps)
        .values(steps.map((step) => ({ id: newId(), formatId, ...step, currency })));
    }
  }
}

/** Throws a draft away; false when it has been opened and stays in the book. Throws AppError `not_allowed`. */
export async function deleteDraft(actor: Who, editionId: string): Promise<boolean> {
  mayPlan(actor);
  return inTransaction(async (tx) => {
    const [edition] = await tx.db.select().from(editions).where(eq(editions.id, editionId)).for("update");
    if (edition === undefined) return true;
    if (edition.state !== "draft") return false;
    await removeFormats(tx, editionId);
    await tx.db.delete(editions).where(eq(editions.id, editionId));
    return true;
  });
}

/** A draft as its form wants it; null when there is none or it has been opened. */
export async function readDraft(
  db: Tx["db"],
  editionId: string,
): Promise<{ id: string; printId: string; draft: DraftEdition } | null> {
  const [edition] = await db.select().from(editions).where(eq(editions.id, editionId));
  if (edition === undefined || edition.state !== "draft") return null;
  const own = await db
    .select()
    .from(formats)
    .where(eq(formats.editionId, editionId))
    .orderBy(asc(formats.position));
  const steps =
    own.length === 0
      ? []
      : await db
          .select()
          .from(priceSteps)
          .where(
            inArray(
              priceSteps.formatId,
              own.map((format) => format.id),
            ),
          )
          .orderBy(asc(priceSteps.fromNumber));
  return {
    id: edition.id,
    printId: edition.printId,
    draft: {
      limit: edition.limit,
      artistsProofs: edition.artistsProofs,
      printersProofs: edition.printersProofs,
      horsCommerce: edition.horsCommerce,
      bonATirer: edition.bonATirer,
      exhibitionCopies: edition.exhibitionCopies,
      releaseAt: edition.releaseAt,
      furtherEditions: edition.furtherEditions,
      returnedNumber: edition.returnedNumber,
      returnedPrice: edition.returnedPrice,
      formats: own.map((format) => ({
        paperId: format.paperId,
        process: format.process,
        imageWidthMm: format.imageWidthMm,
        imageHeightMm: format.imageHeightMm,
        sheetWidthMm: format.sheetWidthMm,
        sheetHeightMm: format.sheetHeightMm,
        steps: steps
          .filter((step) => step.formatId === format.id)
          .map(({ fromNumber, toNumber, amount }) => ({ fromNumber, toNumber, amount })),
      })),
    },
  };
}

/** What keeps a draft from being opened, as sentences. */
export async function problemsOfDraft(editionId: string): Promise<string[]> {
  const [edition] = await database.select().from(editions).where(eq(editions.id, editionId));
  return edition === undefined ? [] : openingProblems(database, edition);
}
