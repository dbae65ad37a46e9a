import { expect, type Page } from "@playwright/test";
import { stripeUrl } from "./instance";

/** Stripe's published test cards. */
export const CARDS = {
  good: "4242424242424242",
  declined: "4000000000000002",
  asksTheBank: "4000002500003155",
} as const;

/** Whether the browser is on the hosted payment page. */
export async function onPaymentPage(page: Page): Promise<void> {
  await expect(page).toHaveURL((url) => url.href.startsWith(`${stripeUrl}/pay/`));
}

/** Fills in the hosted payment page, which the browser must have reached, and sends it. Works without scripts too. */
export async function payWith(page: Page, card: string): Promise<void> {
  await onPaymentPage(page);
  await page.locator("[name=card_number]").fill(card);
  await page.locator("[name=card_expiry]").fill(`12/${(new Date().getFullYear() + 2) % 100}`);
  await page.locator("[name=card_cvc]").fill("123");
  await page.locator("[name=card_name]").fill("A Buyer");
  await page.locator("form button[type=submit]").click();
}

/** Changes how the stand-in for Stripe behaves; `{ reset: true }` puts everything back. */
export async function switchStripe(change: Record<string, unknown>): Promise<void> {
  const answer = await fetch(`${stripeUrl}/-/switches`, {
    method: "POST",
    headers: { "Content-Type": "application/json" },
    body: JSON.stringify(change),
  });
  if (!answer.ok) throw new Error(`the switch was not taken: ${await answer.text()}`);
}

/** Pays a payment page without visiting it, by the same code. Answers what became of it. */
export async function payQuietly(session: string, card: string): Promise<string> {
  const answer = await fetch(`${stripeUrl}/-/sessions/${session}/pay`, {
    method: "POST",
    headers: { "Content-Type": "application/json" },
    body: JSON.stringify({ card, name: "A Buyer" }),
  });
  const { kind }: { kind: string } = await answer.json();
  return kind;
}
