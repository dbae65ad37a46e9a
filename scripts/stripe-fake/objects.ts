/*
 * Builders of the objects this fake answers with. Each is held against the SDK's own type, so that an
 * upgrade of the SDK that changes a shape fails in the type check and not in somebody's shop.
 */
import type Stripe from "stripe";
import type { PresentedCard } from "./cards";
import { newId } from "./ids";

/** The version of the API whose shapes these are; the one the installed SDK sends. */
export const API_VERSION = "2026-10-28.endive";

/** On the wire a decimal is text; the SDK makes its own object of it. */
export type WirePrice = Omit<Stripe.Price, "unit_amount_decimal"> & { unit_amount_decimal: string };
export type WireLineItem = Omit<Stripe.LineItem, "price"> & { price: WirePrice };

export type LineRequest = {
  name: string;
  description?: string | undefined;
  currency: string;
  unitAmount: number;
  quantity: number;
  taxBehavior?: "exclusive" | "inclusive" | "unspecified" | undefined;
};

export function newLineItem(line: LineRequest, created: number): WireLineItem {
  const amount = line.unitAmount * line.quantity;
  const price = {
    id: newId("price_1"),
    object: "price",
    active: false,
    billing_scheme: "per_unit",
    created,
    currency: line.currency,
    custom_unit_amount: null,
    livemode: false,
    lookup_key: null,
    metadata: {},
    nickname: null,
    product: newId("prod_", 14),
    recurring: null,
    tax_behavior: line.taxBehavior ?? "unspecified",
    tiers_mode: null,
    transform_quantity: null,
    type: "one_time",
    unit_amount: line.unitAmount,
    unit_amount_decimal: String(line.unitAmount),
  } satisfies WirePrice;
  return {
    id: newId("li_1"),
    object: "item",
    adjustable_quantity: null,
    amount_discount: 0,
    amount_subtotal: amount,
    amount_tax: 0,
    amount_total: amount,
    currency: line.currency,
    description: line.name,
    metadata: {},
    price,
    quantity: line.quantity,
  } satisfies WireLineItem;
}

export type ShippingRequest = {
  displayName: string;
  amount: number;
  currency: string;
  metadata: Record<string, string>;
  taxBehavior?: "exclusive" | "inclusive" | "unspecified" | undefined;
};

export function newShippingRate(rate: ShippingRequest, created: number): Stripe.ShippingRate {
  return {
    id: newId("shr_1"),
    object: "shipping_rate",
    active: false,
    created,
    delivery_estimate: null,
    display_name: rate.displayName,
    fixed_amount: { amount: rate.amount, currency: rate.currency },
    livemode: false,
    metadata: rate.metadata,
    tax_behavior: rate.taxBehavior ?? "unspecified",
    tax_code: null,
    type: "fixed_amount",
  } satisfies Stripe.ShippingRate;
}

export type SessionRequest = {
  id: string;
  url: string;
  created: number;
  expiresAt: number;
  currency: string;
  subtotal: number;
  shipping: readonly Stripe.ShippingRate[];
  metadata: Record<string, string>;
  paymentMethodTypes: readonly string[];
  successUrl: string;
  cancelUrl?: string | undefined;
  customerEmail?: string | undefined;
  clientReferenceId?: string | undefined;
  locale?: string | undefined;
  submitType?: string | undefined;
  customText: Partial<
    Record<"after_submit" | "shipping_address" | "submit" | "terms_of_service_acceptance", string>
  >;
  billingAddressCollection?: string | undefined;
  customerCreation?: string | undefined;
};

function details(email: string | null, name: string | null): Stripe.Checkout.Session.CustomerDetails {
  return {
    address: null,
    business_name: null,
    email,
    individual_name: null,
    name,
    phone: null,
    tax_exempt: "none",
    tax_ids: [],
  } satisfies Stripe.Checkout.Session.CustomerDetails;
}

/** The session with one of its shipping options chosen, and its totals to match. */
export function withShipping(
  session: Stripe.Checkout.Session,
  option: Stripe.Checkout.Session.ShippingOption | undefined,
): Stripe.Checkout.Session {
  if (!option) return session;
  const amount = option.shipping_amount;
  return {
    ...session,
    amount_total: (session.amount_subtotal ?? 0) + amount,
    shipping_cost: {
      amount_subtotal: amount,
      amount_tax: 0,
      amount_total: amount,
      shipping_rate: option.shipping_rate,
    },
    total_details: { amount_discount: 0, amount_shipping: amount, amount_tax: 0 },
  };
}

export function newSession(request: SessionRequest): Stripe.Checkout.Session {
  const said = (message: string | undefined) => (message === undefined ? null : { message });
  const options = request.shipping.map((rate) => ({
    shipping_amount: rate.fixed_amount?.amount ?? 0,
    shipping_rate: rate.id,
  }));
  const session = {
    id: request.id,
    object: "checkout.session",
    adaptive_pricing: null,
    after_expiration: null,
    allow_promotion_codes: null,
    allowed_payment_method_types: null,
    amount_subtotal: request.subtotal,
    amount_total: request.subtotal,
    automatic_tax: { enabled: false, liability: null, provider: null, status: null },
    billing_address_collection: request.billingAddressCollection ?? null,
    cancel_url: request.cancelUrl ?? null,
    client_reference_id: request.clientReferenceId ?? null,
    client_secret: null,
    collected_information: null,
    consent: null,
    consent_collection: null,
    created: request.created,
    currency: request.currency,
    currency_conversion: null,
    custom_fields: [],
    custom_text: {
      after_submit: said(request.customText.after_submit),
      shipping_address: said(request.customText.shipping_address),
      submit: said(request.customText.submit),
      terms_of_service_acceptance: said(request.customText.terms_of_service_acceptance),
    },
    customer: null,
    customer_account: null,
    customer_creation: request.customerCreation ?? "if_required",
    customer_details: request.customerEmail ? details(request.customerEmail, null) : null,
    customer_email: request.customerEmail ?? null,
    discounts: [],
    expires_at: request.expiresAt,
    integration_identifier: null,
    invoice: null,
    invoice_creation: null,
    livemode: false,
    locale: request.locale ?? null,
    managed_payments: null,
    metadata: request.metadata,
    mode: "payment",
    origin_context: null,
    payment_intent: null,
    payment_link: null,
    payment_method_collection: "if_required",
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_method_types: [...request.paymentMethodTypes],
    payment_status: "unpaid",
    permissions: null,
    phone_number_collection: { enabled: false },
    recovered_from: null,
    saved_payment_method_options: null,
    setup_intent: null,
    shipping_address_collection: null,
    shipping_cost: null,
    shipping_options: options,
    status: "open",
    submit_type: request.submitType ?? null,
    subscription: null,
    success_url: request.successUrl,
    total_details: { amount_discount: 0, amount_shipping: 0, amount_tax: 0 },
    ui_mode: "hosted_page",
    url: request.url,
    wallet_options: null,
  } satisfies Stripe.Checkout.Session;
  return withShipping(session, options[0]);
}

export function completedSession(
  session: Stripe.Checkout.Session,
  payer: { name: string; email: string | null },
  intent: string,
): Stripe.Checkout.Session {
  return {
    ...session,
    customer_details: details(payer.email, payer.name),
    payment_intent: intent,
    payment_status: "paid",
    status: "complete",
    url: null,
  };
}

/** What a session asks its payment intent to carry. */
export type IntentData = {
  description: string | null;
  metadata: Record<string, string>;
  receiptEmail: string | null;
  statementDescriptor: string | null;
  statementDescriptorSuffix: string | null;
};

export function newPaymentIntent(
  session: Stripe.Checkout.Session,
  data: IntentData,
  created: number,
): Stripe.PaymentIntent {
  const id = newId("pi_3");
  return {
    id,
    object: "payment_intent",
    allowed_payment_method_types: null,
    amount: session.amount_total ?? 0,
    amount_capturable: 0,
    amount_details: { tip: {} },
    amount_received: 0,
    application: null,
    application_fee_amount: null,
    automatic_payment_methods: null,
    canceled_at: null,
    cancellation_reason: null,
    capture_method: "automatic_async",
    client_secret: `${id}_secret_${newId("", 25)}`,
    confirmation_method: "automatic",
    created,
    currency: session.currency ?? "",
    customer: null,
    customer_account: null,
    description: data.description,
    excluded_payment_method_types: null,
    last_payment_error: null,
    latest_charge: null,
    livemode: false,
    managed_payments: null,
    metadata: data.metadata,
    next_action: null,
    on_behalf_of: null,
    payment_method: null,
    payment_method_configuration_details: null,
    payment_method_options: {
      card: { installments: null, mandate_options: null, network: null, request_three_d_secure: "automatic" },
    },
    payment_method_types: session.payment_method_types,
    payment_record: null,
    processing: null,
    receipt_email: data.receiptEmail,
    review: null,
    setup_future_usage: null,
    shipping: null,
    source: null,
    statement_descriptor: data.statementDescriptor,
    statement_descriptor_suffix: data.statementDescriptorSuffix,
    status: "requires_payment_method",
    transfer_data: null,
    transfer_group: null,
  } satisfies Stripe.PaymentIntent;
}

export type ChargeRequest = {
  intent: Stripe.PaymentIntent;
  card: PresentedCard;
  payer: { name: string; email: string | null };
  created: number;
  authenticated: boolean;
  /** Absent when the charge succeeded. */
  failure?: { code: string; declineCode: string; message: string };
};

export function newCharge({
  intent,
  card,
  payer,
  created,
  authenticated,
  failure,
}: ChargeRequest): Stripe.Charge {
  const cardDetails = {
    amount_authorized: failure ? null : intent.amount,
    authorization_code: failure ? null : newId("", 6).toUpperCase(),
    brand: card.brand,
    checks: {
      address_line1_check: null,
      address_postal_code_check: null,
      cvc_check: failure?.code === "incorrect_cvc" ? "fail" : "pass",
    },
    country: "US",
    electronic_commerce_indicator: authenticated ? "05" : null,
    exp_month: card.expMonth,
    exp_year: card.expYear,
    fingerprint: `fake${card.brand}${card.last4}`,
    funding: "credit",
    installments: null,
    last4: card.last4,
    mandate: null,
    network: card.brand,
    network_transaction_id: failure ? null : newId("", 15),
    regulated_status: "unregulated",
    three_d_secure: authenticated
      ? {
          authentication_flow: "challenge",
          electronic_commerce_indicator: "05",
          exemption_indicator: null,
          result: "authenticated",
          result_reason: null,
          transaction_id: newId("", 36),
          version: "2.2.0",
        }
      : null,
    transaction_link_id: null,
    wallet: null,
  } satisfies Stripe.Charge.PaymentMethodDetails.Card;
  return {
    id: newId("ch_3"),
    object: "charge",
    amount: intent.amount,
    amount_captured: failure ? 0 : intent.amount,
    amount_refunded: 0,
    application: null,
    application_fee: null,
    application_fee_amount: null,
    balance_transaction: failure ? null : newId("txn_3"),
    billing_details: { address: null, email: payer.email, name: payer.name, phone: null, tax_id: null },
    calculated_statement_descriptor: intent.statement_descriptor,
    captured: !failure,
    created,
    currency: intent.currency,
    customer: null,
    description: intent.description,
    disputed: false,
    failure_balance_transaction: null,
    failure_code: failure?.code ?? null,
    failure_message: failure?.message ?? null,
    fraud_details: {},
    livemode: false,
    metadata: intent.metadata,
    on_behalf_of: null,
    outcome: failure
      ? {
          advice_code: null,
          network_advice_code: null,
          network_decline_code: "01",
          network_status: "declined_by_network",
          reason: failure.declineCode,
          seller_message: failure.message,
          type: "issuer_declined",
        }
      : {
          advice_code: null,
          network_advice_code: null,
          network_decline_code: null,
          network_status: "approved_by_network",
          reason: null,
          risk_level: "normal",
          risk_score: 0,
          seller_message: "The payment went through.",
          type: "authorized",
        },
    paid: !failure,
    payment_intent: intent.id,
    payment_method: newId("pm_1"),
    payment_method_details: { card: cardDetails, type: "card" },
    receipt_email: intent.receipt_email,
    receipt_number: null,
    receipt_url: null,
    refunded: false,
    review: null,
    shipping: null,
    source: null,
    source_transfer: null,
    statement_descriptor: intent.statement_descriptor,
    statement_descriptor_suffix: intent.statement_descriptor_suffix,
    status: failure ? "failed" : "succeeded",
    transfer_data: null,
    transfer_group: null,
  } satisfies Stripe.Charge;
}

export type RefundRequest = {
  charge: Stripe.Charge;
  amount: number;
  created: number;
  metadata: Record<string, string>;
  reason: string | null;
  status: "pending" | "succeeded";
};

export function newRefund({
  charge,
  amount,
  created,
  metadata,
  reason,
  status,
}: RefundRequest): Stripe.Refund {
  return {
    id: newId("re_3"),
    object: "refund",
    amount,
    balance_transaction: newId("txn_3"),
    charge: charge.id,
    created,
    currency: charge.currency,
    customer: null,
    customer_account: null,
    destination_details: {
      card: { reference_status: "pending", reference_type: "acquirer_reference_number", type: "refund" },
      type: "card",
    },
    metadata,
    payment_intent: charge.payment_intent,
    payment_method: charge.payment_method,
    reason,
    receipt_number: null,
    source_transfer_reversal: null,
    status,
    transfer_reversal: null,
    ...(status === "pending" ? { pending_reason: "processing" } : {}),
  } satisfies Stripe.Refund;
}

/** The events this fake tells of. */
export type EventType =
  | "charge.refunded"
  | "checkout.session.completed"
  | "checkout.session.expired"
  | "payment_intent.canceled"
  | "payment_intent.payment_failed"
  | "payment_intent.requires_action"
  | "payment_intent.succeeded"
  | "refund.created"
  | "refund.failed"
  | "refund.updated";

export type EventSubject = Stripe.Charge | Stripe.Checkout.Session | Stripe.PaymentIntent | Stripe.Refund;

export type WireEvent = Omit<Stripe.EventBase, "data" | "type"> & {
  type: EventType;
  data: { object: EventSubject };
};

export function newEvent(
  type: EventType,
  subject: EventSubject,
  created: number,
  request: { id: string; idempotencyKey: string | null } | null,
): WireEvent {
  return {
    id: newId("evt_1"),
    object: "event",
    api_version: API_VERSION,
    created,
    data: { object: structuredClone(subject) },
    livemode: false,
    pending_webhooks: 0,
    request: { id: request?.id ?? null, idempotency_key: request?.idempotencyKey ?? null },
    type,
  } satisfies WireEvent;
}
