import { z } from "zod";
import { tell } from "./events";
import { badParameter, noSuchObject, notNow } from "./faults";
import { newId } from "./ids";
import { newLineItem, newSession, newShippingRate } from "./objects";
import {
  currencyCode,
  expandable,
  flag,
  instant,
  mailAddress,
  metadata,
  off,
  text,
  webAddress,
  whole,
} from "./parameters";
import type { Changes, SessionRecord } from "./store";

/** Stripe's bounds on `expires_at`, counted from the session's creation. */
const SHORTEST_SECONDS = 30 * 60;
const LONGEST_SECONDS = 24 * 60 * 60;
const LARGEST_AMOUNT = 99_999_999;
/** The least Stripe takes in a currency, in minor units, from memory; 50 where nothing else is listed. */
const SMALLEST_AMOUNT: Record<string, number> = {
  gbp: 30,
  sek: 300,
  nok: 300,
  dkk: 250,
  czk: 1500,
  jpy: 50,
  pln: 200,
};

const taxBehavior = z.enum(["exclusive", "inclusive", "unspecified"]).optional();
const message = z.strictObject({ message: text(1200) }).optional();

export const createSessionParameters = z.strictObject({
  ...expandable,
  mode: z.literal("payment", { error: "this fake knows only payment" }),
  ui_mode: z.literal("hosted_page").optional(),
  line_items: z
    .array(
      z.strictObject({
        price_data: z.strictObject({
          currency: currencyCode,
          unit_amount: whole(0),
          tax_behavior: taxBehavior,
          product_data: z.strictObject({
            name: text(1500),
            description: text(1500).optional(),
            images: z.array(webAddress).max(8).optional(),
            metadata: metadata.optional(),
            tax_code: text(100).optional(),
          }),
        }),
        quantity: whole(1),
        metadata: metadata.optional(),
      }),
    )
    .max(100),
  success_url: webAddress,
  cancel_url: webAddress.optional(),
  client_reference_id: text(200).optional(),
  customer_email: mailAddress.optional(),
  currency: currencyCode.optional(),
  metadata: metadata.optional(),
  payment_intent_data: z
    .strictObject({
      capture_method: z.enum(["automatic", "automatic_async"]).optional(),
      description: text(1000).optional(),
      metadata: metadata.optional(),
      receipt_email: mailAddress.optional(),
      statement_descriptor: text(22).optional(),
      statement_descriptor_suffix: text(22).optional(),
    })
    .optional(),
  locale: text(10).optional(),
  expires_at: instant.optional(),
  allowed_payment_method_types: z.array(text(50)).optional(),
  custom_text: z
    .strictObject({
      after_submit: message,
      shipping_address: message,
      submit: message,
      terms_of_service_acceptance: message,
    })
    .optional(),
  submit_type: z.enum(["auto", "book", "donate", "pay"]).optional(),
  shipping_options: z
    .array(
      z.strictObject({
        shipping_rate_data: z.strictObject({
          display_name: text(100),
          type: z.literal("fixed_amount").optional(),
          fixed_amount: z.strictObject({ amount: whole(0), currency: currencyCode }),
          metadata: metadata.optional(),
          tax_behavior: taxBehavior,
          tax_code: text(100).optional(),
        }),
      }),
    )
    .max(5)
    .optional(),
  billing_address_collection: z.literal("auto").optional(),
  customer_creation: z.literal("if_required").optional(),
  allow_promotion_codes: flag.refine((value) => !value, { error: "this fake knows only false" }).optional(),
  automatic_tax: off.optional(),
  invoice_creation: off.optional(),
  phone_number_collection: off.optional(),
  tax_id_collection: off.optional(),
});

function expiry(wanted: number | undefined, created: number): number {
  if (wanted === undefined) return created + LONGEST_SECONDS;
  if (wanted < created + SHORTEST_SECONDS) {
    throw badParameter("A session lasts at least 30 minutes from its creation.", "expires_at");
  }
  if (wanted > created + LONGEST_SECONDS) {
    throw badParameter("A session lasts at most 24 hours from its creation.", "expires_at");
  }
  return wanted;
}

/**
 * Makes a checkout session.
 *
 * Its payment intent comes with the first try to pay, as Stripe does it: until then `payment_intent` is null.
 * @param address gives the address of the payment page of a session id.
 */
export function createSession(
  changes: Changes,
  asked: z.output<typeof createSessionParameters>,
  address: (id: string) => string,
): SessionRecord {
  const created = changes.seconds;
  const expiresAt = expiry(asked.expires_at, created);
  if (asked.line_items.length === 0) {
    throw badParameter("At least one line is required.", "line_items", "parameter_missing");
  }
  const currency = asked.line_items[0]?.price_data.currency ?? "";
  const others = [
    ...asked.line_items.map((line) => line.price_data.currency),
    ...(asked.shipping_options ?? []).map((option) => option.shipping_rate_data.fixed_amount.currency),
    ...(asked.currency ? [asked.currency] : []),
  ];
  if (others.some((other) => other !== currency)) {
    throw badParameter("All amounts of a session are in one currency.", "currency");
  }
  const lineItems = asked.line_items.map((line) => ({
    ...newLineItem(
      {
        name: line.price_data.product_data.name,
        currency,
        unitAmount: line.price_data.unit_amount,
        quantity: line.quantity,
        taxBehavior: line.price_data.tax_behavior,
      },
      created,
    ),
    metadata: line.metadata ?? {},
  }));
  const shippingRates = (asked.shipping_options ?? []).map(({ shipping_rate_data: rate }) =>
    newShippingRate(
      {
        displayName: rate.display_name,
        amount: rate.fixed_amount.amount,
        currency,
        metadata: rate.metadata ?? {},
        taxBehavior: rate.tax_behavior,
      },
      created,
    ),
  );
  const id = newId("cs_test_a1", 56);
  const said = asked.custom_text;
  const session = newSession({
    id,
    url: address(id),
    created,
    expiresAt,
    currency,
    subtotal: lineItems.reduce((sum, line) => sum + line.amount_total, 0),
    shipping: shippingRates,
    metadata: asked.metadata ?? {},
    paymentMethodTypes: asked.allowed_payment_method_types ?? ["card"],
    successUrl: asked.success_url,
    cancelUrl: asked.cancel_url,
    customerEmail: asked.customer_email,
    clientReferenceId: asked.client_reference_id,
    locale: asked.locale,
    submitType: asked.submit_type,
    customText: {
      ...(said?.after_submit && { after_submit: said.after_submit.message }),
      ...(said?.shipping_address && { shipping_address: said.shipping_address.message }),
      ...(said?.submit && { submit: said.submit.message }),
      ...(said?.terms_of_service_acceptance && {
        terms_of_service_acceptance: said.terms_of_service_acceptance.message,
      }),
    },
    billingAddressCollection: asked.billing_address_collection,
    customerCreation: asked.customer_creation,
  });
  const total = session.amount_total ?? 0;
  if (total < (SMALLEST_AMOUNT[currency] ?? 50)) {
    throw badParameter(
      `The total of ${total} is less than can be charged in ${currency}.`,
      "line_items",
      "amount_too_small",
    );
  }
  if (total > LARGEST_AMOUNT) {
    throw badParameter("The total is more than can be charged at once.", "line_items", "amount_too_large");
  }
  const data = asked.payment_intent_data;
  const record: SessionRecord = {
    id,
    session,
    lineItems,
    shippingRates,
    intentData: {
      description: data?.description ?? null,
      metadata: data?.metadata ?? {},
      receiptEmail: data?.receipt_email ?? null,
      statementDescriptor: data?.statement_descriptor ?? null,
      statementDescriptorSuffix: data?.statement_descriptor_suffix ?? null,
    },
    awaiting: null,
  };
  changes.put("sessions", record);
  return record;
}

function expire(changes: Changes, record: SessionRecord): SessionRecord {
  const id = typeof record.session.payment_intent === "string" ? record.session.payment_intent : "";
  const intent = changes.get("intents", id);
  if (intent) {
    const canceled = {
      ...intent,
      canceled_at: changes.seconds,
      cancellation_reason: "expired",
      next_action: null,
      status: "canceled",
    } satisfies typeof intent;
    changes.put("intents", canceled);
    tell(changes, "payment_intent.canceled", canceled);
  }
  const expired: SessionRecord = {
    ...record,
    session: { ...record.session, status: "expired", url: null },
    awaiting: null,
  };
  changes.put("sessions", expired);
  tell(changes, "checkout.session.expired", expired.session);
  return expired;
}

/** A session as it stands now: one whose time has passed is expired by being looked at. */
export function sessionNow(changes: Changes, id: string): SessionRecord | undefined {
  const record = changes.get("sessions", id);
  if (record?.session.status !== "open" || record.session.expires_at > changes.seconds) return record;
  return expire(changes, record);
}

export function requireSession(changes: Changes, id: string): SessionRecord {
  const record = sessionNow(changes, id);
  if (!record) throw noSuchObject("checkout.session", id, "session");
  return record;
}

/** Expires an open session at once; 400 when it is complete or expired already. */
export function expireSession(changes: Changes, id: string): SessionRecord {
  const record = requireSession(changes, id);
  if (record.session.status !== "open") {
    throw notNow(`Only an open session can be expired; this one has the status ${record.session.status}.`);
  }
  return expire(changes, record);
}
