import type Stripe from "stripe";
import type { PresentedCard } from "./cards";
import { tell } from "./events";
import { noSuchObject, notNow } from "./faults";
import { completedSession, newCharge, newPaymentIntent, withShipping } from "./objects";
import { sessionNow } from "./sessions";
import type { Changes, SessionRecord } from "./store";

export type Payer = { name: string; email: string | null };

/** What became of a try to pay. */
export type PaymentOutcome =
  | { kind: "paid"; redirect: string }
  | { kind: "declined"; code: string; declineCode: string }
  | { kind: "authenticate" }
  | { kind: "closed"; status: "complete" | "expired" }
  | { kind: "unknown" };

const FAILURE_WORDS: Record<string, string> = {
  card_declined: "The card's bank said no.",
  expired_card: "The card is out of date.",
  incorrect_cvc: "The card's check digits are wrong.",
  payment_intent_authentication_failure: "The card's holder did not approve the payment.",
  processing_error: "The payment could not be processed.",
};

/** The address to go on to after paying, with Stripe's placeholder filled in. */
export function successAddress(session: Stripe.Checkout.Session): string {
  return (session.success_url ?? "").replaceAll("{CHECKOUT_SESSION_ID}", session.id);
}

function intentOf(changes: Changes, record: SessionRecord): Stripe.PaymentIntent {
  const id = typeof record.session.payment_intent === "string" ? record.session.payment_intent : "";
  const intent =
    changes.get("intents", id) ?? newPaymentIntent(record.session, record.intentData, changes.seconds);
  return { ...intent, amount: record.session.amount_total ?? 0 };
}

function closedOr(record: SessionRecord | undefined): PaymentOutcome | SessionRecord {
  if (!record) return { kind: "unknown" };
  if (record.session.status === "complete") return { kind: "closed", status: "complete" };
  if (record.session.status !== "open") return { kind: "closed", status: "expired" };
  return record;
}

function fail(
  changes: Changes,
  record: SessionRecord,
  intent: Stripe.PaymentIntent,
  failure: { code: string; declineCode: string; charge?: Stripe.Charge },
): PaymentOutcome {
  const failed = {
    ...intent,
    last_payment_error: {
      type: "card_error",
      code: failure.code,
      message: FAILURE_WORDS[failure.code] ?? "The payment failed.",
      ...(failure.charge && { charge: failure.charge.id, decline_code: failure.declineCode }),
    },
    latest_charge: failure.charge?.id ?? intent.latest_charge,
    next_action: null,
    status: "requires_payment_method",
  } satisfies Stripe.PaymentIntent;
  changes.put("intents", failed);
  changes.put("sessions", {
    ...record,
    session: { ...record.session, payment_intent: failed.id },
    awaiting: null,
  });
  tell(changes, "payment_intent.payment_failed", failed);
  return { kind: "declined", code: failure.code, declineCode: failure.declineCode };
}

function succeed(
  changes: Changes,
  record: SessionRecord,
  intent: Stripe.PaymentIntent,
  card: PresentedCard,
  payer: Payer,
  authenticated: boolean,
): PaymentOutcome {
  const charge = newCharge({ intent, card, payer, created: changes.seconds, authenticated });
  const paid = {
    ...intent,
    amount_received: intent.amount,
    last_payment_error: null,
    latest_charge: charge.id,
    next_action: null,
    payment_method: charge.payment_method,
    status: "succeeded",
  } satisfies Stripe.PaymentIntent;
  const session = completedSession(record.session, payer, paid.id);
  const refunds = card.conduct.kind === "success" ? (card.conduct.refund ?? null) : null;
  changes.put("charges", { id: charge.id, charge, refunds });
  changes.put("intents", paid);
  changes.put("sessions", { ...record, session, awaiting: null });
  tell(changes, "payment_intent.succeeded", paid);
  tell(changes, "checkout.session.completed", session);
  return { kind: "paid", redirect: successAddress(session) };
}

/**
 * Tries a card on a session. A session is paid once: whoever comes after the first finds it closed.
 * @param shippingOption which of the session's shipping options was chosen, counted from 0.
 */
export function submitCard(
  changes: Changes,
  sessionId: string,
  card: PresentedCard,
  payer: Payer,
  shippingOption = 0,
): PaymentOutcome {
  const found = closedOr(sessionNow(changes, sessionId));
  if ("kind" in found) return found;
  const chosen = withShipping(found.session, found.session.shipping_options[shippingOption]);
  const record: SessionRecord = { ...found, session: chosen };
  const intent = intentOf(changes, record);
  const { conduct } = card;

  if (conduct.kind === "authenticate") {
    const waiting = {
      ...intent,
      next_action: {
        type: "redirect_to_url",
        redirect_to_url: { return_url: null, url: `${chosen.url}/authenticate` },
      },
      status: "requires_action",
    } satisfies Stripe.PaymentIntent;
    changes.put("intents", waiting);
    changes.put("sessions", {
      ...record,
      session: { ...chosen, payment_intent: waiting.id },
      awaiting: { card, payer },
    });
    tell(changes, "payment_intent.requires_action", waiting);
    return { kind: "authenticate" };
  }
  if (conduct.kind === "decline") {
    const message = FAILURE_WORDS[conduct.code] ?? "The payment failed.";
    const failure = { code: conduct.code, declineCode: conduct.declineCode, message };
    const charge = newCharge({
      intent,
      card,
      payer,
      created: changes.seconds,
      authenticated: false,
      failure,
    });
    changes.put("charges", { id: charge.id, charge, refunds: null });
    return fail(changes, record, intent, { ...failure, charge });
  }
  return succeed(changes, record, intent, card, payer, false);
}

/** The holder's answer to the question of their bank; nothing waits for one when no card asked for it. */
export function answerAuthentication(
  changes: Changes,
  sessionId: string,
  approved: boolean,
): PaymentOutcome | { kind: "nothing to answer" } {
  const record = closedOr(sessionNow(changes, sessionId));
  if ("kind" in record) return record;
  if (!record.awaiting) return { kind: "nothing to answer" };
  const intent = intentOf(changes, record);
  const code = "payment_intent_authentication_failure";
  if (!approved) return fail(changes, record, intent, { code, declineCode: code });
  return succeed(changes, record, intent, record.awaiting.card, record.awaiting.payer, true);
}

/**
 * Canceling a payment intent. Every intent here belongs to a checkout session, and Stripe cancels those
 * only by expiring the session, so this always ends in one of Stripe's errors.
 */
export function cancelIntent(changes: Changes, id: string): never {
  const intent = changes.get("intents", id);
  if (!intent) throw noSuchObject("payment_intent", id, "intent");
  if (intent.status === "succeeded" || intent.status === "canceled") {
    throw notNow(`A payment intent that is ${intent.status} cannot be canceled.`, {
      code: "payment_intent_unexpected_state",
    });
  }
  throw notNow("This payment intent belongs to a checkout session: expire the session instead.");
}
