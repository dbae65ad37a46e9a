import { fillCounter, leaf, newBuyer, orderPress } from "../support/buy";
import { expect, test } from "../support/e2e";
import { CARDS, onPaymentPage, payWith } from "../support/pay-with";
import { linkIn, readMail } from "../support/read-mail";

/* The buyer's part once more, on a telephone whose browser runs no scripts. */

test("a print is found, chosen, ordered and paid without scripts", async ({ visit }) => {
  const page = await visit({ scripts: false });
  const buyer = newBuyer("Isolde Marchbank");

  await page.goto("/");
  await page.getByRole("navigation", { name: "Shop" }).getByRole("link", { name: "Prints" }).click();
  await page.getByLabel("What is left").selectOption({ label: "To be bought now" });
  await page.getByRole("button", { name: "Show", exact: true }).click();
  await expect(page).toHaveURL(/\/prints\?.*left=/);
  await page.locator('a[href="/prints/winter-plough"]').first().click();
  await expect(page).toHaveURL("/prints/winter-plough");

  await page.getByLabel("Deliver to").selectOption("DE");
  await page.getByRole("button", { name: "Work it out" }).click();
  await expect(page).toHaveURL(/[?&]to=DE/);
  await expect(page.getByText(/^Delivery to Germany: £/)).toBeVisible();
  const press = page.getByRole("button", { name: /^Put \d+\/12 in the basket$/ });
  const mark = /\d+\/12/.exec((await press.textContent()) ?? "")?.[0] ?? "";
  const number = Number(mark.split("/")[0]);
  await expect(leaf(page, number)).toContainText("next");
  await press.click();
  await expect(page).toHaveURL("/basket");

  // A second line, and out again.
  await page.goto("/prints/beeches-pell-wood");
  await page.getByRole("button", { name: /in the basket$/ }).click();
  await expect(page.getByRole("button", { name: /^Take .* out of the basket$/ })).toHaveCount(2);
  await page.getByRole("button", { name: /^Take Beeches.* out of the basket$/i }).click();
  await expect(page.getByRole("button", { name: /^Take .* out of the basket$/ })).toHaveCount(1);

  // The country changes the sums, at a press; what was filled in stays.
  await fillCounter(page, buyer);
  const home = await orderPress(page).textContent();
  await page.getByLabel("Country of delivery").selectOption("DE");
  await page.getByRole("button", { name: "Work out the sums for this" }).click();
  await expect(orderPress(page)).not.toHaveText(home ?? "");
  await expect(page.getByLabel("E-mail address")).toHaveValue(buyer.email);
  await page.getByLabel("Country of delivery").selectOption("GB");
  await page.getByRole("button", { name: "Work out the sums for this" }).click();
  await expect(orderPress(page)).toHaveText(home ?? "");

  await page.getByLabel("E-mail address").fill("not an address");
  await orderPress(page).click();
  await expect(page.locator('[aria-invalid="true"]')).toHaveValue("not an address");
  await expect(page.getByLabel("Name", { exact: true })).toHaveValue(buyer.name);
  await page.getByLabel("E-mail address").fill(buyer.email);
  await orderPress(page).click();
  await onPaymentPage(page);
  await payWith(page, CARDS.declined);
  await expect(page.locator("[data-declined]")).toBeVisible();
  await payWith(page, CARDS.good);

  await expect(page).toHaveURL(/\/orders\/[\w-]{22,}$/);
  await expect(page.getByText("Thank you. These numbers are yours.")).toBeVisible();
  await expect(page.locator(".order-copies")).toContainText(mark);
  const mail = await readMail(buyer.email, new RegExp(`^Your order \\d+: ${mark}`));
  await page.goto(linkIn(mail, /^\/orders\//));
  await expect(page.locator(".order-copies")).toContainText(mark);
  const code = page.getByRole("link", { name: `Check ${mark} in the edition book` });
  await code.click();
  await expect(page.getByText("Winter Plough", { exact: false }).first()).toBeVisible();
  await page.goto("/prints/winter-plough");
  await expect(leaf(page, number)).toContainText("gone");
});
