import type { OrderStands } from "./order-view.server";

/** Words for the studio's screens. */
export const STANDS_WORDS: Record<OrderStands, string> = {
  awaiting_payment: "awaiting payment",
  paid: "paid, to print",
  printing: "printing",
  signed: "signed, to send",
  sent: "sent",
  arrived: "arrived",
  cancelled: "cancelled",
  expired: "expired unpaid",
};

const ATTENTION: Record<string, string> = {
  paid_twice: "It was paid twice; the second payment goes back by itself. See that it does.",
  amount_differs: "The sum paid is not the sum asked; it goes back by itself. Write to the buyer.",
  refund_failed:
    "A refund was refused by the payment service. Give the money back another way, then say so here.",
};

/** What a person must look at, in a sentence. */
export function attentionWords(code: string): string {
  return ATTENTION[code] ?? code;
}

const EVENTS: Record<string, string> = {
  placed: "Order placed; numbers held",
  made_by_hand: "Made by hand in the studio",
  prices_accepted: "The buyer accepted a dearer number",
  paid: "Paid",
  offered: "Another number offered",
  offer_accepted: "The offered number was accepted",
  offer_declined: "The offered number was declined",
  offer_lapsed: "The offered number was not answered in time",
  cancelled: "Cancelled",
  expired: "The hold ended unpaid",
  refunded: "Money given back",
  sent: "Sent",
  handed_over: "Handed over",
  email_corrected: "The buyer corrected their e-mail address",
  attention_cleared: "Looked at and put right",
};

/** An entry of an order's history, in words. */
export function eventWords(kind: string): string {
  return EVENTS[kind] ?? kind.replaceAll("_", " ");
}

const REASONS: Record<string, string> = {
  cancelled: "cancelled",
  number_gone: "its number had gone",
  offer_declined: "the offered number was declined",
  cheaper_number: "the offered number costs less",
  paid_twice: "paid twice",
  amount_differs: "the sum was not the one asked",
  returned: "returned",
};

/** Why money went back, in words. */
export function refundWords(reason: string): string {
  return REASONS[reason] ?? reason;
}
