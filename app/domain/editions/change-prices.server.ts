import { inTransaction } from "db/client.server";
import { copies, formats, priceSteps } from "db/schema/schema";
import { and, asc, eq, isNull } from "drizzle-orm";
import { can } from "~/domain/people/permissions";
import { checkLadder, type PriceStep, priceOf } from "~/domain/pricing/ladder";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { issuedCopies } from "./issued.server";
import { lockEdition, writeEditionEntry } from "./ledger.server";
import type { StudioActor } from "./studio-actor";
import { refusedForEdition } from "./transitions";

export type PricesOutcome =
  | { kind: "done" }
  /** The new ladder is the old one. */
  | { kind: "same" }
  | { kind: "refused"; sentences: string[] };

const isSame = (a: PriceStep, b: PriceStep) =>
  a.fromNumber === b.fromNumber && a.toNumber === b.toNumber && a.amount === b.amount;

const plain = ({ fromNumber, toNumber, amount }: PriceStep) => ({ fromNumber, toNumber, amount });

/**
 * Changes a format's ladder from now on: rows that differ are superseded by new dated ones, and the book keeps both. The
 * price of a number that was ever issued stays. A buyer who has a number on hold keeps the price of the hold. Throws
 * AppError `not_allowed`, `not_found`.
 */
export async function changePrices(
  actor: StudioActor,
  editionId: string,
  formatId: string,
  ladder: readonly PriceStep[],
): Promise<PricesOutcome> {
  if (!can(actor.roles, "prices.change")) throw new AppError("not_allowed", "prices.change");
  const { currency } = await theStudio();
  return inTransaction(async (tx): Promise<PricesOutcome> => {
    const edition = await lockEdition(tx, editionId);
    const refused = refusedForEdition("prices_changed", { stage: edition.state, issued: 0, held: 0 });
    if (refused !== null) return { kind: "refused", sentences: [refused.sentence] };
    const [format] = await tx.db
      .select()
      .from(formats)
      .where(and(eq(formats.id, formatId), eq(formats.editionId, editionId)));
    if (format === undefined) throw new AppError("not_found");
    const before = await tx.db
      .select()
      .from(priceSteps)
      .where(and(eq(priceSteps.formatId, formatId), isNull(priceSteps.supersededAt)))
      .orderBy(asc(priceSteps.fromNumber));
    const after = [...ladder].sort((a, b) => a.fromNumber - b.fromNumber);
    const problems = checkLadder(after, edition.limit);
    if (problems.length > 0) {
      return { kind: "refused", sentences: problems.map((problem) => problem.sentence) };
    }
    const issued = await issuedCopies(tx.db, editionId);
    const numbered = await tx.db
      .select()
      .from(copies)
      .where(and(eq(copies.editionId, editionId), eq(copies.run, "numbered")))
      .orderBy(asc(copies.number));
    const moved = numbered.filter(
      (copy) => issued.has(copy.id) && priceOf(before, copy.number) !== priceOf(after, copy.number),
    );
    if (moved.length > 0) {
      return {
        kind: "refused",
        sentences: [
          `${moved.length === 1 ? "Number" : "Numbers"} ${moved.map((copy) => copy.number).join(", ")} ${
            moved.length === 1
              ? "was issued at its price, which stays"
              : "were issued at their prices, which stay"
          }.`,
        ],
      };
    }
    const gone = before.filter((old) => !after.some((one) => isSame(old, one)));
    const added = after.filter((one) => !before.some((old) => isSame(old, one)));
    if (gone.length === 0 && added.length === 0) return { kind: "same" };
    const at = now();
    for (const old of gone) {
      await tx.db.update(priceSteps).set({ supersededAt: at }).where(eq(priceSteps.id, old.id));
    }
    await tx.db
      .insert(priceSteps)
      .values(added.map((step) => ({ id: newId(), formatId, ...plain(step), currency, validFrom: at })));
    await writeEditionEntry(tx, edition, actor, {
      kind: "prices_changed",
      body: { format: format.position + 1, currency, was: before.map(plain), now: after.map(plain) },
    });
    return { kind: "done" };
  });
}
