import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { db, pool } from "db/client.server";
import {
  copies,
  editions,
  emails,
  holds,
  ledgerEntries,
  orderLines,
  orders,
  paymentSessions,
  payments,
  refunds,
  sheets,
} from "db/schema/schema";
import { and, eq, isNull } from "drizzle-orm";
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from "vitest";
import { cancelOrder } from "~/domain/orders/cancel-order.server";
import { endHold, freeOrder } from "~/domain/orders/end-hold.server";
import { decideOffer, openOffers } from "~/domain/orders/offers.server";
import { acceptPrices, openPaymentPage } from "~/domain/orders/payment-session.server";
import { placeOrder } from "~/domain/orders/place-order.server";
import { reconcileOpenOrders, reconcilePaidSessions } from "~/domain/orders/reconcile.server";
import { sendRefund } from "~/domain/orders/refunds.server";
import { settleSession } from "~/domain/orders/settle.server";
import { receiveEvent } from "~/domain/orders/stripe-events.server";
import { holdClock } from "~/platform/clock";
import { env } from "~/platform/env.server";
import { stopQueue } from "~/platform/queue.server";
import { stripe } from "~/platform/stripe.server";
import { createStripeFake, type StripeFake } from "../../scripts/stripe-fake/server";
import { testDatabase } from "../support/database";
import { guestOrder, makeEdition, makeStudio, PHOTOGRAPHER } from "../support/shop";

/*
 * Orders against real PostgreSQL and the Stripe stand-in over HTTP. The rules asserted are PRODUCT.md's 1 to 9.
 */
let fake: StripeFake;
let folder: string;
let paperId: string;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "numberleaf-checkout-"));
  fake = createStripeFake({
    port: Number(new URL(env.STRIPE_API_URL).port),
    dataDir: folder,
    secretKey: env.STRIPE_SECRET_KEY,
    webhookSecret: env.STRIPE_WEBHOOK_SECRET,
  });
  await fake.listen();
});
afterAll(async () => {
  await stopQueue();
  await fake.close();
  await pool.end();
  await rm(folder, { recursive: true, force: true });
});
beforeEach(async () => {
  await (await testDatabase()).reset();
  ({ paperId } = await makeStudio());
});
afterEach(() => holdClock(undefined));

const LADDER: [number, number, number][] = [
  [1, 2, 28_000],
  [3, 3, 34_000],
];

async function placed(lines: { formatId: string; seenAmount: number }[]) {
  const outcome = await placeOrder(guestOrder(lines));
  if (outcome.kind !== "placed") throw new Error(JSON.stringify(outcome));
  return outcome;
}

async function sessionOf(orderId: string) {
  const [row] = await db.select().from(paymentSessions).where(eq(paymentSessions.orderId, orderId));
  if (row?.stripeSessionId == null) throw new Error("no session");
  return row.stripeSessionId;
}

/** Pays on the hosted page's own code path, without waiting for the webhook. */
async function pay(orderId: string): Promise<string> {
  const page = await openPaymentPage(orderId);
  if (page.kind !== "open") throw new Error(JSON.stringify(page));
  const id = await sessionOf(orderId);
  const answer = await fetch(new URL(`/-/sessions/${id}/pay`, env.STRIPE_API_URL), { method: "POST" });
  expect(answer.status).toBe(200);
  return id;
}

const placements = async (editionId: string) =>
  (
    await db
      .select({ number: copies.number, placement: copies.placement })
      .from(copies)
      .where(and(eq(copies.editionId, editionId), eq(copies.run, "numbered")))
      .orderBy(copies.number)
  ).map((c) => c.placement);

const kinds = async (editionId: string) =>
  (
    await db
      .select({ kind: ledgerEntries.kind })
      .from(ledgerEntries)
      .where(eq(ledgerEntries.editionId, editionId))
      .orderBy(ledgerEntries.line)
  ).map((e) => e.kind);

const orderOf = async (id: string) => (await db.select().from(orders).where(eq(orders.id, id)))[0];

describe("from basket to sold number", () => {
  test("a checkout holds the lowest free number; payment sells it, owes e-mails and sheets", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 3, steps: LADDER });
    const { orderId } = await placed([{ formatId, seenAmount: 28_000 }]);
    expect(await placements(editionId)).toEqual(["held", "in_hand", "in_hand"]);
    expect(await kinds(editionId)).toEqual(["opened"]);

    const sessionId = await pay(orderId);
    expect(await settleSession(sessionId)).toBe("paid");

    expect(await placements(editionId)).toEqual(["sold", "in_hand", "in_hand"]);
    expect(await kinds(editionId)).toEqual(["opened", "sold"]);
    const order = await orderOf(orderId);
    expect(order?.state).toBe("paid");
    // 280.00 + 12.00 delivery, 20 % inside (HMRC VATREC12020: 1/6 of the gross, line by line, half-up).
    expect(order?.totalAmount).toBe(29_200);
    expect(order?.totalTax).toBe(4_667 + 200);
    const owed = (await db.select({ kind: emails.kind }).from(emails)).map((e) => e.kind).sort();
    expect(owed).toEqual(["new-order", "order-confirmation"]);
    expect(await db.select().from(sheets)).toHaveLength(1);
    expect(await db.select().from(holds).where(isNull(holds.endedAt))).toHaveLength(0);
    const [edition] = await db.select().from(editions).where(eq(editions.id, editionId));
    expect(edition?.firstIssuedAt).not.toBeNull();
  });

  test("settling again, in parallel, and through a repeated webhook changes nothing", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 2, steps: [[1, 2, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    const sessionId = await pay(orderId);
    await Promise.all([settleSession(sessionId), settleSession(sessionId), settleSession(sessionId)]);
    await settleSession(sessionId);
    const [event] = (await stripe.events.list({ type: "checkout.session.completed", limit: 1 })).data;
    if (event === undefined) throw new Error("the stand-in has no event");
    expect(await receiveEvent(event)).toBe("new");
    expect(await receiveEvent(event)).toBe("repeat");
    expect(await db.select().from(payments)).toHaveLength(1);
    expect(await kinds(editionId)).toEqual(["opened", "sold"]);
  });

  test("two buyers and one last number: exactly one holds it", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 1, steps: [[1, 1, 10_000]] });
    const outcomes = await Promise.all(
      Array.from({ length: 8 }, () => placeOrder(guestOrder([{ formatId, seenAmount: 10_000 }]))),
    );
    expect(outcomes.filter((o) => o.kind === "placed")).toHaveLength(1);
    const gone = outcomes.filter((o) => o.kind === "gone");
    expect(gone).toHaveLength(7);
    expect(await placements(editionId)).toEqual(["held"]);
  });

  test("all or none: one edition gone, the other is not held, and the answer names it", async () => {
    const first = await makeEdition({ paperId, limit: 1, steps: [[1, 1, 10_000]] });
    const second = await makeEdition({ paperId, limit: 5, steps: [[1, 5, 20_000]] });
    await placed([{ formatId: first.formatId, seenAmount: 10_000 }]);
    const outcome = await placeOrder(
      guestOrder([
        { formatId: first.formatId, seenAmount: 10_000 },
        { formatId: second.formatId, seenAmount: 20_000 },
      ]),
    );
    expect(outcome).toMatchObject({
      kind: "gone",
      gone: [{ formatId: first.formatId }],
      remaining: [second.formatId],
    });
    expect((await placements(second.editionId)).every((p) => p === "in_hand")).toBe(true);
  });

  test("orders over the same two editions in opposite order do not deadlock", async () => {
    const a = await makeEdition({ paperId, limit: 20, steps: [[1, 20, 10_000]] });
    const b = await makeEdition({ paperId, limit: 20, steps: [[1, 20, 10_000]] });
    const outcomes = await Promise.all(
      Array.from({ length: 16 }, (_, i) => {
        const lines = [a, b].map((e) => ({ formatId: e.formatId, seenAmount: 10_000 }));
        return placeOrder(guestOrder(i % 2 === 0 ? lines : lines.reverse()));
      }),
    );
    expect(outcomes.every((o) => o.kind === "placed")).toBe(true);
    expect((await placements(a.editionId)).filter((p) => p === "held")).toHaveLength(16);
  });

  test("a double submit is one order", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 5, steps: [[1, 5, 10_000]] });
    const input = guestOrder([{ formatId, seenAmount: 10_000 }]);
    const both = await Promise.all([placeOrder(input), placeOrder(input)]);
    const third = await placeOrder(input);
    const ids = [...both, third].map((o) => (o.kind === "placed" ? o.orderId : o.kind));
    expect(new Set(ids).size).toBe(1);
    expect((await placements(editionId)).filter((p) => p === "held")).toHaveLength(1);
  });

  test("a number dearer than the price seen opens no payment page until the buyer accepts", async () => {
    const { formatId } = await makeEdition({ paperId, limit: 3, steps: LADDER });
    await placed([{ formatId, seenAmount: 28_000 }]);
    await placed([{ formatId, seenAmount: 28_000 }]);
    const third = await placed([{ formatId, seenAmount: 28_000 }]);
    expect(third.pricesToAccept).toBe(true);
    expect(await openPaymentPage(third.orderId)).toEqual({ kind: "prices_to_accept" });
    expect(await db.select().from(paymentSessions)).toHaveLength(0);
    await acceptPrices(third.orderId);
    expect((await openPaymentPage(third.orderId)).kind).toBe("open");
    expect((await orderOf(third.orderId))?.totalAmount).toBe(34_000 + 1_200);
  });

  test("an edition that is not released, or a print withdrawn, is not sold", async () => {
    const { formatId } = await makeEdition({
      paperId,
      limit: 3,
      steps: LADDER,
      releaseAt: new Date(Date.now() + 3_600_000),
    });
    expect((await placeOrder(guestOrder([{ formatId, seenAmount: 28_000 }]))).kind).toBe("gone");
  });
});

describe("holds end only when their page can no longer be paid", () => {
  test("an unpaid hold ends at its time, through Stripe, and the number is free again", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 1, steps: [[1, 1, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await openPaymentPage(orderId);
    expect(await endHold(orderId, "expired")).toBe("not_yet");
    holdClock(new Date(Date.now() + 11 * 60_000));
    expect(await endHold(orderId, "expired")).toBe("freed");
    expect(await placements(editionId)).toEqual(["in_hand"]);
    const session = await stripe.checkout.sessions.retrieve(await sessionOf(orderId));
    expect(session.status).toBe("expired");
    expect((await orderOf(orderId))?.state).toBe("expired");
    expect(await kinds(editionId)).toEqual(["opened"]);
  });

  test("a page paid in the last moment wins over the end of its hold", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 1, steps: [[1, 1, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await pay(orderId);
    holdClock(new Date(Date.now() + 11 * 60_000));
    expect(await endHold(orderId, "expired")).toBe("paid");
    expect(await placements(editionId)).toEqual(["sold"]);
  });

  test("while Stripe does not answer, the number stays held", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 1, steps: [[1, 1, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await openPaymentPage(orderId);
    await switches({ api: { fail: { count: 50, status: 503 } } });
    holdClock(new Date(Date.now() + 11 * 60_000));
    await expect(endHold(orderId, "expired")).rejects.toThrow();
    expect(await placements(editionId)).toEqual(["held"]);
    await switches({ reset: true });
    await reconcileOpenOrders();
    expect(await placements(editionId)).toEqual(["in_hand"]);
  });

  test("with no webhook at all the reconciler finds the payment", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 1, steps: [[1, 1, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await pay(orderId);
    await reconcilePaidSessions(1);
    expect(await placements(editionId)).toEqual(["sold"]);
    expect((await orderOf(orderId))?.state).toBe("paid");
  });
});

describe("a payment for a number that has gone", () => {
  /** An order whose copy was let go and taken by somebody else, and whose page was paid all the same. */
  async function latePayment(limit: number, steps: [number, number, number][]) {
    const edition = await makeEdition({ paperId, limit, steps });
    const late = await placed([{ formatId: edition.formatId, seenAmount: steps[0]?.[2] ?? 0 }]);
    const sessionId = await pay(late.orderId);
    // As if Stripe had wrongly told us that the page could no longer be paid.
    const rows = await db
      .select({ id: paymentSessions.id })
      .from(paymentSessions)
      .where(eq(paymentSessions.orderId, late.orderId));
    await freeOrder(late.orderId, { as: "cancelled", checked: rows.map((r) => r.id) });
    const other = await placed([{ formatId: edition.formatId, seenAmount: steps[0]?.[2] ?? 0 }]);
    await settleSession(await pay(other.orderId));
    return { ...edition, late, sessionId };
  }

  test("gets its money back in full when nothing else is free", async () => {
    const { editionId, late, sessionId } = await latePayment(1, [[1, 1, 10_000]]);
    await settleSession(sessionId);
    const owed = await db.select().from(refunds).where(eq(refunds.orderId, late.orderId));
    expect(owed.reduce((sum, r) => sum + r.amount, 0)).toBe(11_200);
    for (const refund of owed) await sendRefund(refund.id);
    for (const refund of owed) await sendRefund(refund.id);
    const session = await stripe.checkout.sessions.retrieve(sessionId, { expand: ["payment_intent"] });
    const intent = session.payment_intent;
    if (intent === null || typeof intent === "string") throw new Error("no intent");
    const sent = await stripe.refunds.list({ payment_intent: intent.id });
    expect(sent.data.reduce((sum, r) => sum + r.amount, 0)).toBe(11_200);
    expect(await kinds(editionId)).toEqual(["opened", "sold"]);
    expect((await orderOf(late.orderId))?.state).toBe("cancelled");
  });

  test("is offered a number at no higher price, and accepting sells that one", async () => {
    const { editionId, late, sessionId } = await latePayment(2, [[1, 2, 10_000]]);
    await settleSession(sessionId);
    const [offer] = await openOffers(late.orderId);
    if (offer === undefined) throw new Error("no offer");
    expect(offer.number).toBe(2);
    expect(await placements(editionId)).toEqual(["sold", "held"]);
    expect(await decideOffer(offer.offerId, late.orderId, "accepted")).toBe(true);
    expect(await decideOffer(offer.offerId, late.orderId, "declined")).toBe(false);
    expect(await placements(editionId)).toEqual(["sold", "sold"]);
    expect(await db.select().from(refunds)).toHaveLength(0);
  });

  test("declined, the money goes back and the offered number is free", async () => {
    const { editionId, late, sessionId } = await latePayment(2, [[1, 2, 10_000]]);
    await settleSession(sessionId);
    const [offer] = await openOffers(late.orderId);
    if (offer === undefined) throw new Error("no offer");
    await decideOffer(offer.offerId, late.orderId, "declined");
    expect(await placements(editionId)).toEqual(["sold", "in_hand"]);
    const owed = await db.select().from(refunds).where(eq(refunds.orderId, late.orderId));
    expect(owed.reduce((sum, r) => sum + r.amount, 0)).toBe(11_200);
  });

  test("is never offered a dearer one", async () => {
    const { late, sessionId } = await latePayment(2, [
      [1, 1, 10_000],
      [2, 2, 12_000],
    ]);
    await settleSession(sessionId);
    expect(await openOffers(late.orderId)).toHaveLength(0);
    const owed = await db.select().from(refunds).where(eq(refunds.orderId, late.orderId));
    expect(owed.reduce((sum, r) => sum + r.amount, 0)).toBe(11_200);
  });
});

describe("cancelling a paid order", () => {
  test("is a new entry, gives all money back once, and the number is in hand again", async () => {
    const { editionId, formatId } = await makeEdition({ paperId, limit: 2, steps: [[1, 2, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await settleSession(await pay(orderId));
    expect(await cancelOrder(orderId, PHOTOGRAPHER, "the buyer asked")).toBe("cancelled");
    expect(await cancelOrder(orderId, PHOTOGRAPHER, "twice")).toBe("already");
    expect(await placements(editionId)).toEqual(["in_hand", "in_hand"]);
    expect(await kinds(editionId)).toEqual(["opened", "sold", "refunded"]);
    const owed = await db.select().from(refunds);
    expect(owed.reduce((sum, r) => sum + r.amount, 0)).toBe(11_200);
    const [line] = await db.select().from(orderLines);
    expect(line?.state).toBe("refunded");
  });

  test("retires the number where the edition's policy says so", async () => {
    const { editionId, formatId } = await makeEdition({
      paperId,
      limit: 2,
      steps: [[1, 2, 10_000]],
      returnedNumber: "retired",
    });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await settleSession(await pay(orderId));
    await cancelOrder(orderId, PHOTOGRAPHER, "the buyer asked");
    expect(await placements(editionId)).toEqual(["retired", "in_hand"]);
    expect(await kinds(editionId)).toEqual(["opened", "sold", "refunded", "retired"]);
  });

  test("an assistant may not", async () => {
    const { formatId } = await makeEdition({ paperId, limit: 2, steps: [[1, 2, 10_000]] });
    const { orderId } = await placed([{ formatId, seenAmount: 10_000 }]);
    await expect(cancelOrder(orderId, { as: "assistant", roles: ["assistant"] }, "no")).rejects.toMatchObject(
      {
        code: "not_allowed",
      },
    );
  });
});

async function switches(body: Record<string, unknown>): Promise<void> {
  const answer = await fetch(new URL("/-/switches", env.STRIPE_API_URL), {
    method: "POST",
    headers: { "Content-Type": "application/json" },
    body: JSON.stringify(body),
  });
  expect(answer.status).toBe(200);
}
