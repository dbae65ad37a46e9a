import { expect, type Locator, type Page } from "@playwright/test";

export type Buyer = { name: string; email: string; line1: string; city: string; postcode: string };

let buyers = 0;

/** Somebody who has never bought here, with an address of their own. */
export function newBuyer(name: string): Buyer {
  buyers += 1;
  const mark = `${Date.now().toString(36)}${buyers}`;
  const mailbox = name.toLowerCase().replace(/[^a-z]+/g, ".");
  return {
    name,
    email: `${mailbox}.${mark}@buyers.example`,
    line1: "4 Lantern Way",
    city: "Eastmoor",
    postcode: "VE5 2ZA",
  };
}

/** Puts what the print's page offers first in the basket, and is then at the counter. */
export async function putInBasket(page: Page, mark: string): Promise<void> {
  await page.getByRole("button", { name: `Put ${mark} in the basket` }).click();
  await expect(page).toHaveURL("/basket");
  await expect(page.getByRole("heading", { level: 1, name: "Your basket" })).toBeVisible();
}

/** Fills in the counter's form for delivery at home. */
export async function fillCounter(page: Page, buyer: Buyer): Promise<void> {
  await page.getByLabel("E-mail address").fill(buyer.email);
  await page.getByLabel("Name", { exact: true }).fill(buyer.name);
  await page.getByLabel("Street and number").fill(buyer.line1);
  await page.getByLabel("Postcode").fill(buyer.postcode);
  await page.getByLabel("Town").fill(buyer.city);
}

/** The one press that orders. */
export function orderPress(page: Page): Locator {
  return page.getByRole("button", { name: /^Order and pay £/ });
}

/** The leaf of a numbered copy on a number sheet. */
export function leaf(page: Page, number: number): Locator {
  return page
    .locator(".number-sheet li")
    .filter({ has: page.locator(".leaf-no", { hasText: new RegExp(`^${number}$`) }) });
}
