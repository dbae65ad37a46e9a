import { db, inTransaction } from "db/client.server";
import { copies, holds, orderEvents, orderLines, orders, paymentSessions } from "db/schema/schema";
import { and, eq, inArray, isNull } from "drizzle-orm";
import type Stripe from "stripe";
import { lockEditions } from "~/domain/editions/ledger.server";
import { now } from "~/platform/clock";
import { enqueue } from "~/platform/queue.server";
import { stripe } from "~/platform/stripe.server";
import { stripeSessionOf } from "./payment-session.server";
import { settle } from "./settle.server";
import { linesOf } from "./write-order.server";

export type EndOutcome = "freed" | "paid" | "not_yet" | "already";

/**
 * Ends the hold of an order that was not paid in time (`expired`) or that somebody gave up (`cancelled`). Its
 * payment page is closed through Stripe first: a number is let go only when Stripe says that the page can no
 * longer be paid, and a page that was paid after all wins. Throws while Stripe does not answer; the job repeats.
 */
export async function endHold(orderId: string, as: "expired" | "cancelled"): Promise<EndOutcome> {
  const [order] = await db.select().from(orders).where(eq(orders.id, orderId));
  if (order === undefined) return "already";
  if (order.state === "paid") return "paid";
  if (order.state !== "awaiting_payment") return "already";
  if (as === "expired" && order.holdUntil !== null && order.holdUntil.getTime() > now().getTime()) {
    // Extended meanwhile: come back at the new end.
    await enqueue("end-hold", { orderId }, { startAfter: order.holdUntil });
    return "not_yet";
  }
  const rows = await db
    .select()
    .from(paymentSessions)
    .where(and(eq(paymentSessions.orderId, orderId), inArray(paymentSessions.state, ["opening", "open"])));
  for (const row of rows) {
    const session = await closePage(row);
    if (session !== null && session.status === "complete") {
      const settled = await settle(session);
      if (settled === "paid") return "paid";
      // Complete but unpaid: money may still come, so the number stays held.
      return "not_yet";
    }
  }
  return (await freeOrder(orderId, { as, checked: rows.map((r) => r.id) })) ? "freed" : "not_yet";
}

/** Closes a payment page; afterwards it is expired or complete for good. null: Stripe never opened one. */
async function closePage(row: typeof paymentSessions.$inferSelect): Promise<Stripe.Checkout.Session | null> {
  const session = await stripeSessionOf(row);
  if (session === null || session.status !== "open") return session;
  try {
    return await stripe.checkout.sessions.expire(session.id);
  } catch (error) {
    // It was paid, or expired by itself, in the very moment: ask what it is now.
    const after = await stripe.checkout.sessions.retrieve(session.id);
    if (after.status === "open") throw error;
    return after;
  }
}

type Free = { as: "expired" | "cancelled"; checked: string[] } | { endedSession: string };

/**
 * Puts the held copies of an unpaid order back in hand, in one transaction. With `endedSession` only if that
 * session was its live one: the order itself goes on until its hold ends, and may be paid by a new page.
 * False when a payment page has been opened meanwhile.
 */
export async function freeOrder(orderId: string, free: Free): Promise<boolean> {
  return inTransaction(async (tx) => {
    const at = now();
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    if (order === undefined || order.state !== "awaiting_payment") return true;
    const sessions = await tx.db
      .select()
      .from(paymentSessions)
      .where(and(eq(paymentSessions.orderId, orderId), inArray(paymentSessions.state, ["opening", "open"])))
      .for("update");
    const over = sessions.filter((s) =>
      "endedSession" in free ? s.stripeSessionId === free.endedSession : free.checked.includes(s.id),
    );
    if (over.length > 0) {
      await tx.db
        .update(paymentSessions)
        .set({ state: "expired", endedAt: at })
        .where(
          inArray(
            paymentSessions.id,
            over.map((s) => s.id),
          ),
        );
    }
    if (over.length < sessions.length) return false;
    // A page that ran out by itself does not end a hold that still has time, or one made by hand without an end.
    if ("endedSession" in free && (order.holdUntil === null || order.holdUntil.getTime() > at.getTime()))
      return true;
    const as = "as" in free ? free.as : "expired";

    const lines = await linesOf(tx, orderId);
    await lockEditions(
      tx,
      lines.map((l) => l.line.editionId),
    );
    for (const { line } of lines) {
      await tx.db
        .update(holds)
        .set({ endedAt: at, endedAs: "freed" })
        .where(and(eq(holds.orderLineId, line.id), isNull(holds.endedAt)));
      await tx.db
        .update(copies)
        .set({ placement: "in_hand", orderLineId: null, formatId: null })
        .where(and(eq(copies.orderLineId, line.id), eq(copies.placement, "held")));
      await tx.db.update(orderLines).set({ state: "released" }).where(eq(orderLines.id, line.id));
    }
    await tx.db.update(orders).set({ state: as, endedAt: at, holdUntil: null }).where(eq(orders.id, orderId));
    await tx.db.insert(orderEvents).values({ orderId, kind: as, at, visibleToBuyer: true });
    return true;
  });
}
