import { type Database, inTransaction, type Tx } from "db/client.server";
import { copies, editions, formats, papers, priceSteps, printPictures, prints } from "db/schema/schema";
import { and, asc, eq, isNull } from "drizzle-orm";
import { copiesOfPictures } from "~/domain/orders/for-sale.server";
import { can, type Role } from "~/domain/people/permissions";
import { checkLadder } from "~/domain/pricing/ladder";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { enqueue } from "~/platform/queue.server";
import { CAP_OF_COPIES, countAgainstCap } from "./cap";
import { type Actor, type LockedEdition, lockEdition, runTotal, writeEditionEntry } from "./ledger.server";
import { RUNS } from "./numbering";

export type OpenOutcome =
  | { kind: "opened" }
  | { kind: "already" }
  | { kind: "problems"; sentences: string[] }
  /** Opening would take a picture past the cap; nothing is done until that is accepted. */
  | { kind: "past_the_cap"; total: number; cap: number };

/**
 * Opens an edition: makes every copy of every run and writes the first ledger entry, in one transaction.
 * `releaseAt` null means now. From the first number issued its limit never changes again.
 */
export async function openEdition(
  editionId: string,
  actor: Actor & { roles: readonly Role[] },
  options: { releaseAt: Date | null; acceptPastCap: boolean; happenedAt?: Date },
): Promise<OpenOutcome> {
  if (!can(actor.roles, "editions.open")) throw new AppError("not_allowed");
  return inTransaction(async (tx) => {
    const edition = await lockEdition(tx, editionId);
    if (edition.state !== "draft") return { kind: "already" };
    const sentences = await openingProblems(tx.db, edition);
    if (sentences.length > 0) return { kind: "problems", sentences };
    const total = await totalAfterOpening(tx, edition);
    if (total > CAP_OF_COPIES && !options.acceptPastCap)
      return { kind: "past_the_cap", total, cap: CAP_OF_COPIES };

    const at = options.happenedAt ?? now();
    const releaseAt = options.releaseAt ?? at;
    await tx.db
      .update(editions)
      .set({ state: "open", openedAt: at, releaseAt })
      .where(eq(editions.id, editionId));
    const rows = RUNS.flatMap((run) =>
      Array.from({ length: runTotal(edition, run) }, (_, i) => ({
        id: newId(),
        editionId,
        run,
        number: i + 1,
      })),
    );
    for (let i = 0; i < rows.length; i += 1_000) await tx.db.insert(copies).values(rows.slice(i, i + 1_000));
    await writeEditionEntry(tx, edition, actor, {
      kind: "opened",
      happened: { precision: "instant", at },
      body: {
        limit: edition.limit,
        proofs: {
          ap: edition.artistsProofs,
          pp: edition.printersProofs,
          hc: edition.horsCommerce,
          bat: edition.bonATirer,
          exhibition: edition.exhibitionCopies,
        },
        formats: await publicFormats(tx, editionId),
        furtherEditions: edition.furtherEditions,
        numberOrder: edition.numberOrder,
        returnedNumber: edition.returnedNumber,
        returnedPrice: edition.returnedPrice,
        release: releaseAt.toISOString(),
      },
    });
    await enqueue(
      "publish-proofs",
      { printId: edition.printId },
      { client: tx.client, startAfter: releaseAt },
    );
    return { kind: "opened" };
  });
}

async function publicFormats(tx: Tx, editionId: string) {
  const rows = await tx.db
    .select({ format: formats, paper: papers.name, grammage: papers.grammage })
    .from(formats)
    .innerJoin(papers, eq(papers.id, formats.paperId))
    .where(eq(formats.editionId, editionId))
    .orderBy(asc(formats.position));
  return rows.map(({ format, paper, grammage }) => ({
    paper,
    grammage,
    process: format.process,
    image: [format.imageWidthMm, format.imageHeightMm],
    sheet: [format.sheetWidthMm, format.sheetHeightMm],
  }));
}

/** What keeps an edition from being opened, as sentences; an empty list when nothing does. */
export async function openingProblems(
  db: Database,
  edition: typeof editions.$inferSelect,
): Promise<string[]> {
  const sentences: string[] = [];
  const [print] = await db.select().from(prints).where(eq(prints.id, edition.printId));
  const pictures = await db.select().from(printPictures).where(eq(printPictures.printId, edition.printId));
  if (print === undefined || pictures.length === 0) sentences.push("The print has no picture yet.");
  const own = await db
    .select()
    .from(formats)
    .where(eq(formats.editionId, edition.id))
    .orderBy(asc(formats.position));
  if (own.length === 0) sentences.push("The edition needs at least one format: paper, process and sizes.");
  for (const [index, format] of own.entries()) {
    const steps = await db
      .select()
      .from(priceSteps)
      .where(and(eq(priceSteps.formatId, format.id), isNull(priceSteps.supersededAt)));
    const prefix = own.length > 1 ? `Format ${index + 1}: ` : "";
    for (const problem of checkLadder(steps, edition.limit)) sentences.push(prefix + problem.sentence);
  }
  return sentences;
}

/** The most copies any picture of the print would have, over all its editions, with this one opened. */
async function totalAfterOpening(tx: Tx, edition: LockedEdition): Promise<number> {
  const others = await copiesOfPictures(tx.db, [edition.printId]);
  const own = countAgainstCap([
    {
      limit: edition.limit,
      ap: edition.artistsProofs,
      pp: edition.printersProofs,
      hc: edition.horsCommerce,
      bat: edition.bonATirer,
      exhibition: edition.exhibitionCopies,
    },
  ]).total;
  return own + Math.max(0, ...others.values());
}
