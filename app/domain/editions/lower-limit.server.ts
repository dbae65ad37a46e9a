import { inTransaction, type Tx } from "db/client.server";
import { copies, editions, formats, priceSteps } from "db/schema/schema";
import { and, eq, gt, inArray, isNull, sql } from "drizzle-orm";
import { can } from "~/domain/people/permissions";
import { cutLadder } from "~/domain/pricing/ladder";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { heldCopies } from "./issued.server";
import { lockEdition, writeEditionEntry } from "./ledger.server";
import type { StudioActor } from "./studio-actor";
import { refusedForEdition } from "./transitions";

/** `field` names the answer that is at fault, where one is. */
export type CommandOutcome = { kind: "done" } | { kind: "refused"; sentence: string; field?: string };

/**
 * Lowers the limit of an open edition none of whose numbers has been issued: the copies past it go, the ladders are cut,
 * and the book says from what to what. Throws AppError `not_allowed`.
 */
export async function lowerLimit(actor: StudioActor, editionId: string, to: number): Promise<CommandOutcome> {
  if (!can(actor.roles, "editions.change")) throw new AppError("not_allowed", "editions.change");
  return inTransaction(async (tx): Promise<CommandOutcome> => {
    const edition = await lockEdition(tx, editionId);
    const refused = refusedForEdition("limit_lowered", {
      stage: edition.state,
      issued: edition.firstIssuedAt === null ? 0 : 1,
      held: await heldCopies(tx.db, editionId),
    });
    if (refused !== null) return { kind: "refused", sentence: refused.sentence };
    if (!Number.isSafeInteger(to) || to < 1 || to >= edition.limit) {
      return {
        kind: "refused",
        sentence: `The limit can only fall: give a number from 1 to ${edition.limit - 1}.`,
        field: "limit",
      };
    }
    const least = await lowestLimit(tx, editionId);
    if (to < least) {
      return {
        kind: "refused",
        sentence: `Number ${least} is no longer untouched: the book or an order names it, so the limit cannot fall below ${least}.`,
        field: "limit",
      };
    }
    await tx.db
      .delete(copies)
      .where(and(eq(copies.editionId, editionId), eq(copies.run, "numbered"), gt(copies.number, to)));
    await cutLadders(tx, editionId, to);
    await tx.db.update(editions).set({ limit: to }).where(eq(editions.id, editionId));
    await writeEditionEntry(tx, edition, actor, {
      kind: "limit_lowered",
      body: { from: edition.limit, to },
    });
    return { kind: "done" };
  });
}

/** The highest number that something else in the database names: a ledger line, a hold, an order, a sheet, an offer. */
export async function lowestLimit(tx: Pick<Tx, "db">, editionId: string): Promise<number> {
  const [row] = await tx.db
    .select({ number: sql<number | null>`max(${copies.number})` })
    .from(copies)
    .where(
      and(
        eq(copies.editionId, editionId),
        eq(copies.run, "numbered"),
        sql`(${copies.placement} <> 'in_hand'
          or exists (select from ledger_entries e where e.copy_id = ${copies.id})
          or exists (select from holds h where h.copy_id = ${copies.id})
          or exists (select from order_lines l where l.copy_id = ${copies.id})
          or exists (select from number_offers o where o.copy_id = ${copies.id})
          or exists (select from sheets s where s.copy_id = ${copies.id}))`,
      ),
    );
  return Math.max(1, row?.number ?? 1);
}

async function cutLadders(tx: Tx, editionId: string, limit: number): Promise<void> {
  const own = tx.db.select({ id: formats.id }).from(formats).where(eq(formats.editionId, editionId));
  const past = await tx.db
    .select()
    .from(priceSteps)
    .where(
      and(inArray(priceSteps.formatId, own), isNull(priceSteps.supersededAt), gt(priceSteps.toNumber, limit)),
    );
  const at = now();
  for (const step of past) {
    await tx.db.update(priceSteps).set({ supersededAt: at }).where(eq(priceSteps.id, step.id));
    for (const cut of cutLadder([step], limit)) {
      await tx.db.insert(priceSteps).values({
        id: newId(),
        formatId: step.formatId,
        fromNumber: cut.fromNumber,
        toNumber: cut.toNumber,
        amount: cut.amount,
        currency: step.currency,
        validFrom: at,
      });
    }
  }
}
