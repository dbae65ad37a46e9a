import { inTransaction, type Tx } from "db/client.server";
import { copies, holds, orderEvents, orderLines, orders, paymentSessions, payments } from "db/schema/schema";
import { and, eq, isNull } from "drizzle-orm";
import type Stripe from "stripe";
import {
  type LockedEdition,
  lockEditions,
  moveCopy,
  oweSheets,
  THE_SHOP,
} from "~/domain/editions/ledger.server";
import { theStudio } from "~/domain/studio/studio.server";
import { owe } from "~/emails/owe.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { logger } from "~/platform/logger.server";
import { stripe } from "~/platform/stripe.server";
import { newCheckCode } from "./check-code.server";
import { freeOrder } from "./end-hold.server";
import { offerAnotherNumber } from "./offers.server";
import { askRefund } from "./refunds.server";
import { linesOf } from "./write-order.server";

/**
 * Brings an order into line with a Checkout Session as Stripe knows it now; the event that led here is only a
 * hint. Safe to repeat, late, and in any order. Throws while Stripe does not answer, to be tried again.
 */
export async function settleSession(
  stripeSessionId: string,
): Promise<"paid" | "ended" | "waiting" | "unknown"> {
  const session = await stripe.checkout.sessions.retrieve(stripeSessionId, { expand: ["payment_intent"] });
  return settle(session);
}

/** The same for a session already read. */
export async function settle(
  session: Stripe.Checkout.Session,
): Promise<"paid" | "ended" | "waiting" | "unknown"> {
  const orderId = session.metadata?.orderId ?? session.client_reference_id;
  if (orderId === null || orderId === undefined) return "unknown";
  if (session.status === "complete" && session.payment_status !== "unpaid") {
    return (await takePayment(orderId, session)) ? "paid" : "unknown";
  }
  if (session.status === "expired") {
    await freeOrder(orderId, { endedSession: session.id });
    return "ended";
  }
  return "waiting";
}

function paymentReference(session: Stripe.Checkout.Session): string {
  const intent = session.payment_intent;
  return (typeof intent === "string" ? intent : intent?.id) ?? session.id;
}

async function takePayment(orderId: string, session: Stripe.Checkout.Session): Promise<boolean> {
  return inTransaction(async (tx) => {
    const at = now();
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    const rowId = session.metadata?.paymentSessionId;
    if (order === undefined || rowId === undefined) {
      logger.error({ stripeSessionId: session.id }, "a paid session belongs to no order of ours");
      return false;
    }
    const [row] = await tx.db
      .select()
      .from(paymentSessions)
      .where(eq(paymentSessions.id, rowId))
      .for("update");
    if (row === undefined || row.orderId !== orderId) return false;
    const [known] = await tx.db.select().from(payments).where(eq(payments.paymentSessionId, row.id));
    if (known !== undefined) return true;

    await tx.db
      .update(paymentSessions)
      .set({ state: "complete", stripeSessionId: session.id, endedAt: at })
      .where(eq(paymentSessions.id, row.id));
    await recordPayment(tx, order, {
      paymentSessionId: row.id,
      method: "card",
      amount: session.amount_total ?? row.amount,
      currency: (session.currency ?? row.currency).toUpperCase(),
      reference: paymentReference(session),
      receivedAt: at,
    });
    return true;
  });
}

export type NewPayment = Omit<typeof payments.$inferInsert, "id" | "orderId" | "recordedAt">;

/**
 * Writes a payment of a locked order and does what it owes: every line ends with its copy, with another number
 * offered at no higher price, or with its money on the way back. Never neither, never both.
 */
export async function recordPayment(
  tx: Tx,
  order: typeof orders.$inferSelect,
  payment: NewPayment,
): Promise<void> {
  const at = now();
  const paymentId = await insertPayment(tx, order.id, payment);
  if (order.state === "paid" || payment.amount !== order.totalAmount || payment.currency !== order.currency) {
    // Paid twice, or not what was asked: a person looks, and the whole of it goes back.
    const reason = order.state === "paid" ? "paid_twice" : "amount_differs";
    await askRefund(tx, {
      orderId: order.id,
      paymentId,
      line: null,
      amount: payment.amount,
      net: payment.amount,
      tax: 0,
      reason,
    });
    await tx.db.update(orders).set({ attention: reason }).where(eq(orders.id, order.id));
    return;
  }
  const lines = await linesOf(tx, order.id);
  const locked = await lockEditions(
    tx,
    lines.map((l) => l.line.editionId),
  );
  const refunded: (typeof lines)[number]["line"][] = [];
  let kept = 0;
  for (const { line } of lines) {
    const edition = locked.get(line.editionId);
    if (edition === undefined) throw new Error(`no edition ${line.editionId}`);
    const [copy] = await tx.db.select().from(copies).where(eq(copies.id, line.copyId));
    const held = copy?.placement === "held" && copy.orderLineId === line.id;
    if (held || copy?.placement === "in_hand") {
      await sellCopy(tx, edition, order, line, line.copyId, payment.receivedAt);
      kept += 1;
    } else if (await offerAnotherNumber(tx, edition, order, line)) {
      kept += 1;
    } else {
      refunded.push(line);
    }
  }
  await tx.db
    .update(orders)
    .set({
      state: kept > 0 ? "paid" : "cancelled",
      paidAt: payment.receivedAt,
      endedAt: kept > 0 ? null : at,
      holdUntil: null,
    })
    .where(eq(orders.id, order.id));
  for (const line of refunded) {
    await tx.db.update(orderLines).set({ state: "refunded" }).where(eq(orderLines.id, line.id));
    await askRefund(tx, {
      orderId: order.id,
      paymentId,
      line: line.id,
      amount: line.amount,
      net: line.net,
      tax: line.tax,
      reason: "number_gone",
    });
  }
  if (kept === 0 && order.deliveryAmount > 0) {
    await askRefund(tx, {
      orderId: order.id,
      paymentId,
      line: null,
      amount: order.deliveryAmount,
      net: order.deliveryNet,
      tax: order.deliveryTax,
      reason: "number_gone",
    });
  }
  await tx.db.insert(orderEvents).values({
    orderId: order.id,
    kind: "paid",
    detail: { method: payment.method, amount: payment.amount },
    at,
    visibleToBuyer: true,
  });
  if (kept > 0) await oweConfirmation(tx, order);
}

/** Owes the buyer the confirmation that names the numbers, and the studio its news. */
export async function oweConfirmation(
  tx: Tx,
  order: { id: string; email: string | null; language: Language; tokenSeed: string },
) {
  if (order.email !== null) {
    await owe(tx, {
      kind: "order-confirmation",
      // A corrected address gets a link of its own, and so a confirmation of its own.
      dedupeKey: `order-confirmation:${order.id}:${order.tokenSeed}`,
      recipient: order.email,
      language: order.language,
      payload: { orderId: order.id },
      orderId: order.id,
    });
  }
  const studio = await theStudio();
  await owe(tx, {
    kind: "new-order",
    dedupeKey: `new-order:${order.id}`,
    recipient: studio.email,
    language: "en",
    payload: { orderId: order.id },
    orderId: order.id,
  });
}

async function insertPayment(tx: Tx, orderId: string, payment: NewPayment): Promise<string> {
  const id = newId();
  await tx.db.insert(payments).values({ id, orderId, recordedAt: now(), ...payment });
  return id;
}

/** Sells a copy to an order's line: the ledger's entry, the end of its hold, and the sheets it now needs. */
export async function sellCopy(
  tx: Tx,
  edition: LockedEdition,
  order: { id: string; number: number; buyerPartyId: string },
  line: typeof orderLines.$inferSelect,
  copyId: string,
  happenedAt: Date,
): Promise<void> {
  const at = now();
  await moveCopy(tx, edition, THE_SHOP, {
    kind: "sold",
    copyId,
    formatId: line.formatId,
    orderLineId: line.id,
    ownerPartyId: order.buyerPartyId,
    happened: { precision: "instant", at: happenedAt },
    context: { holdOfSameOrder: true },
    secret: {
      partyId: order.buyerPartyId,
      orderId: order.id,
      orderNumber: order.number,
      amount: line.ladderAmount - line.reductionAmount,
      currency: line.currency,
    },
  });
  const [copy] = await tx.db.select({ code: copies.checkCode }).from(copies).where(eq(copies.id, copyId));
  if (copy?.code === null)
    await tx.db.update(copies).set({ checkCode: newCheckCode() }).where(eq(copies.id, copyId));
  await tx.db
    .update(holds)
    .set({ endedAt: at, endedAs: "sold" })
    .where(and(eq(holds.copyId, copyId), isNull(holds.endedAt)));
  await tx.db.update(orderLines).set({ state: "sold", copyId }).where(eq(orderLines.id, line.id));
  await oweSheets(tx, edition, copyId);
}
