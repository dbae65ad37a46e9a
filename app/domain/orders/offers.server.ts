import { db, inTransaction, type Tx } from "db/client.server";
import { copies, holds, numberOffers, orderEvents, orderLines, orders, payments } from "db/schema/schema";
import { and, asc, eq, isNull, lte } from "drizzle-orm";
import { type LockedEdition, lockEdition, markOf } from "~/domain/editions/ledger.server";
import { owe } from "~/emails/owe.server";
import { now } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { enqueue } from "~/platform/queue.server";
import { formatsForSale, priceOfFree } from "./for-sale.server";
import { askRefund } from "./refunds.server";
import { sellCopy } from "./settle.server";

/** How long another number waits for the buyer's answer; without one the money goes back. */
const OFFER_HOURS = 48;

/**
 * For a payment that came for a number that had gone: holds the lowest free number that costs no more and
 * offers it. False when there is none, or when its tax would differ; then the money goes back at once.
 */
export async function offerAnotherNumber(
  tx: Tx,
  edition: LockedEdition,
  order: typeof orders.$inferSelect,
  line: typeof orderLines.$inferSelect,
): Promise<boolean> {
  const at = now();
  const [format] = await formatsForSale(tx.db, [line.formatId], at);
  if (format === undefined || !format.onSale || order.email === null) return false;
  const paid = line.ladderAmount - line.reductionAmount;
  const copy = format.free.find((c) => {
    const price = priceOfFree(format, c);
    return price !== null && price <= paid;
  });
  if (copy === undefined) return false;
  const until = new Date(at.getTime() + OFFER_HOURS * 3_600_000);
  const offerId = newId();
  await tx.db.update(orderLines).set({ state: "offered" }).where(eq(orderLines.id, line.id));
  await tx.db
    .update(copies)
    .set({ placement: "held", formatId: line.formatId, orderLineId: line.id })
    .where(eq(copies.id, copy.copyId));
  await tx.db
    .insert(holds)
    .values({ id: newId(), copyId: copy.copyId, orderLineId: line.id, heldAt: at, until });
  await tx.db
    .insert(numberOffers)
    .values({ id: offerId, orderLineId: line.id, copyId: copy.copyId, offeredAt: at, until });
  await tx.db.insert(orderEvents).values({
    orderId: order.id,
    kind: "offered",
    detail: { number: markOf(edition, { run: "numbered", number: copy.number }) },
    at,
    visibleToBuyer: true,
  });
  await enqueue("lapse-offer", { offerId }, { client: tx.client, startAfter: until });
  await owe(tx, {
    kind: "number-offer",
    dedupeKey: `number-offer:${offerId}`,
    recipient: order.email,
    language: order.language,
    payload: { orderId: order.id, offerId },
    orderId: order.id,
  });
  return true;
}

/** The open offers of an order, with the mark of the number offered. */
export async function openOffers(orderId: string) {
  return db
    .select({
      offerId: numberOffers.id,
      lineId: numberOffers.orderLineId,
      number: copies.number,
      until: numberOffers.until,
    })
    .from(numberOffers)
    .innerJoin(orderLines, eq(orderLines.id, numberOffers.orderLineId))
    .innerJoin(copies, eq(copies.id, numberOffers.copyId))
    .where(and(eq(orderLines.orderId, orderId), isNull(numberOffers.decidedAt)))
    .orderBy(asc(orderLines.position));
}

/**
 * Ends an offer: accepted, the number is sold to its line and a difference goes back; otherwise the number is
 * free again and the line's money goes back in full. A second decision changes nothing.
 */
export async function decideOffer(
  offerId: string,
  orderId: string,
  decision: "accepted" | "declined" | "lapsed",
): Promise<boolean> {
  return inTransaction(async (tx) => {
    const at = now();
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    const [offer] = await tx.db.select().from(numberOffers).where(eq(numberOffers.id, offerId)).for("update");
    if (order === undefined || offer === undefined || offer.decidedAt !== null) return false;
    const [line] = await tx.db.select().from(orderLines).where(eq(orderLines.id, offer.orderLineId));
    if (line === undefined || line.orderId !== orderId) return false;
    const [payment] = await tx.db
      .select()
      .from(payments)
      .where(eq(payments.orderId, orderId))
      .orderBy(asc(payments.recordedAt));
    if (payment === undefined) throw new Error(`order ${orderId} has an offer but no payment`);
    const edition = await lockEdition(tx, line.editionId);
    const [copy] = await tx.db.select().from(copies).where(eq(copies.id, offer.copyId));
    if (copy === undefined) throw new Error(`no copy ${offer.copyId}`);
    await tx.db.update(numberOffers).set({ decidedAt: at, decision }).where(eq(numberOffers.id, offerId));

    if (decision === "accepted") {
      const [format] = await formatsForSale(tx.db, [line.formatId], at);
      const price =
        format === undefined
          ? null
          : priceOfFree(format, { number: copy.number, returned: copy.checkCode !== null });
      const paid = line.ladderAmount - line.reductionAmount;
      if (price !== null && price < paid) {
        // The buyer pays the lower price: amount, net and tax all fall in proportion, and the rest goes back.
        const amount = Math.round((line.amount * price) / paid);
        const net = Math.round((line.net * price) / paid);
        const tax = amount - net;
        await tx.db
          .update(orderLines)
          .set({ ladderAmount: price, reductionAmount: 0, reductionReason: null, amount, net, tax })
          .where(eq(orderLines.id, line.id));
        await askRefund(tx, {
          orderId,
          paymentId: payment.id,
          line: line.id,
          amount: line.amount - amount,
          net: line.net - net,
          tax: line.tax - tax,
          reason: "cheaper_number",
        });
      }
      const [priced] = await tx.db.select().from(orderLines).where(eq(orderLines.id, line.id));
      await sellCopy(tx, edition, order, priced ?? line, copy.id, at);
    } else {
      await tx.db
        .update(holds)
        .set({ endedAt: at, endedAs: "freed" })
        .where(and(eq(holds.copyId, copy.id), isNull(holds.endedAt)));
      await tx.db
        .update(copies)
        .set({ placement: "in_hand", orderLineId: null, formatId: null })
        .where(eq(copies.id, copy.id));
      await tx.db.update(orderLines).set({ state: "refunded" }).where(eq(orderLines.id, line.id));
      await askRefund(tx, {
        orderId,
        paymentId: payment.id,
        line: line.id,
        amount: line.amount,
        net: line.net,
        tax: line.tax,
        reason: "offer_declined",
      });
      const left = await tx.db
        .select({ state: orderLines.state })
        .from(orderLines)
        .where(eq(orderLines.orderId, orderId));
      if (left.every((l) => l.state === "refunded")) {
        await tx.db.update(orders).set({ state: "cancelled", endedAt: at }).where(eq(orders.id, orderId));
        await askRefund(tx, {
          orderId,
          paymentId: payment.id,
          line: null,
          amount: order.deliveryAmount,
          net: order.deliveryNet,
          tax: order.deliveryTax,
          reason: "offer_declined",
        });
      }
    }
    await tx.db.insert(orderEvents).values({ orderId, kind: `offer_${decision}`, at, visibleToBuyer: true });
    return true;
  });
}

/** Offers whose time has run out without an answer. */
export async function overdueOffers(): Promise<{ offerId: string; orderId: string }[]> {
  return db
    .select({ offerId: numberOffers.id, orderId: orderLines.orderId })
    .from(numberOffers)
    .innerJoin(orderLines, eq(orderLines.id, numberOffers.orderLineId))
    .where(and(isNull(numberOffers.decidedAt), lte(numberOffers.until, now())));
}
