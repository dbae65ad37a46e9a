import { mkdir } from "node:fs/promises";
import type { Page } from "@playwright/test";
import { type Buyer, fillCounter, leaf, newBuyer, orderPress, putInBasket } from "../support/buy";
import { expect, goto, look, test } from "../support/e2e";
import { demoLogin } from "../support/login";
import { CARDS, onPaymentPage, payWith } from "../support/pay-with";
import { linkIn, mailsTo, readMail } from "../support/read-mail";
import { colourScan, greyScan, hostileFile } from "../support/scan-files";

/*
 * From the scans of a roll to the print on somebody's doorstep, with every part of the instance running as it does for
 * anybody. One chapter follows another, each a test, so that each has its own time and its own place in the report.
 */

test.describe.configure({ mode: "serial" });

const TITLE = `Ferry Steps ${Date.now().toString(36)}`;

/** What one chapter leaves to the next. */
const story = { roll: "", print: "", edition: "", shop: "", firstOrder: "", lastOrder: "" };

const first = newBuyer("Oriel Tamsin");
const last = newBuyer("Benedick Saltmarsh");

/** The number in an order's heading, as everybody sees it. */
async function orderNumber(page: Page): Promise<string> {
  const text = await page.getByRole("heading", { level: 1, name: /^Order \d+$/ }).textContent();
  return text?.replace("Order ", "") ?? "";
}

/** Opens an order of the studio's list, found by its number. */
async function findOrder(page: Page, number: string): Promise<void> {
  await page.goto("/studio/orders");
  await page.getByLabel("Number, buyer, e-mail or print").fill(number);
  await page.getByRole("button", { name: "Show" }).click();
  await page.getByRole("table", { name: "Orders" }).getByRole("link", { name: number, exact: true }).click();
  await expect(page.getByRole("heading", { level: 1, name: `Order ${number}` })).toBeVisible();
}

/** From the print's page to the payment page, as somebody without an account. */
async function goToPayment(page: Page, mark: string, buyer: Buyer): Promise<void> {
  await page.goto(story.shop);
  await putInBasket(page, mark);
  await fillCounter(page, buyer);
  await orderPress(page).click();
  await onPaymentPage(page);
}

test("the photographer signs in and makes a roll", async ({ visit }) => {
  const page = await visit();
  const { email, password } = demoLogin("photographer");
  await goto(page, "/sign-in?next=/studio/rolls");
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill("not the password");
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page.getByRole("alert")).toContainText("The e-mail address or the password is not right.");
  await look(page);
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page).toHaveURL("/studio/rolls");
  await look(page);

  await goto(page, "/studio/rolls/new");
  await page.getByLabel("Camera").fill("6x7 folding camera, 90 mm");
  await page.getByLabel("Film").fill("ISO 125 traditional film");
  await page.getByLabel("Exposed on").fill("the other day");
  await page.getByRole("button", { name: "Make the roll" }).click();
  await expect(page.locator("[aria-invalid=true]").first()).toHaveValue("the other day");
  await expect(page.getByText("The roll was not made")).toBeVisible();
  await look(page);
  await page.getByLabel("Exposed on").fill("2026-11");
  await page.getByRole("button", { name: "Make the roll" }).click();
  await expect(page).toHaveURL(/\/studio\/rolls\/[\da-f-]{36}$/);
  await look(page);
  story.roll = new URL(page.url()).pathname;
});

test("scans go to storage, one is refused with its reason, and the proofs come up", async ({
  visit,
}, testInfo) => {
  test.setTimeout(240_000);
  const folder = testInfo.outputPath("scans");
  await mkdir(folder, { recursive: true });
  const files = [
    await greyScan(`${folder}/01 ferry steps.tif`, 5_250, 4_200, 3),
    await colourScan(`${folder}/02 evening sky.tif`, 5_100, 4_080),
    await hostileFile(`${folder}/03 too much.png`),
  ];
  const page = await visit({ as: "photographer" });
  await page.goto(story.roll);
  await page.locator("input[type=file]").setInputFiles(files);
  const file = (name: string) =>
    page.getByRole("table", { name: "Files of the roll" }).getByRole("row").filter({ hasText: name });
  await expect(file("03 too much.png")).toContainText("It has 3,600 megapixels (60,000 × 60,000)", {
    timeout: 90_000,
  });
  await expect(file("01 ferry steps.tif")).toContainText("5,250 × 4,200", { timeout: 90_000 });
  await expect(file("02 evening sky.tif")).toContainText("5,100 × 4,080", { timeout: 90_000 });
  const sheet = page.getByRole("list", { name: /^Contact sheet of roll/ });
  await expect(sheet.getByRole("listitem")).toHaveCount(3);
  await expect(sheet.locator("[data-state=ready] img")).toHaveCount(2, { timeout: 120_000 });
  await expect(sheet.locator("[data-state=refused]")).toHaveCount(1);
  await look(page);
});

test("a frame is marked, made into a print, described and published", async ({ visit }) => {
  const page = await visit({ as: "photographer" });
  await page.goto(story.roll);
  await page
    .getByRole("list", { name: /^Contact sheet of roll/ })
    .getByRole("link")
    .first()
    .click();
  await expect(page).toHaveURL(/\/frames\//);
  const frame = new URL(page.url()).pathname;
  await look(page);
  await page.getByLabel("Aperture").fill("f/22");
  await page.getByLabel("Time", { exact: true }).fill("6");
  await page.getByRole("button", { name: "Keep these notes" }).click();
  await expect(page.getByLabel("Aperture")).toHaveValue("f/22");
  await page.getByRole("button", { name: "Mark as chosen" }).click();
  await expect(page.getByRole("button", { name: "Take the pencil mark away" })).toBeVisible();

  await goto(page, "/studio/prints/new");
  await expect(page.getByRole("checkbox").first()).toBeVisible();
  await page.goto(frame);
  await page.getByRole("link", { name: "Make a print from this frame" }).click();
  await expect(page.getByLabel("Title")).toBeVisible();
  await look(page);
  await page.getByLabel("Title").fill(TITLE);
  await page.getByLabel("Year of exposure").fill("2026");
  await page.getByLabel("Statement").fill("The last ferry had gone. The water kept the light for an hour.");
  await page.getByRole("button", { name: "Make the print" }).click();
  await expect(page).toHaveURL(/\/studio\/prints\/[\da-f-]{36}$/);
  story.print = new URL(page.url()).pathname;

  await page.getByRole("button", { name: "Publish it in the shop" }).click();
  await expect(page.getByText("The print cannot be published yet")).toBeVisible();
  await look(page);
  await page
    .getByLabel("Description for those who cannot see it")
    .fill("Stone steps lead down into still water under a pale sky.");
  await page.getByRole("button", { name: "Keep this picture's crop and description" }).click();
  await expect(page.getByText(/missing\./)).toBeHidden();
  await page.getByRole("button", { name: "Publish it in the shop" }).click();
  const seeIt = page.getByRole("link", { name: "See it in the shop" });
  await expect(seeIt).toBeVisible();
  story.shop = (await seeIt.getAttribute("href")) ?? "";
  await look(page);
});

test("an edition of three is planned with its figures, and opened", async ({ visit }) => {
  const page = await visit({ as: "photographer" });
  await page.goto(story.print);
  await page.getByRole("link", { name: "Plan an edition" }).first().click();
  await expect(page.getByLabel("Limit", { exact: true })).toBeVisible();
  await look(page);
  await page.getByLabel("Limit", { exact: true }).fill("3");
  await page.getByLabel("Artist's proofs (AP)").fill("1");
  await page.getByLabel("Paper", { exact: true }).selectOption({ index: 1 });
  await page.getByLabel("Sheet", { exact: true }).selectOption({ label: "A3 lying, 420 × 297 mm" });
  await page.getByLabel("Smallest margin").fill("30");
  await page.getByRole("button", { name: "Fit the picture into the sheet" }).click();
  await expect(page.getByLabel("Image height")).toHaveValue("237");
  await expect(page.getByLabel("Image width")).toHaveValue("296");
  await page.getByLabel("To", { exact: true }).fill("2");
  await page.getByLabel("Price", { exact: true }).fill("280");
  await page.getByRole("button", { name: "Add a step" }).click();
  await page.getByLabel("From, step 2").fill("3");
  await page.getByLabel("To, step 2").fill("3");
  await page.getByLabel("Price, step 2").fill("340");
  // 4,200 px on 237 mm are fewer to the inch than 5,250 px on 296 mm: 4200 / (237 / 25.4) = 450.1.
  await expect(page.getByText("450.1 ppi")).toBeVisible();
  await expect(page.getByText("£900.00")).toBeVisible();
  await expect(page.getByText("4 of 30")).toBeVisible();
  await expect(page.getByText(/26 copies more stay within the 30/)).toBeVisible();
  await look(page);
  await page.getByRole("button", { name: "Keep as a draft" }).click();
  await expect(page).toHaveURL(/\/studio\/editions\/[\da-f-]{36}$/);
  story.edition = new URL(page.url()).pathname;
  await look(page);
  await page.getByRole("button", { name: "Open the edition of 3" }).click();
  await expect(leaf(page, 3)).toBeVisible();
  await expect(page.getByRole("heading", { name: "Ledger" })).toBeVisible();
  await look(page);
});

test("a guest buys the first number: declined, then paid", async ({ visit }) => {
  const page = await visit();
  await goto(page, "/");
  await page.getByRole("navigation", { name: "Shop" }).getByRole("link", { name: "Prints" }).click();
  await expect(page).toHaveURL("/prints");
  await look(page);
  await page.getByRole("link", { name: TITLE }).first().click();
  await expect(page).toHaveURL(story.shop);
  await expect(page.getByRole("heading", { level: 1, name: TITLE })).toBeVisible();
  await expect(page.locator(".pictures img").first()).toBeVisible();
  await expect(leaf(page, 1)).toContainText("next");
  await look(page);

  await putInBasket(page, "1/3");
  await look(page);
  await orderPress(page).click();
  await expect(page.locator("[aria-invalid=true]").first()).toBeVisible();
  await look(page);
  await fillCounter(page, first);
  await orderPress(page).click();
  await onPaymentPage(page);
  await look(page);
  await payWith(page, CARDS.declined);
  await expect(page.locator("[data-declined]")).toBeVisible();
  await look(page);
  await payWith(page, CARDS.good);

  await expect(page).toHaveURL(/\/orders\/[\w-]{22,}$/);
  await expect(page.getByRole("status").first()).toContainText("Paid; the sheets will be printed");
  await expect(page.locator(".order-copies")).toContainText("1/3");
  await expect(page.getByText("Thank you. These numbers are yours.")).toBeVisible();
  await expect(page.getByText(first.line1)).toBeVisible();
  await look(page);
  story.firstOrder = await orderNumber(page);

  const mail = await readMail(first.email, new RegExp(`^Your order ${story.firstOrder}: 1/3`));
  expect(mail.text).toContain(TITLE);
  expect(mail.html).toContain("1/3");
  const link = linkIn(mail, /^\/orders\//);

  const elsewhere = await visit();
  await goto(elsewhere, link);
  await expect(elsewhere.getByText("Paid; the sheets will be printed").first()).toBeVisible();
  await expect(elsewhere.getByText(first.line1)).toBeHidden();
  await elsewhere.getByLabel("Postcode of the delivery").fill("VE9 9ZZ");
  await elsewhere.getByRole("button", { name: "Show them" }).click();
  await expect(elsewhere.getByText("That is not the postcode of this delivery.").first()).toBeVisible();
  await elsewhere.getByLabel("Postcode of the delivery").fill(first.postcode.toLowerCase());
  await elsewhere.getByRole("button", { name: "Show them" }).click();
  await expect(elsewhere.getByText(first.line1)).toBeVisible();

  await goto(page, story.shop);
  await expect(leaf(page, 1)).toContainText("gone");
  await expect(leaf(page, 2)).toContainText("next");
  await readMail("studio@harcastle.example", new RegExp(`^Order ${story.firstOrder}: 1/3`));
});

test("the buyer corrects a mistyped address, and the old link dies", async ({ visit, expectTrouble }) => {
  const mail = await readMail(first.email, /^Your order/);
  const old = linkIn(mail, /^\/orders\//);
  const page = await visit();
  await page.goto(old);
  await expect(page.getByText("Is the e-mail address mistyped?")).toBeHidden();

  const second = newBuyer("Oriel Tamsin");
  const buying = await visit();
  await goToPayment(buying, "2/3", second);
  await payWith(buying, CARDS.asksTheBank);
  await buying.locator("button[value=approve]").click();
  await expect(buying.getByText("Thank you. These numbers are yours.")).toBeVisible();
  const before = new URL(buying.url()).pathname;
  const right = newBuyer("Oriel Tamsin").email;
  await buying.getByText("Is the e-mail address mistyped?").click();
  await buying.getByLabel("E-mail address").fill(right);
  await buying.getByRole("button", { name: "Correct the address" }).click();
  await expect(buying.getByText(`is on its way to ${right}`, { exact: false })).toBeVisible();
  await look(buying);
  const moved = await readMail(right, /^Your order/);
  expect(new URL(linkIn(moved, /^\/orders\//)).pathname).not.toBe(before);
  expectTrouble(/status of 404/);
  expect((await page.goto(before))?.status()).toBe(404);
  await look(page);
});

test("the assistant prints, signs and packs, and sends the order", async ({ visit }) => {
  const page = await visit({ as: "assistant" });
  await goto(page, "/studio");
  await goto(page, "/studio/orders");
  await findOrder(page, story.firstOrder);
  await expect(page.getByRole("table", { name: "Copies of this order" })).toContainText("1/3");
  await look(page);
  await page.getByLabel("Carrier", { exact: true }).fill("Ember Parcels");
  await page.getByRole("button", { name: "Mark as sent" }).click();
  await expect(page.getByText(/1\/3 has not been printed and signed yet/).first()).toBeVisible();

  await goto(page, "/studio/print-room");
  for (const [press, said] of [
    ["Printed", "Recorded as printed."],
    ["Signed", "Recorded as numbered and signed."],
    ["Packed", "Recorded as packed."],
  ] as const) {
    await page.getByRole("button", { name: `${press} 1/3 ${TITLE}` }).click();
    await expect(page.getByText(said)).toBeVisible();
  }
  await look(page);

  await findOrder(page, story.firstOrder);
  await page.getByLabel("Carrier", { exact: true }).fill("Ember Parcels");
  await page.getByLabel("Carrier's reference").fill("EP-77-01");
  await page.getByRole("button", { name: "Mark as sent" }).click();
  await expect(page.getByText("Recorded as sent. The buyer has been told.")).toBeVisible();
  await look(page);

  const mail = await readMail(first.email, new RegExp(`^Order ${story.firstOrder} is on its way`));
  expect(mail.text).toContain("Ember Parcels");
  expect(mail.text).toContain("EP-77-01");
  await page.goto(linkIn(mail, /^\/orders\//));
  await expect(page.getByText("Sent with Ember Parcels").first()).toBeVisible();
});

test("somebody comes back from the payment page, and gives the number up", async ({ visit }) => {
  const page = await visit();
  await goToPayment(page, "3/3", newBuyer("Wystan Pell"));
  await page.locator(".leave a").click();
  await expect(page.getByText("You came back without paying")).toBeVisible();
  await expect(page.getByRole("button", { name: /^Pay £/ })).toBeVisible();
  await look(page);
  const other = await visit();
  await goto(other, story.shop);
  await expect(leaf(other, 3)).toContainText("held");
  await expect(other.getByText("Nothing of this print can be bought now.")).toBeVisible();
  await page.getByRole("button", { name: "Give these numbers up" }).click();
  await expect(
    page.getByRole("heading", { level: 1, name: "You have given these numbers up" }),
  ).toBeVisible();
  await look(page);
  // The page that is open elsewhere learns of it by itself.
  await expect(leaf(other, 3)).toContainText("next", { timeout: 40_000 });
});

test("two buyers, one last number: one gets it, the other is told and keeps their answers", async ({
  visit,
  expectTrouble,
}) => {
  const [one, two] = [await visit(), await visit()];
  const late = newBuyer("Late Comer");
  for (const page of [one, two]) {
    await page.goto(story.shop);
    await putInBasket(page, "3/3");
  }
  await fillCounter(one, last);
  await fillCounter(two, late);
  await orderPress(one).click();
  await onPaymentPage(one);
  expectTrouble(/status of 409/);
  await orderPress(two).click();
  await expect(two.getByText(`${TITLE}: no number is free now.`)).toBeVisible();
  await expect(two.getByText("Nothing has been held or charged.", { exact: false })).toBeVisible();
  await look(two);
  await payWith(one, CARDS.good);
  await expect(one.getByText("Thank you. These numbers are yours.")).toBeVisible();
  story.lastOrder = await orderNumber(one);
  await goto(two, story.shop);
  await expect(leaf(two, 3)).toContainText("gone");
  expect(await mailsTo(late.email)).toEqual([]);
});

test("the photographer cancels an order with its money back, and the number is free again", async ({
  visit,
}) => {
  const page = await visit({ as: "photographer" });
  await findOrder(page, story.lastOrder);
  await page.getByLabel("Why").fill("The buyer changed their mind.");
  await page.getByRole("button", { name: /^Cancel and give back £/ }).click();
  await expect(page.getByText("Cancelled. The money goes back in full.")).toBeVisible();
  await look(page);
  const mail = await readMail(last.email, new RegExp(`^Money back for order ${story.lastOrder}`));
  expect(mail.text).toContain("The order was cancelled.");
  await goto(page, story.edition);
  await expect(leaf(page, 3)).toContainText("in hand");
  await expect(page.getByRole("table", { name: /^Ledger of/ })).toContainText("3/3");
});

test("a copy sold across the table is made by hand and paid in cash", async ({ visit }) => {
  const page = await visit({ as: "photographer" });
  await goto(page, "/studio/orders/new");
  await page
    .getByLabel("Edition and format")
    .first()
    .selectOption({ label: await optionNaming(page, TITLE) });
  await page.getByLabel("Name, for somebody new").fill("Peregrine Ashdown");
  await page.getByLabel("Number of the receipt, for cash").fill("R 114");
  await page.getByRole("button", { name: "Make the order" }).click();
  await expect(page.getByText("The order has been made.")).toBeVisible();
  await expect(page.getByRole("table", { name: "Payments and refunds" })).toContainText("paid in cash");
  await expect(page.getByRole("table", { name: "Copies of this order" })).toContainText("3/3");
  await look(page);
  await goto(page, story.shop);
  await expect(leaf(page, 3)).toContainText("gone");
});

/** The whole label of the first choice that names a print. */
async function optionNaming(page: Page, title: string): Promise<string> {
  const label = await page
    .getByLabel("Edition and format")
    .first()
    .locator("option")
    .filter({ hasText: title })
    .textContent();
  return label ?? "";
}
