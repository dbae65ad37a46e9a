import { db, inTransaction } from "db/client.server";
import { type AddressJson, orderEvents, orders, parties } from "db/schema/schema";
import { eq, inArray } from "drizzle-orm";
import { type Actor, lockEditions } from "~/domain/editions/ledger.server";
import { can, type Role } from "~/domain/people/permissions";
import { owe } from "~/emails/owe.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { formatsForSale, priceOfFree } from "./for-sale.server";
import { recordPayment } from "./settle.server";
import { type ChosenLine, writeHeldOrder } from "./write-order.server";

export type OrderByHand = {
  submissionKey: string;
  lines: {
    formatId: string;
    /** A free number asked for; null takes the lowest free. */
    number: number | null;
    /** Minor units off the ladder's price; a reason is owed. */
    reductionAmount: number;
    reductionReason: string;
  }[];
  buyer: { partyId: string } | { name: string; email: string | null; telephone: string | null };
  delivery: { method: "delivery"; address: AddressJson } | { method: "collection" | "handed_over" };
  country: string;
  language: Language;
  studioNote: string;
  payment: /** The buyer pays by card at a link sent to them; the numbers are held until then. */
    | { method: "pay_link"; until: Date }
    /** The numbers are held until the money has come, or until then. */
    | { method: "transfer"; until: Date }
    /** Paid across the table. */
    | { method: "cash"; receipt: string };
};

export type OrderByHandOutcome =
  | { kind: "placed"; orderId: string }
  | { kind: "gone"; formatIds: string[] }
  | { kind: "not_delivered"; reason: string }
  | { kind: "empty" };

/** Makes an order at a fair, in the studio or by letter, at the book's prices or with an agreed reduction. */
export async function orderByHand(
  input: OrderByHand,
  actor: Actor & { roles: readonly Role[] },
): Promise<OrderByHandOutcome> {
  if (!can(actor.roles, "orders.make")) throw new AppError("not_allowed");
  const reduced = input.lines.some((l) => l.reductionAmount > 0);
  if (reduced && !can(actor.roles, "reductions.make")) throw new AppError("not_allowed");
  if (input.lines.length === 0) return { kind: "empty" };
  const [before] = await db
    .select({ id: orders.id })
    .from(orders)
    .where(eq(orders.submissionKey, input.submissionKey));
  if (before !== undefined) return { kind: "placed", orderId: before.id };

  return inTransaction(async (tx) => {
    const at = now();
    const ids = input.lines.map((l) => l.formatId);
    const unlocked = await formatsForSale(tx.db, ids, at);
    await lockEditions(
      tx,
      unlocked.map((f) => f.editionId),
    );
    const formats = new Map((await formatsForSale(tx.db, ids, at)).map((f) => [f.formatId, f]));
    const taken = new Set<string>();
    const chosen: ChosenLine[] = [];
    const gone: string[] = [];
    for (const line of input.lines) {
      const format = formats.get(line.formatId);
      const copy = format?.free.find(
        (c) => !taken.has(c.copyId) && (line.number === null || c.number === line.number),
      );
      const ladderAmount = format === undefined || copy === undefined ? null : priceOfFree(format, copy);
      if (format === undefined || copy === undefined || ladderAmount === null) {
        gone.push(line.formatId);
        continue;
      }
      taken.add(copy.copyId);
      chosen.push({
        format,
        copyId: copy.copyId,
        ladderAmount,
        reductionAmount: Math.min(line.reductionAmount, ladderAmount),
        reductionReason: line.reductionAmount > 0 ? line.reductionReason : null,
      });
    }
    if (gone.length > 0) return { kind: "gone", formatIds: gone };
    const email =
      "partyId" in input.buyer
        ? ((
            await tx.db
              .select({ email: parties.email })
              .from(parties)
              .where(eq(parties.id, input.buyer.partyId))
          )[0]?.email ?? null)
        : input.buyer.email;
    const written = await writeHeldOrder(tx, {
      submissionKey: input.submissionKey,
      channel: "studio",
      buyerPartyId: async () => {
        if ("partyId" in input.buyer) return input.buyer.partyId;
        const id = newId();
        const address = input.delivery.method === "delivery" ? input.delivery.address : null;
        await tx.db.insert(parties).values({ id, ...input.buyer, address });
        return id;
      },
      accountId: null,
      email,
      language: input.language,
      delivery: input.delivery,
      country: input.country,
      buyerNote: "",
      studioNote: input.studioNote,
      lines: chosen,
      at,
      holdUntil: input.payment.method === "cash" ? null : input.payment.until,
      pricesToAccept: false,
    });
    if (written.kind === "not_delivered") return written;
    const { orderId } = written;
    if (actor.accountId !== undefined) {
      await tx.db
        .insert(orderEvents)
        .values({ orderId, kind: "made_by_hand", at, accountId: actor.accountId });
    }
    if (input.payment.method === "cash") {
      const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
      if (order === undefined) throw new Error("the order was not written");
      await recordPayment(tx, order, {
        method: "cash",
        amount: order.totalAmount,
        currency: order.currency,
        reference: input.payment.receipt,
        receivedAt: at,
        recordedBy: actor.accountId ?? null,
      });
    }
    if (input.payment.method === "pay_link" && email !== null) {
      await owe(tx, {
        kind: "pay-link",
        dedupeKey: `pay-link:${orderId}`,
        recipient: email,
        language: input.language,
        payload: { orderId },
        orderId,
      });
    }
    return { kind: "placed", orderId };
  });
}

/**
 * Records money that came by transfer or across the table for an order that waits for it. Its card payment page,
 * if one is open, must have been closed before (`endHold` refuses otherwise); "not_waiting" when the order is over.
 */
export async function recordTransfer(
  orderId: string,
  actor: Actor & { roles: readonly Role[] },
  money: { method: "transfer" | "cash"; reference: string; receivedAt: Date },
): Promise<"recorded" | "not_waiting" | "page_open"> {
  if (!can(actor.roles, "orders.make")) throw new AppError("not_allowed");
  return inTransaction(async (tx) => {
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    if (order === undefined) throw new AppError("not_found");
    if (order.state !== "awaiting_payment") return "not_waiting";
    const open = await tx.db.query.paymentSessions.findFirst({
      where: (s, { and: both, eq: is }) =>
        both(is(s.orderId, orderId), inArray(s.state, ["opening", "open"])),
    });
    if (open !== undefined) return "page_open";
    await recordPayment(tx, order, {
      ...money,
      amount: order.totalAmount,
      currency: order.currency,
      recordedBy: actor.accountId ?? null,
    });
    return "recorded";
  });
}
