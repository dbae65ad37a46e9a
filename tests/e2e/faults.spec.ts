import { mkdir } from "node:fs/promises";
import type { Page } from "@playwright/test";
import { fillCounter, leaf, newBuyer, orderPress } from "../support/buy";
import { expect, look, test } from "../support/e2e";
import { row, rows, shopUrl, storageUrl, stripeUrl } from "../support/instance";
import { demoLogin } from "../support/login";
import { CARDS, onPaymentPage, payQuietly, payWith, switchStripe } from "../support/pay-with";
import { mailsTo, readMail } from "../support/read-mail";
import { greyScan } from "../support/scan-files";
import { processesRunning } from "../support/web-process";

/* What must be survived: parts that fail, answers that come twice or late, and people who press twice. */

test.afterEach(async () => {
  await switchStripe({ reset: true });
});

/** A print of the demo with numbers enough for all of these tests: 25 copies. */
const PRINT = "/prints/beeches-pell-wood";

/** A print in the basket and the counter filled in. Answers the mark that was offered. */
async function atTheCounter(page: Page, address: string, name: string) {
  const buyer = newBuyer(name);
  await page.goto(address);
  const press = page.getByRole("button", { name: /^Put \d+\/\d+ in the basket$/ });
  const mark = /\d+\/\d+/.exec((await press.textContent()) ?? "")?.[0] ?? "";
  await press.click();
  await expect(page).toHaveURL("/basket");
  await fillCounter(page, buyer);
  return { buyer, mark, number: Number(mark.split("/")[0]) };
}

/** The id of the payment page that the browser is on. */
function sessionOf(page: Page): string {
  return new URL(page.url()).pathname.split("/")[2] ?? "";
}

async function ordersOf(email: string) {
  return await rows<{ id: string; state: string }>("select id, state from orders where email = $1", [email]);
}

test("webhooks that come three times and in the wrong order sell a number once", async ({ visit }) => {
  await switchStripe({ webhooks: { copies: 3, reverse: true } });
  const page = await visit();
  const { buyer, mark } = await atTheCounter(page, PRINT, "Thrice Told");
  await orderPress(page).click();
  await payWith(page, CARDS.good);
  await expect(page.getByText("Thank you. These numbers are yours.")).toBeVisible();
  await fetch(`${stripeUrl}/-/webhooks/flush`, { method: "POST" });
  await readMail(buyer.email, /^Your order/);
  const [order] = await ordersOf(buyer.email);
  expect(
    await row(
      `select (select count(*)::int from payments where order_id = $1) as payments,
         (select count(*)::int from refunds where order_id = $1) as refunds,
         (select count(*)::int from ledger_entries e join copies c on c.id = e.copy_id
           join order_lines l on l.id = c.order_line_id where l.order_id = $1 and e.kind = 'sold') as sales,
         (select count(*)::int from emails where kind = 'order-confirmation' and order_id = $1) as letters`,
      [order?.id],
    ),
  ).toEqual({ payments: 1, refunds: 0, sales: 1, letters: 1 });
  expect((await mailsTo(buyer.email)).filter((mail) => mail.subject.includes(mark))).toHaveLength(1);
});

test("a buyer who is back before the webhook sees the order paid", async ({ visit }) => {
  await switchStripe({ webhooks: { hold: true } });
  const page = await visit();
  const { buyer, mark } = await atTheCounter(page, PRINT, "Early Bird");
  await orderPress(page).click();
  await payWith(page, CARDS.good);
  await expect(page.getByText("Thank you. These numbers are yours.")).toBeVisible();
  await readMail(buyer.email, new RegExp(mark));
  await switchStripe({ webhooks: { hold: false } });
  await fetch(`${stripeUrl}/-/webhooks/flush`, { method: "POST" });
  expect((await ordersOf(buyer.email)).map((order) => order.state)).toEqual(["paid"]);
  expect((await mailsTo(buyer.email)).filter((mail) => mail.subject.includes(mark))).toHaveLength(1);
});

test("a payment of which neither webhook nor buyer tells is found @long", async ({ visit }) => {
  test.setTimeout(240_000);
  await switchStripe({ webhooks: { dropNext: 1_000 } });
  const page = await visit();
  const { buyer } = await atTheCounter(page, PRINT, "Silent Payer");
  await orderPress(page).click();
  await onPaymentPage(page);
  expect(await payQuietly(sessionOf(page), CARDS.good)).toBe("paid");
  await expect
    .poll(async () => (await ordersOf(buyer.email)).map((order) => order.state), { timeout: 180_000 })
    .toEqual(["paid"]);
  await readMail(buyer.email, /^Your order/);
});

test("with Stripe not answering, the numbers stay held and paying goes on later", async ({ visit }) => {
  await switchStripe({
    api: { match: "POST /v1/checkout/sessions", fail: { count: 1_000, status: 503, after: false } },
  });
  const page = await visit();
  const { mark, number } = await atTheCounter(page, PRINT, "Patient Soul");
  await orderPress(page).click();
  await expect(page.getByText("The payment service is not answering")).toBeVisible({ timeout: 40_000 });
  await expect(page.locator("main")).toContainText(mark);
  await look(page);
  const other = await visit();
  await other.goto(PRINT);
  await expect(leaf(other, number)).toContainText("held");
  await switchStripe({ reset: true });
  await page.getByRole("button", { name: /^Try again: pay £/ }).click();
  await payWith(page, CARDS.good);
  await expect(page.getByText("Thank you. These numbers are yours.")).toBeVisible();
  await expect(page.locator(".order-copies")).toContainText(mark);
});

test("a checkout form that is sent twice at once is one order", async ({ visit }) => {
  const page = await visit();
  const { buyer } = await atTheCounter(page, PRINT, "Double Press");
  const form = await page.locator("form#checkout").evaluate((element: HTMLFormElement) => {
    const fields: Record<string, string> = { intent: "order" };
    for (const [name, value] of new FormData(element)) fields[name] = String(value);
    return fields;
  });
  const send = () =>
    page.request.post(`${shopUrl}/checkout`, { form, maxRedirects: 0, headers: { Origin: shopUrl } });
  const answers = await Promise.all([send(), send()]);
  for (const answer of answers) expect(answer.status()).toBe(303);
  const leads = answers.map((answer) => answer.headers().location);
  expect(leads[0]).toMatch(/\/pay\//);
  expect(leads[1]).toBe(leads[0]);
  const orders = await ordersOf(buyer.email);
  expect(orders).toHaveLength(1);
  expect(
    await row("select count(*)::int as lines from order_lines where order_id = $1", [orders[0]?.id]),
  ).toEqual({ lines: 1 });
});

test("a print withdrawn from the shop is left out of a basket, and the rest is sold", async ({ visit }) => {
  const page = await visit();
  await page.goto("/prints/winter-plough");
  await page.getByRole("button", { name: /in the basket$/ }).click();
  await expect(page).toHaveURL("/basket");
  const { buyer } = await atTheCounter(page, PRINT, "Half Served");
  const photographer = await visit({ as: "photographer" });
  const print = await row<{ id: string }>("select id from prints where slug = 'winter-plough'");
  await photographer.goto(`/studio/prints/${print.id}`);
  await photographer.getByRole("button", { name: "Withdraw it from the shop" }).click();
  await expect(photographer.getByRole("button", { name: "Publish it again" })).toBeVisible();
  try {
    await page.reload();
    await expect(page.getByText("It was taken out of the shop.", { exact: false })).toBeVisible();
    await look(page);
    await fillCounter(page, buyer);
    await orderPress(page).click();
    await payWith(page, CARDS.good);
    await expect(page.getByText("Thank you. These numbers are yours.")).toBeVisible();
    await expect(page.locator(".order-copies > li")).toHaveCount(1);
  } finally {
    await photographer.getByRole("button", { name: "Publish it again" }).click();
    await expect(photographer.getByRole("button", { name: "Withdraw it from the shop" })).toBeVisible();
  }
});

test("a form filled in while the session ended is sent after signing in again", async ({
  visit,
  expectTrouble,
}) => {
  const page = await visit({ as: "photographer" });
  await page.goto("/studio/rolls/new");
  const number = String(7_000 + (Date.now() % 2_000));
  await page.getByLabel("Number").fill(number);
  await page.getByLabel("Notes").fill("Fog until ten.\nThen wind from the east.");
  await page.context().clearCookies();
  expectTrouble(/status of 401 /);
  await page.getByRole("button", { name: "Make the roll" }).click();
  await expect(page.getByRole("heading", { name: "You were signed out meanwhile" })).toBeVisible();
  await look(page);
  const { email, password } = demoLogin("photographer");
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await expect(page.getByRole("heading", { name: "You are signed in again" })).toBeVisible();
  await look(page);
  await page.getByRole("button", { name: "Send it now" }).click();
  await expect(page).toHaveURL(/\/studio\/rolls\/[\da-f-]{36}$/);
  await expect(page.getByRole("heading", { level: 1, name: `Roll ${number}` })).toBeVisible();
  expect(await row("select notes from rolls where number = $1", [number])).toEqual({
    notes: "Fog until ten.\nThen wind from the east.",
  });
});

test("storage that does not answer is named by /readyz, and the shop stays open", async ({
  visit,
  request,
}) => {
  const [storage] = processesRunning("storage-fake/main.ts");
  if (storage === undefined) throw new Error("the instance has no storage of its own");
  const page = await visit();
  process.kill(storage.pid, "SIGSTOP");
  try {
    const answer = await request.get("/readyz");
    expect(answer.status()).toBe(503);
    expect(await answer.text()).toContain("storage");
    expect((await request.get("/healthz")).status()).toBe(200);
    expect((await page.goto(PRINT, { waitUntil: "domcontentloaded" }))?.status()).toBe(200);
    await expect(page.getByRole("button", { name: /in the basket$/ })).toBeVisible();
  } finally {
    process.kill(storage.pid, "SIGCONT");
  }
  await expect.poll(async () => (await request.get("/readyz")).status()).toBe(200);
});

test("a scan that does not get through is sent again, and a worker killed in the middle of its proof loses nothing", async ({
  visit,
  expectTrouble,
}, testInfo) => {
  test.setTimeout(240_000);
  const folder = testInfo.outputPath("scans");
  await mkdir(folder, { recursive: true });
  const scan = await greyScan(`${folder}/under the quay ${Date.now()}.tif`, 5_000, 4_000, 11);
  const page = await visit({ as: "photographer" });
  await page.goto("/studio/rolls/new");
  await page.getByRole("button", { name: "Make the roll" }).click();
  await expect(page).toHaveURL(/\/studio\/rolls\/[\da-f-]{36}$/);
  const rollId = new URL(page.url()).pathname.split("/")[3] ?? "";

  // The line to storage is cut; everything else goes on.
  expectTrouble(/net::ERR_/);
  await page.route(`${storageUrl}/**`, (route) => route.abort("connectionreset"));
  await page.locator("input[type=file]").setInputFiles(scan);
  await expect(page.getByRole("alert")).toContainText("did not arrive", { timeout: 60_000 });
  await look(page);
  await page.unroute(`${storageUrl}/**`);
  await page.getByRole("button", { name: "Send it again" }).click();

  const standing = async () => {
    const [found] = await rows<{ proof_state: string }>(
      "select s.proof_state from scans s join frames f on f.id = s.frame_id where f.roll_id = $1",
      [rollId],
    );
    return found?.proof_state;
  };
  await expect.poll(standing, { timeout: 90_000, intervals: [50] }).toBe("working");
  const [worker] = processesRunning("scripts/worker.ts");
  if (worker === undefined) throw new Error("the instance has no worker");
  process.kill(worker.pid, "SIGKILL");
  expect(await standing()).toBe("working");
  await expect.poll(standing, { timeout: 120_000 }).toBe("ready");
  await expect(page.locator("[data-state=ready] img")).toHaveCount(1, { timeout: 30_000 });
  expect(processesRunning("scripts/worker.ts").map(({ pid }) => pid)).not.toContain(worker.pid);
});
