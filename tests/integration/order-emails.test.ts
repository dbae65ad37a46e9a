import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { db, pool } from "db/client.server";
import { emails, orders, paymentSessions } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, beforeEach, describe, expect, test } from "vitest";
import { dispatchOrder } from "~/domain/orders/dispatch-order.server";
import { freeOrder } from "~/domain/orders/end-hold.server";
import { decideOffer, openOffers } from "~/domain/orders/offers.server";
import { orderByHand } from "~/domain/orders/order-by-hand.server";
import { openPaymentPage } from "~/domain/orders/payment-session.server";
import { placeOrder } from "~/domain/orders/place-order.server";
import { settleRefund } from "~/domain/orders/refunds.server";
import { settleSession } from "~/domain/orders/settle.server";
import { workSheet } from "~/domain/printroom/work-sheets.server";
import { makeEmail } from "~/emails/render.server";
import { LANGUAGES, type Language } from "~/languages/language";
import { env } from "~/platform/env.server";
import { linkToken, newId } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { createStripeFake, type StripeFake } from "../../scripts/stripe-fake/server";
import { testDatabase } from "../support/database";
import { guestOrder, makeEdition, makeStudio, PHOTOGRAPHER } from "../support/shop";

/** Every e-mail of an order, made from the rows that the commands themselves have written. */
let fake: StripeFake;
let folder: string;
let paperId: string;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "numberleaf-order-emails-"));
  fake = createStripeFake({
    port: Number(new URL(env.STRIPE_API_URL).port),
    dataDir: folder,
    secretKey: env.STRIPE_SECRET_KEY,
    webhookSecret: env.STRIPE_WEBHOOK_SECRET,
  });
  await fake.listen();
});
afterAll(async () => {
  await stopQueue();
  await fake.close();
  await pool.end();
  await rm(folder, { recursive: true, force: true });
});
beforeEach(async () => {
  await (await testDatabase()).reset();
  ({ paperId } = await makeStudio());
});

async function pay(orderId: string): Promise<string> {
  const page = await openPaymentPage(orderId);
  if (page.kind !== "open") throw new Error(JSON.stringify(page));
  const [row] = await db.select().from(paymentSessions).where(eq(paymentSessions.orderId, orderId));
  if (row?.stripeSessionId == null) throw new Error("no session");
  const answer = await fetch(new URL(`/-/sessions/${row.stripeSessionId}/pay`, env.STRIPE_API_URL), {
    method: "POST",
  });
  expect(answer.status).toBe(200);
  return row.stripeSessionId;
}

async function placed(formatId: string, language: Language) {
  const outcome = await placeOrder(
    guestOrder([{ formatId, seenAmount: 28_000 }], { language, note: "Please ring twice" }),
  );
  if (outcome.kind !== "placed") throw new Error(JSON.stringify(outcome));
  return outcome;
}

async function owed(kind: string) {
  const rows = await db.select().from(emails).where(eq(emails.kind, kind));
  const [row] = rows;
  if (row === undefined) throw new Error(`no ${kind} is owed`);
  return row;
}

async function made(kind: string) {
  const row = await owed(kind);
  const email = await makeEmail(row);
  if (email === null) throw new Error(`${kind} is not needed`);
  const [order] = await db
    .select()
    .from(orders)
    .where(eq(orders.id, row.orderId ?? ""));
  if (order === undefined) throw new Error(`${kind} belongs to no order`);
  return { ...email, row, order, token: linkToken("order", order.tokenSeed) };
}

/** How often a text stands in another. */
const times = (text: string, part: string) => text.split(part).length - 1;

function holdsNoSecret(email: Awaited<ReturnType<typeof made>>): void {
  const kept = JSON.stringify(email.row.payload);
  expect(kept).not.toContain(email.token);
  expect(kept).not.toContain(email.order.tokenSeed);
  expect(kept).not.toContain("@");
}

function linksOnceTo(email: Awaited<ReturnType<typeof made>>, path: string): void {
  expect(times(email.html, `href="${env.BASE_URL}${path}"`)).toBe(1);
  expect(times(email.text, `${env.BASE_URL}${path}`)).toBe(1);
  expect(times(email.html, email.token)).toBe(1);
  holdsNoSecret(email);
}

/** Everything a reader sees must be filled in. */
function hasNoGap({ subject, text, html }: { subject: string; text: string; html: string }): void {
  for (const said of [subject, text, html.replace(/<style[\s\S]*?<\/style>/g, "")]) {
    expect(said).not.toMatch(/\{\w+\}|undefined|NaN|\[object/);
  }
}

describe.each(LANGUAGES)("in %s", (language) => {
  const at = (path: string) => (language === "en" ? path : `/${language}${path}`);

  test("confirmation, news to the studio, and dispatch", async () => {
    const { formatId } = await makeEdition({ paperId, limit: 5, steps: [[1, 5, 28_000]] });
    const { orderId } = await placed(formatId, language);
    await settleSession(await pay(orderId));

    const confirmation = await made("order-confirmation");
    hasNoGap(confirmation);
    expect(confirmation.subject).toContain("1/5 Pell Wood");
    // 280.00 and 12.00 delivery; 20 % inside each (HMRC VATREC12020), line by line: 46.67 + 2.00.
    for (const figure of language === "en"
      ? ["£292.00", "£48.67", "VAT 20%"]
      : ["292,00", "48,67", "MwSt. 20"]) {
      expect(confirmation.text).toContain(figure);
      expect(confirmation.html).toContain(figure);
    }
    expect(confirmation.text).toContain("1/5");
    expect(confirmation.text).not.toContain("4 Mill Row");
    linksOnceTo(confirmation, at(`/orders/${confirmation.token}`));

    const news = await made("new-order");
    hasNoGap(news);
    expect(news.row.recipient).toBe("studio@harcastle.example");
    expect(news.subject).toContain("1/5");
    expect(times(news.html, `href="${env.BASE_URL}/studio/orders/${orderId}"`)).toBe(1);
    expect(news.text).toContain("500 × 420 mm");
    for (const personal of ["Ines", "Mill Row", "EM2 3CD", "buyers.example", "ring twice"]) {
      expect(news.text).not.toContain(personal);
    }
    expect(news.html).not.toContain(news.token);
    holdsNoSecret(news);

    await signAll(orderId);
    const sent = await dispatchOrder(orderId, PHOTOGRAPHER, {
      carrier: "Ember Parcels",
      reference: "EP 4471",
      sentAt: new Date(),
    });
    expect(sent.kind).toBe("sent");
    const parcel = await made("dispatch");
    hasNoGap(parcel);
    for (const said of ["Ember Parcels", "EP 4471", "1/5"]) expect(parcel.text).toContain(said);
    linksOnceTo(parcel, at(`/orders/${parcel.token}`));
  });

  test("an offer of another number, and the refund", async () => {
    const { formatId } = await makeEdition({ paperId, limit: 2, steps: [[1, 2, 28_000]] });
    const late = await placed(formatId, language);
    const session = await pay(late.orderId);
    const rows = await db
      .select({ id: paymentSessions.id })
      .from(paymentSessions)
      .where(eq(paymentSessions.orderId, late.orderId));
    await freeOrder(late.orderId, { as: "cancelled", checked: rows.map((r) => r.id) });
    const other = await placed(formatId, language);
    await settleSession(await pay(other.orderId));
    await settleSession(session);

    const offer = await made("number-offer");
    hasNoGap(offer);
    expect(offer.text).toContain("1/2");
    expect(offer.text).toContain("2/2");
    linksOnceTo(offer, at(`/orders/${offer.token}`));

    const [open] = await openOffers(late.orderId);
    if (open === undefined) throw new Error("no offer");
    await decideOffer(open.offerId, late.orderId, "declined");
    // Answered meanwhile: no letter about it any more.
    expect(await makeEmail(offer.row)).toBeNull();

    const back = await db.query.refunds.findFirst({
      where: (r, { and: both, eq: is, isNotNull }) =>
        both(is(r.orderId, late.orderId), isNotNull(r.orderLineId)),
    });
    if (back === undefined) throw new Error("no refund is owed");
    await settleRefund(back.id, "re_test");
    const refund = await made("refund");
    hasNoGap(refund);
    expect(refund.subject).toContain(language === "en" ? "£280.00" : "280,00");
    linksOnceTo(refund, at(`/orders/${refund.token}`));
  });

  test("the pay link of an order made by hand", async () => {
    const { formatId } = await makeEdition({ paperId, limit: 3, steps: [[1, 3, 28_000]] });
    const outcome = await orderByHand(
      {
        submissionKey: newId(),
        lines: [{ formatId, number: 3, reductionAmount: 0, reductionReason: "" }],
        buyer: { name: "Tobias Wrenfield", email: "tobias@buyers.example", telephone: null },
        delivery: { method: "collection" },
        country: "GB",
        language,
        studioNote: "",
        payment: { method: "pay_link", until: new Date(Date.now() + 3_600_000) },
      },
      PHOTOGRAPHER,
    );
    expect(outcome.kind).toBe("placed");
    const letter = await made("pay-link");
    hasNoGap(letter);
    expect(letter.text).toContain("3/3");
    expect(letter.text).toMatch(/GMT|BST|MEZ|MESZ|UTC/);
    linksOnceTo(letter, at(`/orders/${letter.token}/pay`));
  });
});

async function signAll(orderId: string): Promise<void> {
  const rows = await db.query.orderLines.findMany({ where: (l, { eq: is }) => is(l.orderId, orderId) });
  for (const line of rows) {
    const sheets = await db.query.sheets.findMany({ where: (s, { eq: is }) => is(s.copyId, line.copyId) });
    for (const sheet of sheets) {
      expect(await workSheet(sheet.id, PHOTOGRAPHER, { kind: "printed" })).toEqual({ kind: "done" });
      expect(await workSheet(sheet.id, PHOTOGRAPHER, { kind: "signed" })).toEqual({ kind: "done" });
    }
  }
}
