import { db, inTransaction } from "db/client.server";
import { editions, orderEvents, orders, paymentSessions, prints } from "db/schema/schema";
import { and, desc, eq, inArray } from "drizzle-orm";
import type Stripe from "stripe";
import { formatInstant } from "~/domain/dates";
import { markOf } from "~/domain/editions/ledger.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { now } from "~/platform/clock";
import { env } from "~/platform/env.server";
import { AppError } from "~/platform/errors";
import { linkToken, newId } from "~/platform/ids.server";
import { logger } from "~/platform/logger.server";
import { stripe } from "~/platform/stripe.server";
import { orderLink } from "./links.server";
import { linesOf } from "./write-order.server";

/**
 * How long Stripe may keep a payment page open. Its own least is 30 minutes, longer than a hold: we end pages
 * through its API, and let a number go only when it says that the page can no longer be paid.
 */
const PAGE_MINUTES = 120;

export type PaymentPage =
  | { kind: "open"; url: string }
  | { kind: "paid" }
  /** The hold ended, or the order was cancelled. */
  | { kind: "ended" }
  | { kind: "prices_to_accept" }
  /** Stripe did not answer; nothing is lost and asking again is safe. */
  | { kind: "unavailable" };

type SessionRow = typeof paymentSessions.$inferSelect;
type Prepared = {
  order: typeof orders.$inferSelect;
  session: SessionRow;
  params: Stripe.Checkout.SessionCreateParams;
};

/**
 * The address of the order's payment page: the one that is open, or a new one. Our row with its idempotency key
 * is committed before Stripe is asked, so that a crash or a lost answer leads back to the same page.
 */
export async function openPaymentPage(orderId: string): Promise<PaymentPage> {
  const prepared = await inTransaction(async (tx): Promise<PaymentPage | Prepared> => {
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    if (order === undefined) throw new AppError("not_found");
    if (order.state === "paid") return { kind: "paid" };
    if (order.state !== "awaiting_payment") return { kind: "ended" };
    if (order.holdUntil !== null && order.holdUntil.getTime() <= now().getTime()) return { kind: "ended" };
    if (order.pricesAcceptedAt === null) return { kind: "prices_to_accept" };
    const rows = await tx.db
      .select()
      .from(paymentSessions)
      .where(eq(paymentSessions.orderId, orderId))
      .orderBy(desc(paymentSessions.attempt));
    const live = rows.find((r) => r.state === "open" || r.state === "opening");
    if (live?.state === "open" && live.url !== null) return { kind: "open", url: live.url };
    const at = now();
    const session: SessionRow | undefined =
      live ??
      (
        await tx.db
          .insert(paymentSessions)
          .values({
            id: newId(),
            orderId,
            attempt: 1 + (rows[0]?.attempt ?? 0),
            idempotencyKey: `order-${orderId}-${1 + (rows[0]?.attempt ?? 0)}`,
            amount: order.totalAmount,
            currency: order.currency,
            createdAt: at,
            expiresAt: new Date(Math.floor(at.getTime() / 1000) * 1000 + PAGE_MINUTES * 60_000),
          })
          .returning()
      )[0];
    if (session === undefined) throw new Error("the payment session was not written");
    const lines = await linesOf(tx, orderId);
    const titles = await tx.db
      .select({ edition: editions, title: prints.title })
      .from(editions)
      .innerJoin(prints, eq(prints.id, editions.printId))
      .where(
        inArray(
          editions.id,
          lines.map((l) => l.line.editionId),
        ),
      );
    const named = lines.map(({ line, run, number }) => {
      const found = titles.find((t) => t.edition.id === line.editionId);
      if (found === undefined) throw new Error(`no edition ${line.editionId}`);
      return { name: `${found.title}, ${markOf(found.edition, { run, number })}`, amount: line.amount };
    });
    const studio = await theStudio();
    return { order, session, params: sessionParams(order, session, named, studio.zone) };
  });
  if ("kind" in prepared) return prepared;
  try {
    const created = await stripe.checkout.sessions.create(prepared.params, {
      idempotencyKey: prepared.session.idempotencyKey,
    });
    return await rememberPage(prepared.session, created);
  } catch (error) {
    logger.warn(
      { orderId, err: error instanceof Error ? error.message : "unknown" },
      "payment page not opened",
    );
    return { kind: "unavailable" };
  }
}

function sessionParams(
  order: typeof orders.$inferSelect,
  session: SessionRow,
  lines: { name: string; amount: number }[],
  zone: string,
): Stripe.Checkout.SessionCreateParams {
  const { language } = order;
  const words = messagesOf(language).checkout;
  const price = (name: string, amount: number): Stripe.Checkout.SessionCreateParams.LineItem => ({
    quantity: 1,
    price_data: { currency: order.currency.toLowerCase(), unit_amount: amount, product_data: { name } },
  });
  const link = orderLink(language, linkToken("order", order.tokenSeed));
  return {
    mode: "payment",
    // Only methods that decide at once: a hold cannot wait for days.
    allowed_payment_method_types: ["card"],
    client_reference_id: order.id,
    metadata: { orderId: order.id, paymentSessionId: session.id },
    payment_intent_data: { metadata: { orderId: order.id, paymentSessionId: session.id } },
    line_items: [
      ...lines.map((l) => price(l.name, l.amount)),
      ...(order.deliveryAmount > 0 ? [price(words.delivery, order.deliveryAmount)] : []),
    ],
    ...(order.email === null ? {} : { customer_email: order.email }),
    locale: language,
    success_url: `${env.BASE_URL}${link}?paid={CHECKOUT_SESSION_ID}`,
    cancel_url: `${env.BASE_URL}${link}/pay?left=1`,
    expires_at: Math.floor(session.expiresAt.getTime() / 1000),
    ...(order.holdUntil === null
      ? {}
      : {
          custom_text: {
            submit: {
              message: fill(words.paymentDeadline, {
                time: formatInstant(order.holdUntil, zone, LANGUAGE_TAG[language]),
              }),
            },
          },
        }),
  };
}

async function rememberPage(session: SessionRow, created: Stripe.Checkout.Session): Promise<PaymentPage> {
  await db
    .update(paymentSessions)
    .set({ state: "open", stripeSessionId: created.id, url: created.url })
    .where(and(eq(paymentSessions.id, session.id), eq(paymentSessions.state, "opening")));
  if (created.status === "expired") return { kind: "ended" };
  if (created.status === "complete" || created.url === null) return { kind: "paid" };
  return { kind: "open", url: created.url };
}

/** The buyer says yes to numbers that cost more than they had seen. */
export async function acceptPrices(orderId: string): Promise<void> {
  const at = now();
  const changed = await db
    .update(orders)
    .set({ pricesAcceptedAt: at })
    .where(and(eq(orders.id, orderId), eq(orders.state, "awaiting_payment")))
    .returning({ id: orders.id });
  if (changed.length > 0) await db.insert(orderEvents).values({ orderId, kind: "prices_accepted", at });
}

/**
 * The Stripe session behind one of our rows, as Stripe knows it now. A row that never learned its session's id
 * (a crash between asking and hearing) finds it by asking again under the same key, or by its metadata.
 * null: Stripe has never opened one. Throws while Stripe does not answer.
 */
export async function stripeSessionOf(row: SessionRow): Promise<Stripe.Checkout.Session | null> {
  if (row.stripeSessionId !== null) return stripe.checkout.sessions.retrieve(row.stripeSessionId);
  const since = Math.floor(row.createdAt.getTime() / 1000) - 60;
  for await (const session of stripe.checkout.sessions.list({ created: { gte: since }, limit: 100 })) {
    if (session.metadata?.paymentSessionId !== row.id) continue;
    await db
      .update(paymentSessions)
      .set({ state: "open", stripeSessionId: session.id, url: session.url })
      .where(and(eq(paymentSessions.id, row.id), eq(paymentSessions.state, "opening")));
    return session;
  }
  return null;
}
