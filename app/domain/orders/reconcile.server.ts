import { db } from "db/client.server";
import { orders, paymentSessions } from "db/schema/schema";
import { and, eq, inArray, isNotNull, lt } from "drizzle-orm";
import { now } from "~/platform/clock";
import { logger } from "~/platform/logger.server";
import { stripe } from "~/platform/stripe.server";
import { endHold } from "./end-hold.server";
import { decideOffer, overdueOffers } from "./offers.server";
import { stripeSessionOf } from "./payment-session.server";
import { sendRefund, waitingRefunds } from "./refunds.server";
import { settle } from "./settle.server";

const MINUTE = 60_000;

async function each<T>(what: string, items: T[], act: (item: T) => Promise<unknown>): Promise<void> {
  for (const item of items) {
    try {
      await act(item);
    } catch (error) {
      // One order that cannot be settled now must not keep the others waiting; the next round tries again.
      logger.warn({ what, err: error instanceof Error ? error.message : "unknown" }, "not reconciled");
    }
  }
}

/**
 * What webhooks and jobs may have missed: compares every live payment page with Stripe, ends holds that are
 * over, sends refunds and lapses offers whose jobs were lost. Alone it heals everything; run each minute.
 */
export async function reconcileOpenOrders(): Promise<void> {
  const at = now();
  const live = await db
    .select()
    .from(paymentSessions)
    .where(
      and(
        inArray(paymentSessions.state, ["opening", "open"]),
        lt(paymentSessions.createdAt, new Date(at.getTime() - MINUTE / 2)),
      ),
    );
  await each("session", live, async (row) => {
    const session = await stripeSessionOf(row);
    if (session !== null) await settle(session);
  });
  const over = await db
    .select({ id: orders.id })
    .from(orders)
    .where(
      and(
        eq(orders.state, "awaiting_payment"),
        isNotNull(orders.holdUntil),
        lt(orders.holdUntil, new Date(at.getTime() - 5_000)),
      ),
    );
  await each("hold", over, (order) => endHold(order.id, "expired"));
  await each("refund", await waitingRefunds(new Date(at.getTime() - 2 * MINUTE)), sendRefund);
  await each("offer", await overdueOffers(), (o) => decideOffer(o.offerId, o.orderId, "lapsed"));
}

/** Compares every session Stripe counts as paid in the last `days` days with our payments. */
export async function reconcilePaidSessions(days: number): Promise<void> {
  const since = Math.floor(now().getTime() / 1000) - days * 86_400;
  for await (const session of stripe.checkout.sessions.list({
    created: { gte: since },
    status: "complete",
    limit: 100,
  })) {
    await each("paid session", [session], settle);
  }
}
