import { bigint, index, integer, jsonb, pgEnum, pgTable, text, uniqueIndex, uuid } from "drizzle-orm/pg-core";
import { id, instant, recordedAt } from "./columns";

export const emailState = pgEnum("email_state", ["waiting", "sending", "sent", "failed"]);

/** Every event Stripe has told us of, stored before it is answered; repeats are recognised by their id. */
export const webhookEvents = pgTable(
  "webhook_events",
  {
    id: text().primaryKey(),
    kind: text().notNull(),
    objectId: text(),
    receivedAt: recordedAt(),
    handledAt: instant(),
  },
  (t) => [index("webhook_events_object").on(t.objectId)],
);

/**
 * E-mails to be sent, written in the transaction of the change that owes them. `message_id` is fixed here, so
 * that the one repeat a crash can cause carries the same Message-ID. `dedupe_key` makes the debt single.
 * `payload` holds ids, never links or secrets: those are made when the e-mail is.
 */
export const emails = pgTable(
  "emails",
  {
    id: id(),
    kind: text().notNull(),
    dedupeKey: text().notNull(),
    recipient: text().notNull(),
    language: text().$type<"en" | "de">().notNull().default("en"),
    payload: jsonb().$type<Record<string, string | number>>().notNull(),
    messageId: text().notNull().unique(),
    state: emailState().notNull().default("waiting"),
    attempts: integer().notNull().default(0),
    failure: text(),
    orderId: uuid(),
    createdAt: recordedAt(),
    sentAt: instant(),
  },
  (t) => [
    uniqueIndex("email_owed_once").on(t.dedupeKey),
    index("emails_state").on(t.state),
    index("emails_order").on(t.orderId),
  ],
);

/** Counters of the rate limits (layout required by rate-limiter-flexible's PostgreSQL store). */
export const rateLimits = pgTable("rate_limits", {
  key: text().primaryKey(),
  points: integer().notNull().default(0),
  expire: bigint({ mode: "number" }),
});

/** The one-time code that lets the first visitor to /setup make the photographer's account. */
export const setupCodes = pgTable("setup_codes", {
  codeHash: text().primaryKey(),
  createdAt: recordedAt(),
  usedAt: instant(),
});
