/** What happens to a card that is tried on the payment page. */
export type CardConduct =
  | { kind: "success"; refund?: "pending" | "fails" }
  | { kind: "authenticate" }
  | { kind: "decline"; code: string; declineCode: string };

/** A test card that this fake knows. The numbers and what each does are Stripe's published test cards. */
export type TestCard = {
  number: string;
  brand: "amex" | "mastercard" | "visa";
  conduct: CardConduct;
};

const decline = (code: string, declineCode = code): CardConduct => ({ kind: "decline", code, declineCode });

export const TEST_CARDS: readonly TestCard[] = [
  { number: "4242424242424242", brand: "visa", conduct: { kind: "success" } },
  { number: "5555555555554444", brand: "mastercard", conduct: { kind: "success" } },
  { number: "378282246310005", brand: "amex", conduct: { kind: "success" } },
  { number: "4000002500003155", brand: "visa", conduct: { kind: "authenticate" } },
  { number: "4000000000000002", brand: "visa", conduct: decline("card_declined", "generic_decline") },
  { number: "4000000000009995", brand: "visa", conduct: decline("card_declined", "insufficient_funds") },
  { number: "4000000000000069", brand: "visa", conduct: decline("expired_card") },
  { number: "4000000000000127", brand: "visa", conduct: decline("incorrect_cvc") },
  { number: "4000000000000119", brand: "visa", conduct: decline("processing_error") },
  { number: "4000000000007726", brand: "visa", conduct: { kind: "success", refund: "pending" } },
  { number: "4000000000005126", brand: "visa", conduct: { kind: "success", refund: "fails" } },
];

/** A card as it was filled in and understood. The number itself is never kept. */
export type PresentedCard = {
  brand: TestCard["brand"];
  last4: string;
  expMonth: number;
  expYear: number;
  conduct: CardConduct;
};

export type CardAnswers = { number: string; expiry: string; cvc: string };
export type CardMistakes = Partial<Record<keyof CardAnswers, "unknown" | "wrong" | "past">>;

function passesLuhn(digits: string): boolean {
  let sum = 0;
  for (let at = 0; at < digits.length; at += 1) {
    const digit = Number(digits[digits.length - 1 - at]);
    const doubled = digit * 2;
    sum += at % 2 === 0 ? digit : doubled > 9 ? doubled - 9 : doubled;
  }
  return sum % 10 === 0;
}

/**
 * Reads a card form: number (spaces and hyphens allowed), expiry `MM/YY` or `MM/YYYY`, CVC.
 * A card is good to the last day of its month. `now` is in milliseconds.
 */
export function readCard(
  answers: CardAnswers,
  now: number,
): { card: PresentedCard } | { mistakes: CardMistakes } {
  const mistakes: CardMistakes = {};
  const digits = answers.number.replace(/[\s-]/g, "");
  const card = TEST_CARDS.find((known) => known.number === digits);
  if (!card) mistakes.number = /^\d{13,19}$/.test(digits) && passesLuhn(digits) ? "unknown" : "wrong";

  const expiry = /^\s*(0?[1-9]|1[0-2])\s*[/.-]?\s*((?:20)?\d{2})\s*$/.exec(answers.expiry);
  const month = Number(expiry?.[1]);
  const year = 2000 + (Number(expiry?.[2]) % 100);
  if (!expiry) mistakes.expiry = "wrong";
  else if (Date.UTC(year, month, 1) <= now) mistakes.expiry = "past";

  const cvcLength = card?.brand === "amex" ? 4 : 3;
  const cvc = answers.cvc.trim();
  if (!/^\d+$/.test(cvc) || (card ? cvc.length !== cvcLength : cvc.length < 3 || cvc.length > 4)) {
    mistakes.cvc = "wrong";
  }
  if (!card || Object.keys(mistakes).length > 0) return { mistakes };
  return {
    card: {
      brand: card.brand,
      last4: digits.slice(-4),
      expMonth: month,
      expYear: year,
      conduct: card.conduct,
    },
  };
}
