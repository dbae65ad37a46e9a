import { db, inTransaction, type Tx } from "db/client.server";
import { orderEvents, orders, payments, refunds } from "db/schema/schema";
import { and, eq, inArray, lt, sql } from "drizzle-orm";
import Stripe from "stripe";
import { owe } from "~/emails/owe.server";
import { now } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { enqueue } from "~/platform/queue.server";
import { stripe } from "~/platform/stripe.server";

export type RefundReason =
  | "cancelled"
  | "number_gone"
  | "offer_declined"
  | "cheaper_number"
  | "paid_twice"
  | "amount_differs"
  | "returned";

/**
 * Writes a refund that is owed, in the transaction of what owes it, and the job that sends it. Money by transfer
 * or cash is given back by hand: its refund waits in the studio until somebody says it is done.
 */
export async function askRefund(
  tx: Tx,
  ask: {
    orderId: string;
    paymentId: string;
    line: string | null;
    amount: number;
    net: number;
    tax: number;
    reason: RefundReason;
    accountId?: string;
  },
): Promise<string | null> {
  if (ask.amount === 0) return null;
  const [payment] = await tx.db.select().from(payments).where(eq(payments.id, ask.paymentId));
  if (payment === undefined) throw new Error(`no payment ${ask.paymentId}`);
  const [already] = await tx.db
    .select({ sum: sql<string>`coalesce(sum(${refunds.amount}), 0)` })
    .from(refunds)
    .where(and(eq(refunds.paymentId, payment.id), inArray(refunds.state, ["pending", "succeeded"])));
  if (Number(already?.sum ?? 0) + ask.amount > payment.amount) {
    throw new Error(`refunds of payment ${payment.id} would exceed it`);
  }
  const id = newId();
  await tx.db.insert(refunds).values({
    id,
    orderId: ask.orderId,
    orderLineId: ask.line,
    paymentId: payment.id,
    method: payment.method,
    amount: ask.amount,
    currency: payment.currency,
    net: ask.net,
    tax: ask.tax,
    reason: ask.reason,
    idempotencyKey: `refund-${id}`,
    createdAt: now(),
    createdBy: ask.accountId ?? null,
  });
  if (payment.method === "card") await enqueue("send-refund", { refundId: id }, { client: tx.client });
  return id;
}

/**
 * Sends a card refund to Stripe. It looks first whether Stripe already knows it (keys are forgotten after a
 * day), so that a late retry cannot pay twice. Throws while Stripe does not answer.
 */
export async function sendRefund(refundId: string): Promise<void> {
  const [row] = await db
    .select({ refund: refunds, reference: payments.reference })
    .from(refunds)
    .innerJoin(payments, eq(payments.id, refunds.paymentId))
    .where(eq(refunds.id, refundId));
  if (row === undefined || row.refund.state !== "pending" || row.refund.method !== "card") return;
  const { refund, reference } = row;
  const known = await findRefund(reference, refundId);
  try {
    const sent =
      known ??
      (await stripe.refunds.create(
        { payment_intent: reference, amount: refund.amount, metadata: { refundId, orderId: refund.orderId } },
        { idempotencyKey: refund.idempotencyKey },
      ));
    if (sent.status === "failed" || sent.status === "canceled") {
      await refundFailed(refundId, sent.failure_reason ?? sent.status);
    } else {
      await settleRefund(refundId, sent.id);
    }
  } catch (error) {
    // Stripe answered and said no for good; anything else is tried again.
    if (error instanceof Stripe.errors.StripeInvalidRequestError) await refundFailed(refundId, error.message);
    else throw error;
  }
}

async function findRefund(paymentIntent: string, refundId: string): Promise<Stripe.Refund | null> {
  for await (const refund of stripe.refunds.list({ payment_intent: paymentIntent, limit: 100 })) {
    if (refund.metadata?.refundId === refundId) return refund;
  }
  return null;
}

/** Records that the money has gone back, and owes the buyer the e-mail that says so. Also for refunds by hand. */
export async function settleRefund(refundId: string, reference: string): Promise<void> {
  await inTransaction(async (tx) => {
    const at = now();
    const [refund] = await tx.db
      .update(refunds)
      .set({ state: "succeeded", reference, settledAt: at, failure: null })
      .where(and(eq(refunds.id, refundId), inArray(refunds.state, ["pending", "failed"])))
      .returning();
    if (refund === undefined) return;
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, refund.orderId));
    await tx.db.insert(orderEvents).values({
      orderId: refund.orderId,
      kind: "refunded",
      detail: { amount: refund.amount, reason: refund.reason },
      at,
      visibleToBuyer: true,
    });
    if (order === undefined || order.email === null) return;
    await owe(tx, {
      kind: "refund",
      dedupeKey: `refund:${refund.id}`,
      recipient: order.email,
      language: order.language,
      payload: { orderId: order.id, refundId: refund.id },
      orderId: order.id,
    });
  });
}

async function refundFailed(refundId: string, failure: string): Promise<void> {
  const [refund] = await db
    .update(refunds)
    .set({ state: "failed", failure })
    .where(eq(refunds.id, refundId))
    .returning({ orderId: refunds.orderId });
  if (refund !== undefined)
    await db.update(orders).set({ attention: "refund_failed" }).where(eq(orders.id, refund.orderId));
}

/** Card refunds that have waited for longer than a job should take: the reconciler sends them on. */
export async function waitingRefunds(olderThan: Date): Promise<string[]> {
  const rows = await db
    .select({ id: refunds.id })
    .from(refunds)
    .where(and(eq(refunds.state, "pending"), eq(refunds.method, "card"), lt(refunds.createdAt, olderThan)));
  return rows.map((r) => r.id);
}
