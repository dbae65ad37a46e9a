import { db, inTransaction, sqlState, type Tx, violatedConstraint } from "db/client.server";
import { type AddressJson, orders, parties } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { lockEditions } from "~/domain/editions/ledger.server";
import { theStudio } from "~/domain/studio/studio.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { linkToken, newId } from "~/platform/ids.server";
import { type FormatForSale, formatsForSale, priceOfFree } from "./for-sale.server";
import { type ChosenLine, writeHeldOrder } from "./write-order.server";

export type PlaceOrderInput = {
  /** Made with the form; a second submit of it is the same order. */
  submissionKey: string;
  /** `seenAmount`: the ladder price the form showed for the line, minor units. */
  lines: { formatId: string; seenAmount: number }[];
  buyer: { name: string; email: string; telephone?: string };
  delivery: { method: "delivery"; address: AddressJson } | { method: "collection" };
  /** Where prices and tax are worked out for: the delivery address's country, or the buyer's when collecting. */
  country: string;
  language: Language;
  accountId: string | null;
  note: string;
};

export type PlaceOrderOutcome =
  /** Numbers are held. `pricesToAccept`: some cost more than was seen; no payment page until the buyer says yes. */
  | { kind: "placed"; orderId: string; token: string; pricesToAccept: boolean }
  /** At least one edition has no free number, or is not on sale: nothing was held. */
  | { kind: "gone"; gone: { formatId: string; title: string; slug: string }[]; remaining: string[] }
  | { kind: "not_delivered"; reason: string }
  | { kind: "empty" };

type Chosen = ChosenLine & { seenAmount: number };

/** Thrown inside the transaction to undo it and answer with an outcome. */
class Undo extends Error {
  constructor(readonly outcome: PlaceOrderOutcome) {
    super("undone");
  }
}

/**
 * Holds the lowest free number of each line, all or none, in one transaction over locked editions, and writes
 * the order that waits for its payment. Repeating the same submission returns the same order.
 */
export async function placeOrder(input: PlaceOrderInput): Promise<PlaceOrderOutcome> {
  if (input.lines.length === 0) return { kind: "empty" };
  const before = await orderOfSubmission(input.submissionKey);
  if (before !== null) return before;
  const studio = await theStudio();
  try {
    return await inTransaction(async (tx) => {
      const at = now();
      const formatIds = input.lines.map((l) => l.formatId);
      // Read once without locks to learn the editions, then again under their locks.
      const editionsOf = await formatsForSale(tx.db, formatIds, at);
      await lockEditions(
        tx,
        editionsOf.map((f) => f.editionId),
      );
      const formats = new Map((await formatsForSale(tx.db, formatIds, at)).map((f) => [f.formatId, f]));
      const chosen = chooseNumbers(input.lines, formats);
      if (chosen.kind === "gone") throw new Undo(chosen);
      const written = await writeHeldOrder(tx, {
        submissionKey: input.submissionKey,
        channel: "shop",
        buyerPartyId: () => partyOf(tx, input),
        accountId: input.accountId,
        email: input.buyer.email,
        language: input.language,
        delivery: input.delivery,
        country: input.country,
        buyerNote: input.note,
        studioNote: "",
        lines: chosen.lines,
        at,
        holdUntil: new Date(at.getTime() + studio.holdMinutes * 60_000),
        pricesToAccept: chosen.lines.some((c) => c.ladderAmount > c.seenAmount),
      });
      if (written.kind === "not_delivered") throw new Undo(written);
      return { ...written, pricesToAccept: chosen.lines.some((c) => c.ladderAmount > c.seenAmount) };
    });
  } catch (error) {
    if (error instanceof Undo) return error.outcome;
    // The other half of a double click was faster.
    if (sqlState(error) === "23505" && violatedConstraint(error)?.includes("submission") === true) {
      const same = await orderOfSubmission(input.submissionKey);
      if (same !== null) return same;
    }
    throw error;
  }
}

function chooseNumbers(
  lines: PlaceOrderInput["lines"],
  formats: Map<string, FormatForSale>,
): { kind: "chosen"; lines: Chosen[] } | Extract<PlaceOrderOutcome, { kind: "gone" }> {
  const taken = new Map<string, number>();
  const chosen: Chosen[] = [];
  const gone: { formatId: string; title: string; slug: string }[] = [];
  const remaining: string[] = [];
  for (const line of lines) {
    const format = formats.get(line.formatId);
    if (format === undefined) continue;
    const index = taken.get(format.editionId) ?? 0;
    const copy = format.onSale ? format.free[index] : undefined;
    const ladderAmount = copy === undefined ? null : priceOfFree(format, copy);
    if (copy === undefined || ladderAmount === null) {
      gone.push({ formatId: format.formatId, title: format.title, slug: format.slug });
      continue;
    }
    taken.set(format.editionId, index + 1);
    remaining.push(line.formatId);
    chosen.push({
      format,
      copyId: copy.copyId,
      ladderAmount,
      reductionAmount: 0,
      reductionReason: null,
      seenAmount: line.seenAmount,
    });
  }
  const unknown = lines.filter((l) => !formats.has(l.formatId));
  for (const line of unknown) gone.push({ formatId: line.formatId, title: "", slug: "" });
  return gone.length > 0 ? { kind: "gone", gone, remaining } : { kind: "chosen", lines: chosen };
}

/** The order a submission has already made, if any. */
async function orderOfSubmission(submissionKey: string): Promise<PlaceOrderOutcome | null> {
  const [order] = await db
    .select({ id: orders.id, seed: orders.tokenSeed, accepted: orders.pricesAcceptedAt })
    .from(orders)
    .where(eq(orders.submissionKey, submissionKey));
  if (order === undefined) return null;
  return {
    kind: "placed",
    orderId: order.id,
    token: linkToken("order", order.seed),
    pricesToAccept: order.accepted === null,
  };
}

/** The buyer's party: the account's own, or a new one; a guest is never joined to somebody else's by e-mail. */
async function partyOf(tx: Tx, input: PlaceOrderInput): Promise<string> {
  if (input.accountId !== null) {
    const account = await tx.db.query.accounts.findFirst({
      where: (a, { eq: is }) => is(a.id, input.accountId ?? ""),
    });
    if (account !== undefined) return account.partyId;
  }
  const id = newId();
  await tx.db.insert(parties).values({
    id,
    name: input.buyer.name,
    email: input.buyer.email,
    telephone: input.buyer.telephone ?? null,
    address: input.delivery.method === "delivery" ? input.delivery.address : null,
  });
  return id;
}
