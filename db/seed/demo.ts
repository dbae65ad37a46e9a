import { createHash } from "node:crypto";
import { and, asc, eq, sql } from "drizzle-orm";
import { type Actor, lockEdition, moveCopy, moveSheet } from "~/domain/editions/ledger.server";
import { openEdition } from "~/domain/editions/open-edition.server";
import { cancelOrder } from "~/domain/orders/cancel-order.server";
import { dispatchOrder } from "~/domain/orders/dispatch-order.server";
import { freeOrder } from "~/domain/orders/end-hold.server";
import { orderByHand, recordTransfer } from "~/domain/orders/order-by-hand.server";
import { placeOrder } from "~/domain/orders/place-order.server";
import { recordPayment } from "~/domain/orders/settle.server";
import { ARGON2ID, hashPassword } from "~/domain/people/passwords.server";
import { workSheet } from "~/domain/printroom/work-sheets.server";
import { forgetStudio } from "~/domain/studio/studio.server";
import { holdClock } from "~/platform/clock";
import { env } from "~/platform/env.server";
import { stripe } from "~/platform/stripe.server";
import { db, inTransaction } from "../client.server";
import {
  accountRoles,
  accounts,
  copies,
  editions,
  emails,
  formats,
  frames,
  orders,
  papers,
  parties,
  priceSteps,
  printPictures,
  prints,
  rolls,
  scans,
  series,
  sheets,
  studio,
  taxRates,
  vatRegistrations,
} from "../schema/schema";
import { DEMO_LOGINS } from "./demo-logins.mjs";
import * as plan from "./demo-plan";
import { insertReference } from "./reference";
import * as catalogue from "./scans/catalogue";
import { frameSize, scanFileName } from "./scans/render-all";

/*
 * The demo's rows. Every step can be repeated: ids follow from names, orders from their submission keys, so that a
 * seed that was stopped in the middle is simply run again. History is made by the product's own commands with the
 * clock held at its day.
 */

const PHOTOGRAPHER = { as: "photographer" as const, roles: ["photographer" as const] };
const HELPER = { as: "assistant" as const, roles: ["photographer" as const] };

/** A UUID that follows from a name. */
function idOf(name: string): string {
  const hex = createHash("sha256").update(`numberleaf demo ${name}`).digest("hex");
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-7${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}

const day = (on: string, time = "10:00") => new Date(`${on}T${time}:00Z`);
const emailOf = (name: string) =>
  `${name
    .toLowerCase()
    .normalize("NFD")
    .replace(/[^a-z ]/g, "")
    .replace(/ +/g, ".")}@post.example`;

/** Object key of a demo frame's scan. */
export function demoScanKey(ref: catalogue.FrameRef): string {
  return `scans/demo/${scanFileName(ref)}`;
}

/** The release that is to come: Friday of the week after next, six in the evening of the studio's winter time. */
function comingRelease(from: Date): Date {
  const release = new Date(from.getTime() + 10 * 86_400_000);
  release.setUTCDate(release.getUTCDate() + ((5 - release.getUTCDay() + 7) % 7));
  release.setUTCHours(18, 0, 0, 0);
  return release;
}

/** Makes every row of the demo. `say` is told how far it has come. */
export async function seedRows(say: (line: string) => void): Promise<void> {
  const started = new Date();
  await makeStudio();
  await makeAccounts();
  await makePictures();
  const formatIds = await makeEditions(started);
  say("studio, accounts, rolls, prints and editions");
  await makeOrders(formatIds, started);
  holdClock(undefined);
  // Letters of years ago are not sent again.
  await db.update(emails).set({ state: "sent", sentAt: sql`created_at` }).where(eq(emails.state, "waiting"));
  say("orders and the ledger");
}

async function makeStudio(): Promise<void> {
  await inTransaction(async (tx) => {
    const made = await tx.db
      .insert(studio)
      .values({
        name: "Sunniva Harcastle Photographs",
        photographer: "Sunniva Harcastle",
        signature: "S. Harcastle",
        email: "studio@harcastle.example",
        telephone: "01632 960114",
        address: {
          name: "Sunniva Harcastle Photographs",
          line1: "14 Tannery Rise",
          city: "Amberley",
          region: "Vale of Ember",
          postcode: "VE1 7QX",
          country: "GB",
        },
        country: "GB",
        zone: "Europe/London",
        zoneName: "Ember time",
        currency: "GBP",
        statement:
          "Beech woods, chalk downs and canal towns of the Vale of Ember, photographed slowly on film and printed by hand in small numbers.",
        createdAt: day("2024-01-08"),
      })
      .onConflictDoNothing()
      .returning({ name: studio.name });
    if (made.length === 0) return;
    await insertReference(tx, { country: "GB", currency: "GBP", from: "2024-01-01" });
    await tx.db
      .insert(vatRegistrations)
      .values({ id: idOf("vat"), country: "GB", number: "GB 000 0000 00", validFrom: "2024-01-01" });
  });
  forgetStudio();
  const [rate] = await db.select({ id: taxRates.id }).from(taxRates).limit(1);
  if (rate === undefined) throw new Error("the reference tables are empty");
}

async function makeAccounts(): Promise<void> {
  for (const login of DEMO_LOGINS) {
    const accountId = idOf(`account ${login.email}`);
    const [known] = await db.select({ id: accounts.id }).from(accounts).where(eq(accounts.id, accountId));
    if (known !== undefined) continue;
    const passwordHash = await hashPassword(login.password);
    await inTransaction(async (tx) => {
      const partyId = idOf(`party ${login.name}`);
      await tx.db
        .insert(parties)
        .values({ id: partyId, name: login.name, email: login.email, createdAt: day("2024-01-08") })
        .onConflictDoNothing();
      await tx.db.insert(accounts).values({
        id: accountId,
        partyId,
        email: login.email,
        passwordHash,
        emailVerifiedAt: day("2024-01-08"),
        createdAt: day("2024-01-08"),
      });
      await tx.db.insert(accountRoles).values({ accountId, role: login.role });
    });
  }
  if (ARGON2ID.memoryCost < 65_536) throw new Error("demo passwords would be hashed too weakly");
  for (const buyer of plan.buyers) {
    await db
      .insert(parties)
      .values({
        id: idOf(`party ${buyer.name}`),
        name: buyer.name,
        email: emailOf(buyer.name),
        address: buyer,
      })
      .onConflictDoNothing();
  }
  for (const { to } of plan.byHand) {
    if (to !== undefined)
      await db
        .insert(parties)
        .values({ id: idOf(`party ${to}`), kind: "firm", name: to })
        .onConflictDoNothing();
  }
}

const frameId = (ref: catalogue.FrameRef) => idOf(`frame ${catalogue.frameKey(ref)}`);
const scanId = (ref: catalogue.FrameRef) => idOf(`scan ${catalogue.frameKey(ref)}`);

async function makePictures(): Promise<void> {
  for (const roll of catalogue.rolls) {
    const rollId = idOf(`roll ${roll.number}`);
    await db
      .insert(rolls)
      .values({
        id: rollId,
        number: roll.number,
        filmFormat: roll.format,
        camera: roll.camera,
        film: roll.film,
        exposedOn: roll.exposedOn.date,
        exposedPrecision: roll.exposedOn.precision,
        notes: roll.notes,
        createdAt: day(roll.exposedOn.date),
      })
      .onConflictDoNothing();
    for (const frame of roll.frames) {
      const ref = { roll: roll.number, position: frame.position };
      const { aperture, timeSeconds, filter, light } = frame.exposure;
      await db
        .insert(frames)
        .values({
          id: frameId(ref),
          rollId,
          position: frame.position,
          label: String(frame.position),
          note: frame.note,
          chosen: frame.title !== undefined,
          exposure: {
            aperture,
            timeSeconds,
            light,
            place: frame.place,
            ...(filter === undefined ? {} : { filter }),
          },
          createdAt: day(roll.exposedOn.date),
        })
        .onConflictDoNothing();
      const size = frameSize(roll, frame);
      await db
        .insert(scans)
        .values({
          id: scanId(ref),
          frameId: frameId(ref),
          version: 1,
          fileName: scanFileName(ref),
          objectKey: demoScanKey(ref),
          declaredBytes: size.width * size.height * 2,
          createdAt: day(roll.exposedOn.date),
        })
        .onConflictDoNothing();
    }
  }
  for (const [position, one] of catalogue.series.entries()) {
    await db
      .insert(series)
      .values({ id: idOf(`series ${one.slug}`), position, ...one })
      .onConflictDoNothing();
  }
  const all = [
    ...catalogue.prints.map((print) => ({ print, state: "published" as const })),
    ...catalogue.portfolios.map((print) => ({ print, state: "published" as const })),
    ...catalogue.laterPrints.map((print) => ({ print, state: "draft" as const })),
  ];
  for (const [position, { print, state }] of all.entries()) {
    const printId = idOf(`print ${print.slug}`);
    await db
      .insert(prints)
      .values({
        id: printId,
        slug: print.slug,
        title: print.title,
        year: print.year,
        statement: print.statement,
        seriesId: idOf(`series ${print.series}`),
        state,
        position,
        publishedAt: state === "published" ? day("2024-02-01") : null,
        createdAt: day("2024-01-20"),
      })
      .onConflictDoNothing();
    for (const [index, ref] of print.frames.entries()) {
      const { x, y, width, height } = print.crop;
      const parts = (n: number) => Math.round(n * 1_000_000);
      await db
        .insert(printPictures)
        .values({
          id: idOf(`picture ${print.slug} ${index}`),
          printId,
          position: index + 1,
          frameId: frameId(ref),
          scanId: scanId(ref),
          crop: { x: parts(x), y: parts(y), width: parts(width), height: parts(height) },
          description: altOf(print, ref),
        })
        .onConflictDoNothing();
    }
  }
}

/** A portfolio's pictures are described by their own prints. */
function altOf(print: catalogue.CataloguePrint, ref: catalogue.FrameRef): string {
  if (print.frames.length === 1) return print.alt;
  const own = catalogue.prints.find(
    (p) => p.frames.length === 1 && catalogue.frameKey(p.frames[0]) === catalogue.frameKey(ref),
  );
  return own?.alt ?? print.alt;
}

/** Width over height of a print's first picture, crop applied. */
function ratioOf(slug: string): number {
  const print = [...catalogue.prints, ...catalogue.portfolios].find((p) => p.slug === slug);
  if (print === undefined) throw new Error(`the plan names no print ${slug}`);
  const [ref] = print.frames;
  const roll = catalogue.rolls.find((r) => r.number === ref.roll);
  const frame = roll?.frames.find((f) => f.position === ref.position);
  if (roll === undefined || frame === undefined) throw new Error(`print ${slug} has no frame`);
  const size = frameSize(roll, frame);
  return (size.width * print.crop.width) / (size.height * print.crop.height);
}

const editionId = (index: number) => idOf(`edition ${index}`);

/** Opens every edition on its day. Returns the ids of its formats. */
async function makeEditions(started: Date): Promise<string[][]> {
  const paperRows = await db.select({ id: papers.id }).from(papers).orderBy(asc(papers.position));
  const ids: string[][] = [];
  for (const [index, edition] of plan.editions.entries()) {
    const coming = edition.opened === "coming";
    const openedAt = coming ? new Date(started.getTime() - 86_400_000) : day(edition.opened, "09:00");
    holdClock(openedAt);
    const id = editionId(index);
    await db
      .insert(editions)
      .values({
        id,
        printId: idOf(`print ${edition.print}`),
        limit: edition.limit,
        artistsProofs: edition.ap,
        printersProofs: edition.pp ?? 0,
        bonATirer: edition.bat ?? 0,
        exhibitionCopies: edition.exhibition ?? 0,
        furtherEditions: edition.further,
        position: index,
        createdAt: openedAt,
      })
      .onConflictDoNothing();
    const ratio = ratioOf(edition.print);
    const own: string[] = [];
    for (const [position, format] of edition.formats.entries()) {
      const formatId = idOf(`format ${index} ${position}`);
      own.push(formatId);
      const width = ratio >= 1 ? format.long : Math.round(format.long * ratio);
      const height = ratio >= 1 ? Math.round(format.long / ratio) : format.long;
      await db
        .insert(formats)
        .values({
          id: formatId,
          editionId: id,
          position,
          paperId: paperRows[format.paper]?.id ?? "",
          process: format.process,
          imageWidthMm: width,
          imageHeightMm: height,
          sheetWidthMm: width + 2 * format.margin,
          sheetHeightMm: height + 2 * format.margin,
        })
        .onConflictDoNothing();
      for (const [fromNumber, toNumber, amount] of format.steps) {
        await db
          .insert(priceSteps)
          .values({
            id: idOf(`price ${index} ${position} ${fromNumber}`),
            formatId,
            fromNumber,
            toNumber,
            amount,
            currency: "GBP",
            validFrom: openedAt,
          })
          .onConflictDoNothing();
      }
    }
    ids.push(own);
    const outcome = await openEdition(id, PHOTOGRAPHER, {
      releaseAt: coming ? comingRelease(started) : openedAt,
      acceptPastCap: true,
      happenedAt: openedAt,
    });
    if (outcome.kind !== "opened" && outcome.kind !== "already")
      throw new Error(`edition ${index}: ${JSON.stringify(outcome)}`);
  }
  for (const act of plan.byHand) await placeByHand(act);
  holdClock(undefined);
  return ids;
}

async function placeByHand(act: (typeof plan.byHand)[number]): Promise<void> {
  holdClock(day(act.on));
  await inTransaction(async (tx) => {
    const edition = await lockEdition(tx, editionId(act.edition));
    const [copy] = await tx.db
      .select()
      .from(copies)
      .where(and(eq(copies.editionId, edition.id), eq(copies.run, act.run), eq(copies.number, act.number)));
    if (copy === undefined || copy.placement !== "in_hand") return;
    await moveCopy(tx, edition, PHOTOGRAPHER, {
      kind: act.kind,
      copyId: copy.id,
      ...(act.kind === "given" && act.to !== undefined ? { ownerPartyId: idOf(`party ${act.to}`) } : {}),
      secret: {
        reason: act.reason,
        ...(act.to === undefined ? {} : { partyId: idOf(`party ${act.to}`), partyName: act.to }),
      },
    });
  });
}

/** A payment that the payment service knows, so that a demo order can be refunded like any other. */
async function paidAtStripe(amount: number, title: string): Promise<string> {
  const session = await stripe.checkout.sessions.create({
    mode: "payment",
    success_url: `${env.BASE_URL}/`,
    metadata: { demo: "1" },
    line_items: [
      { quantity: 1, price_data: { currency: "gbp", unit_amount: amount, product_data: { name: title } } },
    ],
  });
  const answer = await fetch(new URL(`/-/sessions/${session.id}/pay`, env.STRIPE_API_URL), {
    method: "POST",
  });
  if (!answer.ok) throw new Error(`the demo's payment was not taken: ${answer.status}`);
  const { payment_intent: intent } = await stripe.checkout.sessions.retrieve(session.id);
  return typeof intent === "string" ? intent : (intent?.id ?? session.id);
}

async function makeOrders(formatIds: string[][], started: Date): Promise<void> {
  for (const [index, planned] of plan.orders.entries()) {
    // The plan is written for the end of 2026: the newest orders stay in the past whenever the demo is made.
    const at = new Date(
      Math.min(
        day(planned.on, "14:20").getTime(),
        started.getTime() - (plan.orders.length - index) * 3_600_000,
      ),
    );
    holdClock(at);
    await makeOrder(index, planned, formatIds, at, started);
  }
}

async function makeOrder(
  index: number,
  planned: plan.PlannedOrder,
  formatIds: string[][],
  at: Date,
  started: Date,
): Promise<void> {
  const buyer = plan.buyers[planned.buyer];
  if (buyer === undefined) throw new Error(`order ${index} has no buyer`);
  const submissionKey = `demo-order-${index}`;
  const lines = planned.lines.map(([edition, format = 0]) => formatIds[edition]?.[format] ?? "");
  const inPerson = planned.by === "cash";
  const orderId =
    planned.by === "card" && planned.stage !== "pay_link"
      ? await shopOrder({ submissionKey, lines, buyer })
      : await handOrder({ submissionKey, lines, buyer, planned, at, started });
  const [order] = await db.select().from(orders).where(eq(orders.id, orderId));
  if (order === undefined) throw new Error(`order ${index} was not made`);
  if (planned.stage === "expired") {
    if (order.state === "awaiting_payment") await freeOrder(orderId, { as: "expired", checked: [] });
    return;
  }
  if (planned.stage === "transfer" || planned.stage === "pay_link") return;
  if (order.state === "awaiting_payment") {
    if (planned.by === "card") {
      const reference = await paidAtStripe(order.totalAmount, `Order ${order.number}`);
      await inTransaction(async (tx) => {
        const [locked] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
        if (locked === undefined || locked.state !== "awaiting_payment") return;
        await recordPayment(tx, locked, {
          method: "card",
          amount: locked.totalAmount,
          currency: locked.currency,
          reference,
          receivedAt: at,
        });
      });
    } else {
      const paidAt = new Date(at.getTime() + 2 * 86_400_000);
      holdClock(paidAt);
      await recordTransfer(orderId, PHOTOGRAPHER, {
        method: "transfer",
        reference: `Bank ${order.number}`,
        receivedAt: paidAt,
      });
    }
  }
  if (planned.stage === "cancelled") {
    holdClock(new Date(at.getTime() + 86_400_000));
    await cancelOrder(orderId, PHOTOGRAPHER, "the buyer moved house and asked for the money back");
    return;
  }
  await makeSheets(orderId, planned, at, inPerson);
}

type Buyer = (typeof plan.buyers)[number];

async function shopOrder(input: { submissionKey: string; lines: string[]; buyer: Buyer }): Promise<string> {
  const { buyer } = input;
  const login = DEMO_LOGINS.find((l) => l.name === buyer.name);
  const outcome = await placeOrder({
    submissionKey: input.submissionKey,
    lines: input.lines.map((formatId) => ({ formatId, seenAmount: Number.MAX_SAFE_INTEGER })),
    buyer: { name: buyer.name, email: login?.email ?? emailOf(buyer.name) },
    delivery: { method: "delivery", address: buyer },
    country: buyer.country,
    language: buyer.country === "DE" ? "de" : "en",
    accountId: login === undefined ? null : idOf(`account ${login.email}`),
    note: "",
  });
  if (outcome.kind !== "placed") throw new Error(`${input.submissionKey}: ${JSON.stringify(outcome)}`);
  return outcome.orderId;
}

async function handOrder(input: {
  submissionKey: string;
  lines: string[];
  buyer: Buyer;
  planned: plan.PlannedOrder;
  at: Date;
  started: Date;
}): Promise<string> {
  const { buyer, planned, at, started } = input;
  const waits = planned.stage === "transfer" || planned.stage === "pay_link";
  const until = new Date((waits ? started : at).getTime() + 14 * 86_400_000);
  const outcome = await orderByHand(
    {
      submissionKey: input.submissionKey,
      lines: input.lines.map((formatId, i) => ({
        formatId,
        number: null,
        reductionAmount: i === 0 ? (planned.reduction?.pence ?? 0) : 0,
        reductionReason: planned.reduction?.reason ?? "",
      })),
      buyer: { partyId: idOf(`party ${buyer.name}`) },
      delivery: planned.by === "cash" ? { method: "handed_over" } : { method: "delivery", address: buyer },
      country: buyer.country,
      language: "en",
      studioNote: planned.by === "cash" ? "Bought at the spring fair." : "",
      payment:
        planned.by === "cash"
          ? { method: "cash", receipt: `Receipt ${input.submissionKey.slice(-2)}` }
          : { method: planned.stage === "pay_link" ? "pay_link" : "transfer", until },
    },
    PHOTOGRAPHER,
  );
  if (outcome.kind !== "placed") throw new Error(`${input.submissionKey}: ${JSON.stringify(outcome)}`);
  return outcome.orderId;
}

/** Takes an order's sheets as far as its stage says, a day for each step. */
async function makeSheets(
  orderId: string,
  planned: plan.PlannedOrder,
  at: Date,
  inPerson: boolean,
): Promise<void> {
  const later = (days: number) =>
    holdClock(new Date(Math.min(at.getTime() + days * 86_400_000, Date.now() - 60_000)));
  const present = async () =>
    db
      .select({ id: sheets.id, making: sheets.making, serial: sheets.serial, copyId: sheets.copyId })
      .from(sheets)
      .innerJoin(copies, eq(copies.id, sheets.copyId))
      .where(
        sql`${copies.orderLineId} in (select id from order_lines where order_id = ${orderId}) and ${sheets.making} not in ('spoiled', 'destroyed')`,
      )
      .orderBy(asc(sheets.id));
  if (planned.stage === "paid") return;
  later(2);
  const [first] = await present();
  if (
    planned.spoiled !== undefined &&
    first !== undefined &&
    first.serial === 1 &&
    first.making === "to_print"
  ) {
    await workSheet(first.id, HELPER, { kind: "printed" });
    await workSheet(first.id, PHOTOGRAPHER, {
      kind: "spoiled",
      reason: planned.spoiled,
      fate: "torn in two",
    });
  }
  later(3);
  for (const sheet of await present())
    if (sheet.making === "to_print") await workSheet(sheet.id, HELPER, { kind: "printed" });
  if (planned.stage === "printing") return;
  later(5);
  for (const sheet of await present())
    if (sheet.making === "printed") await workSheet(sheet.id, PHOTOGRAPHER, { kind: "signed" });
  if (planned.stage === "signed") return;
  later(6);
  for (const sheet of await present())
    if (sheet.making === "signed") await workSheet(sheet.id, HELPER, { kind: "packed" });
  later(7);
  const sentAt = new Date(Math.min(at.getTime() + 7 * 86_400_000, Date.now() - 60_000));
  await dispatchOrder(orderId, HELPER, {
    carrier: inPerson ? "Handed over at the studio" : "Ember Parcels",
    reference: inPerson
      ? ""
      : `EP${createHash("sha256").update(orderId).digest("hex").slice(0, 8).toUpperCase()}`,
    sentAt,
  });
  if (planned.stage !== "arrived" || inPerson) return;
  later(11);
  await arrive(orderId, PHOTOGRAPHER);
}

async function arrive(orderId: string, actor: Actor): Promise<void> {
  await inTransaction(async (tx) => {
    const rows = await tx.db
      .select({ id: sheets.id, editionId: copies.editionId })
      .from(sheets)
      .innerJoin(copies, eq(copies.id, sheets.copyId))
      .where(
        sql`${copies.orderLineId} in (select id from order_lines where order_id = ${orderId}) and ${sheets.making} = 'dispatched'`,
      );
    for (const row of rows) {
      const edition = await lockEdition(tx, row.editionId);
      await moveSheet(tx, edition, actor, { kind: "delivered", sheetId: row.id });
    }
    await tx.db.execute(
      sql`update dispatches set delivered_at = ${new Date(Date.now())} where order_id = ${orderId} and delivered_at is null`,
    );
  });
}
