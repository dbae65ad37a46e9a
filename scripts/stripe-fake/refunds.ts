import type Stripe from "stripe";
import { z } from "zod";
import { tell } from "./events";
import { badParameter, noSuchObject, notNow } from "./faults";
import { newRefund } from "./objects";
import { expandable, metadata, text, whole } from "./parameters";
import type { Changes, ChargeRecord, RefundRecord } from "./store";

export const createRefundParameters = z.strictObject({
  ...expandable,
  payment_intent: text(100).optional(),
  charge: text(100).optional(),
  amount: whole(1).optional(),
  metadata: metadata.optional(),
  reason: z.enum(["duplicate", "fraudulent", "requested_by_customer"]).optional(),
});

export const updateRefundParameters = z.strictObject({ ...expandable, metadata: metadata.optional() });

function chargeToRefund(
  changes: Changes,
  asked: { payment_intent?: string | undefined; charge?: string | undefined },
): ChargeRecord {
  if ((asked.payment_intent === undefined) === (asked.charge === undefined)) {
    throw badParameter("Name either a payment_intent or a charge.", "payment_intent", "parameter_missing");
  }
  let id = asked.charge ?? "";
  if (asked.payment_intent !== undefined) {
    const intent = changes.get("intents", asked.payment_intent);
    if (!intent) throw noSuchObject("payment_intent", asked.payment_intent, "payment_intent");
    id = typeof intent.latest_charge === "string" ? intent.latest_charge : "";
  }
  const record = changes.get("charges", id);
  if (!record && asked.charge !== undefined) throw noSuchObject("charge", asked.charge, "charge");
  if (!record?.charge.paid) {
    throw notNow("There is no successful charge to refund.", {
      param: asked.charge === undefined ? "payment_intent" : "charge",
    });
  }
  return record;
}

function withRefunded(charge: Stripe.Charge, by: number): Stripe.Charge {
  const amount = charge.amount_refunded + by;
  return { ...charge, amount_refunded: amount, refunded: amount === charge.amount };
}

/**
 * Gives money back: the whole rest of a charge, or an amount of it in minor units.
 * @param settleMs how long a refund that does not end at once takes to end.
 */
export function createRefund(
  changes: Changes,
  asked: z.output<typeof createRefundParameters>,
  settleMs: number,
): Stripe.Refund {
  const record = chargeToRefund(changes, asked);
  const { charge } = record;
  const rest = charge.amount - charge.amount_refunded;
  if (rest === 0) {
    throw notNow(`The charge ${charge.id} has been refunded already.`, { code: "charge_already_refunded" });
  }
  const amount = asked.amount ?? rest;
  if (amount > rest) {
    throw notNow(`The refund of ${amount} is more than the ${rest} left of the charge.`, { param: "amount" });
  }
  const refund = newRefund({
    charge,
    amount,
    created: changes.seconds,
    metadata: asked.metadata ?? {},
    reason: asked.reason ?? null,
    status: record.refunds === "pending" ? "pending" : "succeeded",
  });
  const refunded = withRefunded(charge, amount);
  changes.put("refunds", {
    id: refund.id,
    refund,
    settles: record.refunds && {
      at: changes.now + settleMs,
      as: record.refunds === "pending" ? "succeeded" : "failed",
    },
  });
  changes.put("charges", { ...record, charge: refunded });
  tell(changes, "refund.created", refund);
  tell(changes, "charge.refunded", refunded);
  return refund;
}

export function updateRefund(
  changes: Changes,
  id: string,
  asked: z.output<typeof updateRefundParameters>,
): Stripe.Refund {
  const record = changes.get("refunds", id);
  if (!record) throw noSuchObject("refund", id);
  const refund = { ...record.refund, metadata: { ...record.refund.metadata, ...asked.metadata } };
  changes.put("refunds", { ...record, refund });
  tell(changes, "refund.updated", refund);
  return refund;
}

/** Ends a refund whose time has come: its bank took it, or sent it back. */
export function settleRefund(changes: Changes, record: RefundRecord): void {
  if (!record.settles || record.settles.at > changes.now) return;
  const failed = record.settles.as === "failed";
  const { pending_reason: _ended, ...rest } = record.refund;
  const refund: Stripe.Refund = {
    ...rest,
    status: record.settles.as,
    ...(failed && { failure_reason: "lost_or_stolen_card" }),
  };
  changes.put("refunds", { ...record, refund, settles: null });
  if (failed) {
    const id = typeof refund.charge === "string" ? refund.charge : "";
    const paid = changes.get("charges", id);
    if (paid) changes.put("charges", { ...paid, charge: withRefunded(paid.charge, -refund.amount) });
    tell(changes, "refund.failed", refund);
  }
  tell(changes, "refund.updated", refund);
}
