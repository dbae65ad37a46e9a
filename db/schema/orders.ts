import { sql } from "drizzle-orm";
import {
  type AnyPgColumn,
  bigint,
  boolean,
  check,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  text,
  unique,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import { id, instant, recordedAt } from "./columns";
import { copies, editions, formats } from "./editions";
import { type AddressJson, accounts, parties } from "./people";

export const orderState = pgEnum("order_state", ["awaiting_payment", "paid", "cancelled", "expired"]);
export const orderChannel = pgEnum("order_channel", ["shop", "studio"]);
export const deliveryMethod = pgEnum("delivery_method", ["delivery", "collection", "handed_over"]);
export const lineState = pgEnum("line_state", ["held", "sold", "offered", "released", "refunded"]);
export const paymentMethod = pgEnum("payment_method", ["card", "transfer", "cash"]);
export const paymentSessionState = pgEnum("payment_session_state", [
  "opening",
  "open",
  "complete",
  "expired",
  "failed",
]);
export const refundState = pgEnum("refund_state", ["pending", "succeeded", "failed"]);

/** What the tax was when the order was placed; never computed again (a refund negates it). */
export type TaxSnapshotJson = {
  country: string | null;
  basisPoints: number;
  kind: string;
  treatment: string;
  label: string;
  source: string;
};

export const orders = pgTable(
  "orders",
  {
    id: id(),
    number: integer().notNull().unique().generatedAlwaysAsIdentity({ startWith: 1001 }),
    state: orderState().notNull().default("awaiting_payment"),
    channel: orderChannel().notNull().default("shop"),
    /** Made by the browser with the form, so that a double submit is one order. */
    submissionKey: text().notNull().unique(),
    buyerPartyId: uuid()
      .notNull()
      .references(() => parties.id),
    accountId: uuid().references(() => accounts.id),
    email: text(),
    language: text().$type<"en" | "de">().notNull().default("en"),
    deliveryMethod: deliveryMethod().notNull(),
    deliveryAddress: jsonb().$type<AddressJson>(),
    deliveryCountry: text().notNull(),
    currency: text().notNull(),
    deliveryAmount: bigint({ mode: "number" }).notNull().default(0),
    deliveryNet: bigint({ mode: "number" }).notNull().default(0),
    deliveryTax: bigint({ mode: "number" }).notNull().default(0),
    deliveryTaxSnapshot: jsonb().$type<TaxSnapshotJson>(),
    deliveryDaysFrom: integer(),
    deliveryDaysTo: integer(),
    totalAmount: bigint({ mode: "number" }).notNull(),
    totalTax: bigint({ mode: "number" }).notNull(),
    buyerNote: text().notNull().default(""),
    studioNote: text().notNull().default(""),
    /** The order's link is derived from this seed and the server's secret; only the link's SHA-256 is looked up. */
    tokenSeed: text().notNull(),
    tokenHash: text().notNull().unique(),
    createdAt: recordedAt(),
    holdUntil: instant(),
    /** Null while the held numbers cost more than the buyer had seen and they have not said yes. */
    pricesAcceptedAt: instant(),
    paidAt: instant(),
    endedAt: instant(),
    /** Something a person must look at: a mismatch found by the reconciler, a refund that failed. */
    attention: text(),
  },
  (t) => [
    check("order_amounts", sql`${t.deliveryAmount} >= 0 and ${t.totalAmount} >= 0 and ${t.totalTax} >= 0`),
    check("order_delivery_sum", sql`${t.deliveryNet} + ${t.deliveryTax} = ${t.deliveryAmount}`),
    check("order_paid_is_dated", sql`${t.state} <> 'paid' or ${t.paidAt} is not null`),
    check("order_address", sql`${t.deliveryMethod} <> 'delivery' or ${t.deliveryAddress} is not null`),
    index("orders_state").on(t.state, t.createdAt),
    index("orders_email").on(sql`lower(${t.email})`),
    index("orders_buyer").on(t.buyerPartyId),
    index("orders_account").on(t.accountId),
  ],
);

export const orderLines = pgTable(
  "order_lines",
  {
    id: id(),
    orderId: uuid()
      .notNull()
      .references(() => orders.id),
    position: integer().notNull(),
    state: lineState().notNull().default("held"),
    editionId: uuid()
      .notNull()
      .references(() => editions.id),
    formatId: uuid()
      .notNull()
      .references(() => formats.id),
    copyId: uuid()
      .notNull()
      .references((): AnyPgColumn => copies.id),
    /** The ladder's price of the number, home tax included. */
    ladderAmount: bigint({ mode: "number" }).notNull(),
    reductionAmount: bigint({ mode: "number" }).notNull().default(0),
    reductionReason: text(),
    /** What the buyer pays for the line: ladder less reduction, less home tax where it is not due. */
    amount: bigint({ mode: "number" }).notNull(),
    net: bigint({ mode: "number" }).notNull(),
    tax: bigint({ mode: "number" }).notNull(),
    taxSnapshot: jsonb().$type<TaxSnapshotJson>().notNull(),
    currency: text().notNull(),
  },
  (t) => [
    unique("order_line_position").on(t.orderId, t.position),
    check("order_line_sum", sql`${t.net} + ${t.tax} = ${t.amount}`),
    check("order_line_reduction", sql`${t.reductionAmount} between 0 and ${t.ladderAmount}`),
    check("order_line_reduction_reason", sql`${t.reductionAmount} = 0 or ${t.reductionReason} is not null`),
    // Never two live sales or holds of one copy, whatever the application believes.
    uniqueIndex("order_line_live_copy").on(t.copyId).where(sql`${t.state} in ('held', 'sold')`),
    index("order_lines_edition").on(t.editionId),
  ],
);

export const paymentSessions = pgTable(
  "payment_sessions",
  {
    id: id(),
    orderId: uuid()
      .notNull()
      .references(() => orders.id),
    attempt: integer().notNull(),
    state: paymentSessionState().notNull().default("opening"),
    idempotencyKey: text().notNull().unique(),
    stripeSessionId: text().unique(),
    method: paymentMethod().notNull().default("card"),
    amount: bigint({ mode: "number" }).notNull(),
    currency: text().notNull(),
    url: text(),
    createdAt: recordedAt(),
    expiresAt: instant().notNull(),
    endedAt: instant(),
  },
  (t) => [
    unique("payment_session_attempt").on(t.orderId, t.attempt),
    uniqueIndex("payment_session_live").on(t.orderId).where(sql`${t.state} in ('opening', 'open')`),
  ],
);

export const payments = pgTable(
  "payments",
  {
    id: id(),
    orderId: uuid()
      .notNull()
      .references(() => orders.id),
    paymentSessionId: uuid()
      .unique()
      .references(() => paymentSessions.id),
    method: paymentMethod().notNull(),
    amount: bigint({ mode: "number" }).notNull(),
    currency: text().notNull(),
    /** Stripe's PaymentIntent, a bank reference, or the receipt's number. */
    reference: text().notNull(),
    receivedAt: instant().notNull(),
    recordedAt: recordedAt(),
    recordedBy: uuid().references(() => accounts.id),
  },
  (t) => [
    check("payment_positive", sql`${t.amount} > 0`),
    uniqueIndex("payment_card_reference").on(t.reference).where(sql`${t.method} = 'card'`),
    index("payments_order").on(t.orderId),
  ],
);

export const refunds = pgTable(
  "refunds",
  {
    id: id(),
    orderId: uuid()
      .notNull()
      .references(() => orders.id),
    orderLineId: uuid().references(() => orderLines.id),
    paymentId: uuid()
      .notNull()
      .references(() => payments.id),
    state: refundState().notNull().default("pending"),
    method: paymentMethod().notNull(),
    amount: bigint({ mode: "number" }).notNull(),
    currency: text().notNull(),
    net: bigint({ mode: "number" }).notNull(),
    tax: bigint({ mode: "number" }).notNull(),
    reason: text().notNull(),
    idempotencyKey: text().notNull().unique(),
    reference: text(),
    failure: text(),
    createdAt: recordedAt(),
    settledAt: instant(),
    createdBy: uuid().references(() => accounts.id),
  },
  (t) => [
    check("refund_positive", sql`${t.amount} > 0`),
    check("refund_sum", sql`${t.net} + ${t.tax} = ${t.amount}`),
    index("refunds_order").on(t.orderId),
  ],
);

/** A parcel, or a copy handed over, with what the buyer needs to follow it. */
export const dispatches = pgTable(
  "dispatches",
  {
    id: id(),
    orderId: uuid()
      .notNull()
      .references(() => orders.id),
    carrier: text().notNull(),
    reference: text().notNull().default(""),
    sentAt: instant().notNull(),
    deliveredAt: instant(),
    recordedBy: uuid().references(() => accounts.id),
    recordedAt: recordedAt(),
  },
  (t) => [index("dispatches_order").on(t.orderId)],
);

/** What happened to an order, for its history; what happened to copies and sheets is in the ledger. */
export const orderEvents = pgTable(
  "order_events",
  {
    id: bigint({ mode: "number" }).primaryKey().generatedAlwaysAsIdentity(),
    orderId: uuid()
      .notNull()
      .references(() => orders.id),
    kind: text().notNull(),
    detail: jsonb().$type<Record<string, string | number | boolean | null>>().notNull().default({}),
    accountId: uuid().references(() => accounts.id),
    visibleToBuyer: boolean().notNull().default(false),
    at: recordedAt(),
  },
  (t) => [index("order_events_order").on(t.orderId, t.at)],
);
