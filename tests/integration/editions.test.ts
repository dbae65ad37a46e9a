import { db, pool, sqlState } from "db/client.server";
import {
  accounts,
  copies,
  editions,
  formats,
  frames,
  ledgerEntries,
  parties,
  priceSteps,
  printPictures,
  rolls,
  scans,
  sheets,
} from "db/schema/schema";
import { and, asc, eq, isNull } from "drizzle-orm";
import { afterAll, afterEach, beforeEach, describe, expect, test } from "vitest";
import { changePrices } from "~/domain/editions/change-prices.server";
import { changeRelease } from "~/domain/editions/change-release.server";
import { closeEarly } from "~/domain/editions/close-early.server";
import { correctEntry } from "~/domain/editions/correct-entry.server";
import { deleteDraft, readDraft, saveDraft } from "~/domain/editions/draft-edition.server";
import type { DraftEdition } from "~/domain/editions/edition-form";
import { editionPage, ledgerPage, studioEditions } from "~/domain/editions/edition-page.server";
import { lowerLimit } from "~/domain/editions/lower-limit.server";
import { openEdition } from "~/domain/editions/open-edition.server";
import { placeCopy } from "~/domain/editions/place-copy.server";
import { planning } from "~/domain/editions/plan-edition.server";
import type { StudioActor } from "~/domain/editions/studio-actor";
import { placeOrder } from "~/domain/orders/place-order.server";
import { editPaper, makePaper, retirePaper, studioPapers } from "~/domain/papers/papers.server";
import {
  addToPrint,
  deletePrint,
  editPicture,
  editWords,
  movePicture,
  removePicture,
} from "~/domain/prints/edit-print.server";
import { makePrint } from "~/domain/prints/make-print.server";
import { movePrint, moveSeries, writeSeries } from "~/domain/prints/order-prints.server";
import { publishPrint, withdrawPrint } from "~/domain/prints/publish-print.server";
import { printsAsked, studioPrint, studioPrints, studioSeries } from "~/domain/prints/studio-prints.server";
import { holdClock } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { guestOrder, makeEdition, makeStudio } from "../support/shop";

/* Prints and editions of the studio against real PostgreSQL. The rules asserted are PRODUCT.md's 1 to 4, 7, 10 and 11. */

let paperId: string;
let photographer: StudioActor;
let assistant: StudioActor;

beforeEach(async () => {
  await (await testDatabase()).reset();
  ({ paperId } = await makeStudio());
  photographer = await account("photographer", "Sunniva Harcastle");
  assistant = await account("assistant", "Ingrid Maddox");
});
afterEach(() => holdClock(undefined));
afterAll(async () => {
  await stopQueue();
  await pool.end();
});

async function account(as: "photographer" | "assistant", name: string): Promise<StudioActor> {
  const [partyId, accountId] = [newId(), newId()];
  await db.insert(parties).values({ id: partyId, name });
  await db.insert(accounts).values({ id: accountId, partyId, email: `${as}@harcastle.example` });
  return { as, accountId, roles: [as] };
}

let rollNumber = 0;

/** A frame with so many checked versions of its scan, newest last. */
async function frame(versions = 1): Promise<{ frameId: string; scanIds: string[] }> {
  const [rollId, frameId] = [newId(), newId()];
  rollNumber += 1;
  await db.insert(rolls).values({
    id: rollId,
    number: 200_000 + rollNumber,
    filmFormat: "6x7",
    exposedOn: "2025-11-04",
    exposedPrecision: "day",
  });
  await db.insert(frames).values({ id: frameId, rollId, position: 1, label: "7", chosen: true });
  const scanIds: string[] = [];
  for (let version = 1; version <= versions; version += 1) {
    const id = newId();
    await db.insert(scans).values({
      id,
      frameId,
      version,
      state: "ready",
      fileName: "7.tif",
      objectKey: `scans/${id}`,
      declaredBytes: 1,
      bytes: 1,
      sha256: "0".repeat(64),
      width: 6_000,
      height: 4_800,
    });
    scanIds.push(id);
  }
  return { frameId, scanIds };
}

async function print(frameIds: string[], title = "Pell Wood, first snow"): Promise<string> {
  const made = await makePrint(photographer, {
    id: newId(),
    frames: frameIds,
    title,
    year: 2025,
    seriesId: "",
    newSeries: "",
    slug: "",
    statement: "",
    shownBeforeRelease: false,
    description: "Beeches in fog",
  });
  if (made.kind !== "made") throw new Error(JSON.stringify(made));
  return made.printId;
}

const plan = (changes: Partial<DraftEdition> = {}): DraftEdition => ({
  limit: 5,
  artistsProofs: 1,
  printersProofs: 0,
  horsCommerce: 0,
  bonATirer: 0,
  exhibitionCopies: 0,
  releaseAt: null,
  furtherEditions: "None in this size.",
  returnedNumber: "in_hand",
  returnedPrice: "own",
  formats: [
    {
      paperId,
      process: "pigment print",
      imageWidthMm: 400,
      imageHeightMm: 320,
      sheetWidthMm: 500,
      sheetHeightMm: 420,
      steps: [
        { fromNumber: 1, toNumber: 3, amount: 28_000 },
        { fromNumber: 4, toNumber: 5, amount: 34_000 },
      ],
    },
  ],
  ...changes,
});

async function draftOf(printId: string, changes: Partial<DraftEdition> = {}): Promise<string> {
  const id = newId();
  expect(await saveDraft(photographer, { id, printId, draft: plan(changes) })).toEqual({
    kind: "saved",
    editionId: id,
  });
  return id;
}

async function openOf(printId: string, changes: Partial<DraftEdition> = {}, releaseAt: Date | null = null) {
  const id = await draftOf(printId, changes);
  expect(await openEdition(id, photographer, { releaseAt, acceptPastCap: false })).toEqual({
    kind: "opened",
  });
  return id;
}

const copiesIn = (editionId: string) =>
  db
    .select()
    .from(copies)
    .where(eq(copies.editionId, editionId))
    .orderBy(asc(copies.run), asc(copies.number));
async function numbered(editionId: string) {
  return (await copiesIn(editionId)).filter((copy) => copy.run === "numbered");
}
async function copy(editionId: string, number: number) {
  const found = (await numbered(editionId)).find((one) => one.number === number);
  if (found === undefined) throw new Error(`no number ${number}`);
  return found;
}
async function kinds(editionId: string) {
  const rows = await db
    .select({ kind: ledgerEntries.kind })
    .from(ledgerEntries)
    .where(eq(ledgerEntries.editionId, editionId))
    .orderBy(ledgerEntries.line);
  return rows.map((row) => row.kind);
}
async function ladder(formatId: string) {
  const rows = await db
    .select()
    .from(priceSteps)
    .where(and(eq(priceSteps.formatId, formatId), isNull(priceSteps.supersededAt)))
    .orderBy(asc(priceSteps.fromNumber));
  return rows.map((row) => [row.fromNumber, row.toNumber, row.amount]);
}
async function formatOf(editionId: string) {
  const [row] = await db.select().from(formats).where(eq(formats.editionId, editionId));
  if (row === undefined) throw new Error("no format");
  return row.id;
}
async function jobs(queue: string): Promise<Record<string, unknown>[]> {
  const { rows } = await pool.query("select data from pgboss.job where name = $1 order by created_on", [
    queue,
  ]);
  return rows.map((row) => row.data);
}
const place = (editionId: string, copyId: string, act: Parameters<typeof placeCopy>[2]["act"], more = {}) =>
  placeCopy(photographer, editionId, {
    copyId,
    act,
    reason: "",
    happened: { precision: "instant", at: new Date() },
    until: "",
    to: { name: "", email: "" },
    formatId: null,
    ...more,
  });

describe("a print", () => {
  test("is made of a frame once, on its newest scan, with an address of its own and proofs asked for", async () => {
    const one = await frame(2);
    const id = newId();
    const fields = {
      id,
      frames: [one.frameId],
      title: "Pell Wood",
      year: 2025,
      seriesId: "new",
      newSeries: "Woods",
      slug: "",
      statement: "",
      shownBeforeRelease: false,
      description: "",
    };
    expect(await makePrint(assistant, fields)).toEqual({ kind: "made", printId: id });
    expect(await makePrint(assistant, fields)).toEqual({ kind: "made", printId: id });
    const made = await studioPrint(id);
    expect(made).toMatchObject({ slug: "pell-wood", state: "draft" });
    expect(made?.pictures).toHaveLength(1);
    expect(made?.pictures[0]?.scan).toMatchObject({ id: one.scanIds[1], version: 2 });
    expect((await studioSeries()).map((series) => [series.title, series.prints.length])).toEqual([
      ["Woods", 1],
    ]);
    expect(await jobs("build-print-proofs")).toEqual([{ printPictureId: made?.pictures[0]?.id }]);
    // The same title again takes another address; the same address is refused.
    expect(await studioPrint(await print([one.frameId], "Pell Wood"))).toMatchObject({ slug: "pell-wood-2" });
    expect(await makePrint(assistant, { ...fields, id: newId(), slug: "pell-wood" })).toEqual({
      kind: "slug_taken",
    });
    expect(await studioPrints(printsAsked(new URLSearchParams("q=wood&sort=title&down=1")))).toHaveLength(2);
  });

  test("needs a checked scan", async () => {
    const { frameId, scanIds } = await frame();
    await db
      .update(scans)
      .set({ state: "checking" })
      .where(eq(scans.id, scanIds[0] ?? ""));
    const outcome = await makePrint(photographer, {
      id: newId(),
      frames: [frameId],
      title: "Too soon",
      year: null,
      seriesId: "",
      newSeries: "",
      slug: "",
      statement: "",
      shownBeforeRelease: false,
      description: "",
    });
    expect(outcome).toEqual({ kind: "not_scanned", labels: ["7"] });
  });

  test("is published when nothing is missing, withdrawn and published again, its proofs following each time", async () => {
    const { frameId } = await frame();
    const printId = await print([frameId]);
    const [picture] = (await studioPrint(printId))?.pictures ?? [];
    const pictureId = picture?.id ?? "";
    await editPicture(assistant, printId, { pictureId, description: "" });
    expect(await publishPrint(assistant, printId)).toEqual({
      kind: "missing",
      sentences: ["Describe the picture for those who cannot see it."],
    });
    await editPicture(assistant, printId, { pictureId, description: "Beeches in fog" });
    expect(await publishPrint(assistant, printId)).toEqual({ kind: "done" });
    expect(await editPicture(assistant, printId, { pictureId, description: "" })).toMatchObject({
      kind: "refused",
    });
    await withdrawPrint(assistant, printId);
    expect((await studioPrint(printId))?.state).toBe("withdrawn");
    expect(await publishPrint(assistant, printId)).toEqual({ kind: "done" });
    expect(await jobs("publish-proofs")).toHaveLength(3);
    // The address is kept once it has been in the shop.
    const words = {
      title: "Pell Wood, snow",
      year: 2025,
      seriesId: "",
      newSeries: "",
      statement: "",
      shownBeforeRelease: true,
    };
    expect(await editWords(assistant, printId, { ...words, slug: "another" })).toMatchObject({
      kind: "refused",
    });
    expect(await editWords(assistant, printId, { ...words, slug: "" })).toEqual({ kind: "done" });
    expect(await studioPrint(printId)).toMatchObject({
      title: "Pell Wood, snow",
      slug: "pell-wood-first-snow",
    });
    expect(await jobs("publish-proofs")).toHaveLength(4);
  });

  test("changes crop and scan version until an edition is opened, then keeps them and says why", async () => {
    const { frameId, scanIds } = await frame(2);
    const printId = await print([frameId]);
    const pictureId = (await studioPrint(printId))?.pictures[0]?.id ?? "";
    const crop = { x: 100_000, y: 0, width: 800_000, height: 1_000_000 };
    expect(
      await editPicture(photographer, printId, {
        pictureId,
        crop,
        scanId: scanIds[0],
        description: "Beeches",
      }),
    ).toEqual({ kind: "done" });
    expect(await jobs("build-print-proofs")).toHaveLength(2);
    expect((await planning(printId, {}, null))?.print.pictures[0]).toMatchObject({
      widthPx: 4_800,
      heightPx: 4_800,
    });
    await openOf(printId);
    const whole = { x: 0, y: 0, width: 1_000_000, height: 1_000_000 };
    const refused = await editPicture(photographer, printId, {
      pictureId,
      crop: whole,
      description: "Beeches",
    });
    expect(refused).toMatchObject({ kind: "refused", sentence: expect.stringMatching(/edition .* opened/) });
    expect(await addToPrint(photographer, printId, [(await frame()).frameId])).toMatchObject({
      kind: "refused",
    });
    expect(await editPicture(photographer, printId, { pictureId, crop, description: "Other words" })).toEqual(
      {
        kind: "done",
      },
    );
    expect((await studioPrint(printId))?.pictures[0]).toMatchObject({ crop, description: "Other words" });
  });

  test("of several frames is a portfolio whose pictures move and leave, the last one staying", async () => {
    const [one, two, three] = [await frame(), await frame(), await frame()];
    const printId = await print([one.frameId, two.frameId]);
    expect(await addToPrint(assistant, printId, [three.frameId, one.frameId])).toEqual({ kind: "done" });
    const order = async () => (await studioPrint(printId))?.pictures.map((picture) => picture.frameId);
    expect(await order()).toEqual([one.frameId, two.frameId, three.frameId]);
    const idOf = async (at: number) => (await studioPrint(printId))?.pictures[at]?.id ?? "";
    await movePicture(assistant, printId, await idOf(2), "earlier");
    expect(await order()).toEqual([one.frameId, three.frameId, two.frameId]);
    await removePicture(assistant, printId, await idOf(0));
    await removePicture(assistant, printId, await idOf(0));
    expect(await order()).toEqual([two.frameId]);
    expect(await removePicture(assistant, printId, await idOf(0))).toMatchObject({ kind: "refused" });
  });

  test("is deleted only as a draft without editions; prints and series keep the order they are given", async () => {
    const { frameId } = await frame();
    const [first, second] = [await print([frameId], "First"), await print([frameId], "Second")];
    await movePrint(assistant, second, "earlier");
    const titles = async () =>
      (await studioPrints(printsAsked(new URLSearchParams()))).map((line) => line.title);
    expect(await titles()).toEqual(["Second", "First"]);
    const edition = await draftOf(first);
    expect(await deletePrint(assistant, first)).toMatchObject({ kind: "refused" });
    expect(await deleteDraft(photographer, edition)).toBe(true);
    expect(await deletePrint(assistant, first)).toEqual({ kind: "done" });
    expect(await titles()).toEqual(["Second"]);
    const [woods, locks] = [newId(), newId()];
    const series = { slug: "", statement: "" };
    await writeSeries(assistant, "make", woods, { ...series, title: "Woods" });
    await writeSeries(assistant, "make", locks, { ...series, title: "Locks" });
    await moveSeries(assistant, locks, "earlier");
    expect(await writeSeries(assistant, "edit", locks, { ...series, slug: "woods", title: "Locks" })).toEqual(
      {
        kind: "slug_taken",
      },
    );
    expect((await studioSeries()).map((one) => one.title)).toEqual(["Locks", "Woods"]);
  });
});

describe("opening an edition", () => {
  test("makes every copy and the first line of the book; the draft before it can be changed and deleted", async () => {
    const printId = await print([(await frame()).frameId]);
    const id = await draftOf(printId, { limit: 9 });
    expect(await saveDraft(photographer, { id, printId, draft: plan() })).toMatchObject({ kind: "saved" });
    expect((await readDraft(db, id))?.draft).toEqual(plan());
    expect(await copiesIn(id)).toHaveLength(0);
    expect(await openEdition(id, photographer, { releaseAt: null, acceptPastCap: false })).toEqual({
      kind: "opened",
    });
    expect((await copiesIn(id)).map((one) => [one.run, one.number, one.placement])).toEqual([
      ...[1, 2, 3, 4, 5].map((number) => ["numbered", number, "in_hand"]),
      ["ap", 1, "in_hand"],
    ]);
    const [entry] = await db.select().from(ledgerEntries).where(eq(ledgerEntries.editionId, id));
    expect(entry).toMatchObject({ line: 1, kind: "opened", actor: "photographer" });
    expect(JSON.parse(entry?.body ?? "")).toMatchObject({ limit: 5, furtherEditions: "None in this size." });
    // A second opening, a change of the plan and its deletion come too late.
    expect(await openEdition(id, photographer, { releaseAt: null, acceptPastCap: false })).toEqual({
      kind: "already",
    });
    expect(await saveDraft(photographer, { id, printId, draft: plan({ limit: 99 }) })).toMatchObject({
      kind: "opened_already",
    });
    expect(await deleteDraft(photographer, id)).toBe(false);
    expect((await editionPage(id))?.limit).toBe(5);
  });

  test("needs a price for every number, and says which has none", async () => {
    const printId = await print([(await frame()).frameId]);
    const id = await draftOf(printId, { limit: 6 });
    expect(await openEdition(id, photographer, { releaseAt: null, acceptPastCap: false })).toEqual({
      kind: "problems",
      sentences: ["Number 6 has no price."],
    });
    expect(await copiesIn(id)).toHaveLength(0);
  });

  test("past the cap of 30 copies of one picture is done only when that is accepted", async () => {
    const { frameId } = await frame();
    const [printId, otherCrop] = [await print([frameId]), await print([frameId], "A second crop")];
    const big = {
      limit: 28,
      artistsProofs: 2,
      formats: plan().formats.map((one) => ({
        ...one,
        steps: [{ fromNumber: 1, toNumber: 28, amount: 10_000 }],
      })),
    };
    await openOf(printId, big);
    // 30 of 30: another crop of the frame is the same picture.
    const one = {
      limit: 1,
      artistsProofs: 0,
      formats: plan().formats.map((f) => ({ ...f, steps: [{ fromNumber: 1, toNumber: 1, amount: 10_000 }] })),
    };
    const id = await draftOf(otherCrop, one);
    const plannedCap = (await planning(otherCrop, { limit: "1" }, id))?.figures.cap;
    expect(plannedCap).toMatchObject({ total: 31, state: "past_cap" });
    expect(await openEdition(id, photographer, { releaseAt: null, acceptPastCap: false })).toEqual({
      kind: "past_the_cap",
      total: 31,
      cap: 30,
    });
    expect(await copiesIn(id)).toHaveLength(0);
    expect(await openEdition(id, photographer, { releaseAt: null, acceptPastCap: true })).toEqual({
      kind: "opened",
    });
  });

  test("takes no retired paper for a new plan, and keeps one the draft has", async () => {
    const printId = await print([(await frame()).frameId]);
    const id = await draftOf(printId);
    await retirePaper(photographer, paperId, true);
    expect(await saveDraft(photographer, { id: newId(), printId, draft: plan() })).toEqual({
      kind: "no_such_paper",
      format: 0,
    });
    expect(await saveDraft(photographer, { id, printId, draft: plan({ limit: 4 }) })).toMatchObject({
      kind: "saved",
    });
    expect(await db.select().from(editions)).toHaveLength(1);
  });
});

describe("the limit", () => {
  test("falls while no number is issued: copies past it go, ladders are cut, the book says so", async () => {
    const id = await openOf(await print([(await frame()).frameId]));
    expect(await lowerLimit(photographer, id, 3)).toEqual({ kind: "done" });
    expect((await numbered(id)).map((one) => one.number)).toEqual([1, 2, 3]);
    expect(await ladder(await formatOf(id))).toEqual([[1, 3, 28_000]]);
    expect(await lowerLimit(photographer, id, 2)).toEqual({ kind: "done" });
    expect(await ladder(await formatOf(id))).toEqual([[1, 2, 28_000]]);
    expect(await kinds(id)).toEqual(["opened", "limit_lowered", "limit_lowered"]);
    expect(await lowerLimit(photographer, id, 2)).toMatchObject({ kind: "refused" });
    expect(await lowerLimit(photographer, id, 0)).toMatchObject({ kind: "refused" });
  });

  test("does not fall below a number the book names, nor while a copy is held, nor once one is issued", async () => {
    const printId = await print([(await frame()).frameId]);
    await publishPrint(photographer, printId);
    const id = await openOf(printId);
    const four = await copy(id, 4);
    await place(id, four.id, "set_aside", { reason: "for the fair" });
    await place(id, four.id, "released_from_set_aside");
    expect(await lowerLimit(photographer, id, 3)).toMatchObject({
      kind: "refused",
      sentence: expect.stringMatching(/cannot fall below 4/),
    });
    const order = await placeOrder(guestOrder([{ formatId: await formatOf(id), seenAmount: 28_000 }]));
    expect(order.kind).toBe("placed");
    expect(await lowerLimit(photographer, id, 4)).toMatchObject({
      kind: "refused",
      sentence: expect.stringMatching(/held for a checkout/),
    });
    await place(id, (await copy(id, 2)).id, "given", { to: { name: "Ember Infirmary", email: "" } });
    expect(await lowerLimit(photographer, id, 4)).toMatchObject({
      kind: "refused",
      sentence: expect.stringMatching(/never changes again/),
    });
    expect(await numbered(id)).toHaveLength(5);
  });
});

describe("prices", () => {
  test("of numbers not issued change from now on, dated, old and new in the book; issued ones stay", async () => {
    const id = await openOf(await print([(await frame()).frameId]));
    const formatId = await formatOf(id);
    await place(id, (await copy(id, 1)).id, "given", { to: { name: "Ember Infirmary", email: "" } });
    const dearer = [
      { fromNumber: 1, toNumber: 1, amount: 28_000 },
      { fromNumber: 2, toNumber: 5, amount: 40_000 },
    ];
    expect(
      await changePrices(photographer, id, formatId, [{ fromNumber: 1, toNumber: 5, amount: 40_000 }]),
    ).toMatchObject({
      kind: "refused",
      sentences: [expect.stringMatching(/^Number 1 was issued at its price/)],
    });
    expect(await changePrices(photographer, id, formatId, dearer.slice(1))).toMatchObject({
      kind: "refused",
      sentences: ["Number 1 has no price."],
    });
    const at = new Date("2027-01-01T09:00:00Z");
    holdClock(at);
    expect(await changePrices(photographer, id, formatId, dearer)).toEqual({ kind: "done" });
    expect(await changePrices(photographer, id, formatId, dearer)).toEqual({ kind: "same" });
    expect(await ladder(formatId)).toEqual([
      [1, 1, 28_000],
      [2, 5, 40_000],
    ]);
    const all = await db.select().from(priceSteps).where(eq(priceSteps.formatId, formatId));
    expect(all.filter((step) => step.supersededAt?.getTime() === at.getTime())).toHaveLength(2);
    const [entry] = await db
      .select()
      .from(ledgerEntries)
      .where(and(eq(ledgerEntries.editionId, id), eq(ledgerEntries.kind, "prices_changed")));
    expect(JSON.parse(entry?.body ?? "")).toEqual({
      format: 1,
      currency: "GBP",
      was: [
        { fromNumber: 1, toNumber: 3, amount: 28_000 },
        { fromNumber: 4, toNumber: 5, amount: 34_000 },
      ],
      now: dearer,
    });
  });
});

describe("the release", () => {
  test("moves until it has come, correcting the line that opened the edition", async () => {
    const start = new Date("2027-01-01T09:00:00Z");
    holdClock(start);
    const id = await openOf(await print([(await frame()).frameId]), {}, new Date("2027-01-10T18:00:00Z"));
    const later = new Date("2027-01-12T18:00:00Z");
    expect(await changeRelease(photographer, id, new Date("2026-12-31T00:00:00Z"))).toMatchObject({
      kind: "refused",
    });
    expect(await changeRelease(photographer, id, later)).toEqual({ kind: "done" });
    const entries = await db
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.editionId, id))
      .orderBy(ledgerEntries.line);
    expect(entries[1]).toMatchObject({ kind: "corrected", corrects: entries[0]?.id });
    expect(JSON.parse(entries[1]?.body ?? "")).toEqual({
      release: later.toISOString(),
      wasRelease: "2027-01-10T18:00:00.000Z",
    });
    holdClock(later);
    expect(await changeRelease(photographer, id, null)).toMatchObject({
      kind: "refused",
      sentence: expect.stringMatching(/has been released/),
    });
  });
});

describe("closing early", () => {
  test("retires what was never issued, keeps the denominator and what came back, and refuses while a copy is held", async () => {
    const printId = await print([(await frame()).frameId]);
    await publishPrint(photographer, printId);
    const id = await openOf(printId);
    await place(id, (await copy(id, 2)).id, "given", { to: { name: "Ember Infirmary", email: "" } });
    await place(id, (await copy(id, 3)).id, "set_aside", { reason: "for a friend" });
    await place(id, (await copy(id, 4)).id, "kept");
    const order = await placeOrder(guestOrder([{ formatId: await formatOf(id), seenAmount: 28_000 }]));
    expect(order.kind).toBe("placed");
    expect(await closeEarly(photographer, id, "the negative was lost")).toMatchObject({
      kind: "refused",
      sentence: expect.stringMatching(/held for a checkout/),
    });
    expect((await editionPage(id))?.state).toBe("open");
  });

  test("writes one line for the edition and one for each number retired", async () => {
    const id = await openOf(await print([(await frame()).frameId]));
    await place(id, (await copy(id, 2)).id, "given", { to: { name: "Ember Infirmary", email: "" } });
    await place(id, (await copy(id, 3)).id, "set_aside", { reason: "for a friend" });
    expect(await closeEarly(photographer, id, "")).toMatchObject({ kind: "refused" });
    expect(await closeEarly(photographer, id, "the negative was lost")).toEqual({ kind: "done" });
    expect((await numbered(id)).map((one) => one.placement)).toEqual([
      "retired",
      "given",
      "retired",
      "retired",
      "retired",
    ]);
    expect((await copiesIn(id)).find((one) => one.run === "ap")?.placement).toBe("in_hand");
    const page = await editionPage(id);
    expect(page).toMatchObject({ state: "closed", limit: 5 });
    expect((await kinds(id)).filter((kind) => kind === "closed_early")).toHaveLength(5);
    const { lines } = await ledgerPage(photographer, id, 1);
    expect(lines.find((line) => line.kind === "closed_early" && line.mark === null)).toMatchObject({
      body: { limit: 5, retired: [1, 3, 4, 5] },
      secret: { reason: "the negative was lost" },
    });
    expect(await closeEarly(photographer, id, "again")).toMatchObject({ kind: "refused" });
    expect(await changePrices(photographer, id, await formatOf(id), [])).toMatchObject({ kind: "refused" });
  });
});

describe("acts by hand", () => {
  test("set aside and back, keep and keep no longer, retire for good, each with its line and when it happened", async () => {
    const id = await openOf(await print([(await frame()).frameId]));
    const one = await copy(id, 1);
    expect(await place(id, one.id, "set_aside")).toMatchObject({ kind: "refused" });
    expect(await place(id, one.id, "set_aside", { reason: "for the fair", until: "2027-03-01" })).toEqual({
      kind: "done",
    });
    expect(await place(id, one.id, "set_aside", { reason: "for the fair" })).toEqual({
      kind: "refused",
      sentence: 'A copy that is set aside cannot be "set aside".',
    });
    await place(id, one.id, "released_from_set_aside");
    const year = { precision: "year" as const, at: new Date("2021-01-01T12:00:00Z") };
    await place(id, one.id, "kept", { happened: year });
    await place(id, one.id, "no_longer_kept", { happened: { precision: "unknown" } });
    await place(id, one.id, "retired", { reason: "a crease" });
    expect((await copy(id, 1)).placement).toBe("retired");
    expect(await place(id, one.id, "no_longer_kept")).toMatchObject({ kind: "refused" });
    const { lines, total } = await ledgerPage(photographer, id, 1);
    expect(total).toBe(6);
    expect(lines.map((line) => [line.kind, line.happenedPrecision, line.mark])).toEqual([
      ["retired", "instant", "1/5"],
      ["no_longer_kept", "unknown", "1/5"],
      ["kept", "year", "1/5"],
      ["released_from_set_aside", "instant", "1/5"],
      ["set_aside", "instant", "1/5"],
      ["opened", "instant", null],
    ]);
    expect(lines[4]).toMatchObject({
      body: { until: "2027-03-01" },
      secret: { reason: "for the fair", who: "Sunniva Harcastle" },
    });
  });

  test("a given copy has an owner, a check code, a format and a sheet to be printed, and issues its number", async () => {
    const id = await openOf(await print([(await frame()).frameId]));
    const one = await copy(id, 1);
    expect(await place(id, one.id, "given")).toMatchObject({ kind: "refused" });
    const to = { name: "Ines Varga-Holt", email: "Ines@buyers.example" };
    expect(await place(id, one.id, "given", { to })).toEqual({ kind: "done" });
    const given = await copy(id, 1);
    expect(given).toMatchObject({ placement: "given", formatId: await formatOf(id) });
    expect(given.checkCode).toMatch(/^[0-9A-Z]{4}-[0-9A-Z]{4}-[0-9A-Z]{4}$/);
    expect(await db.select().from(sheets).where(eq(sheets.copyId, one.id))).toHaveLength(1);
    expect((await editionPage(id))?.firstIssuedAt).not.toBeNull();
    // The same address is the same party.
    await place(id, (await copy(id, 2)).id, "given", { to: { ...to, email: "ines@buyers.example" } });
    expect((await copy(id, 2)).ownerPartyId).toBe(given.ownerPartyId);
    const { lines } = await ledgerPage({ roles: [] }, id, 1);
    expect(lines.every((line) => line.secret === null)).toBe(true);
  });

  test("a held copy is left alone", async () => {
    const printId = await print([(await frame()).frameId]);
    await publishPrint(photographer, printId);
    const id = await openOf(printId);
    await placeOrder(guestOrder([{ formatId: await formatOf(id), seenAmount: 28_000 }]));
    const sentence = "This copy is held for a checkout: wait until the hold ends.";
    for (const act of ["retired", "kept", "set_aside", "given"] as const) {
      const outcome = await place(id, (await copy(id, 1)).id, act, {
        reason: "wanted",
        to: { name: "Somebody", email: "" },
      });
      expect(outcome).toEqual({ kind: "refused", sentence });
    }
    expect(await kinds(id)).toEqual(["opened"]);
  });

  test("a line is put right by a new one that names it", async () => {
    const id = await openOf(await print([(await frame()).frameId]));
    await place(id, (await copy(id, 1)).id, "kept", { reason: "for the archive" });
    const happened = { precision: "year" as const, at: new Date("2021-01-01T12:00:00Z") };
    expect(await correctEntry(photographer, id, { line: 9, words: "nothing", happened: null })).toMatchObject(
      {
        kind: "refused",
      },
    );
    expect(await correctEntry(photographer, id, { line: 2, words: "kept in 2021", happened })).toEqual({
      kind: "done",
    });
    const { lines } = await ledgerPage(photographer, id, 1);
    expect(lines[0]).toMatchObject({
      line: 3,
      kind: "corrected",
      corrects: 2,
      mark: "1/5",
      happenedPrecision: "year",
      secret: { reason: "kept in 2021" },
    });
    expect((await copy(id, 1)).placement).toBe("kept");
  });
});

describe("an assistant", () => {
  test("plans, opens, prices, lowers, closes and places nothing; sees the book", async () => {
    const printId = await print([(await frame()).frameId]);
    const id = await openOf(printId);
    const draft = await draftOf(printId, { limit: 5 });
    const one = await copy(id, 1);
    const refused = { code: "not_allowed" };
    await expect(saveDraft(assistant, { id: newId(), printId, draft: plan() })).rejects.toMatchObject(
      refused,
    );
    await expect(deleteDraft(assistant, draft)).rejects.toMatchObject(refused);
    await expect(
      openEdition(draft, assistant, { releaseAt: null, acceptPastCap: true }),
    ).rejects.toMatchObject(refused);
    await expect(changePrices(assistant, id, await formatOf(id), [])).rejects.toMatchObject(refused);
    await expect(lowerLimit(assistant, id, 3)).rejects.toMatchObject(refused);
    await expect(closeEarly(assistant, id, "no")).rejects.toMatchObject(refused);
    await expect(changeRelease(assistant, id, null)).rejects.toMatchObject(refused);
    await expect(correctEntry(assistant, id, { line: 1, words: "no", happened: null })).rejects.toMatchObject(
      refused,
    );
    await expect(
      placeCopy(assistant, id, {
        copyId: one.id,
        act: "kept",
        reason: "",
        happened: { precision: "unknown" },
        until: "",
        to: { name: "", email: "" },
        formatId: null,
      }),
    ).rejects.toMatchObject(refused);
    await expect(makePaper(assistant, newId(), PAPER)).rejects.toMatchObject(refused);
    expect(await kinds(id)).toEqual(["opened"]);
    const { lines } = await ledgerPage(assistant, id, 1);
    expect(lines[0]?.secret?.who).toBe("Sunniva Harcastle");
  });
});

const PAPER = {
  name: "Baryta gloss",
  base: "alpha cellulose",
  surface: "gloss",
  grammage: 315,
  description: "",
  whiteL: 96.5,
  whiteA: 0.1,
  whiteB: 1.8,
  maximumDensity: 2.3,
  measured: true,
};

describe("papers", () => {
  test("are added once, edited until an opened edition names them, retired and never deleted", async () => {
    const id = newId();
    await makePaper(photographer, id, PAPER);
    await makePaper(photographer, id, PAPER);
    expect((await studioPapers()).map((paper) => paper.name)).toEqual(["Smooth matt cotton", "Baryta gloss"]);
    expect(await editPaper(photographer, id, { ...PAPER, grammage: 320 })).toEqual({ kind: "done" });
    await openOf(await print([(await frame()).frameId]));
    const cotton = { ...PAPER, name: "Smooth matt cotton", grammage: 310 };
    expect(await editPaper(photographer, paperId, { ...cotton, description: "Quiet blacks." })).toEqual({
      kind: "done",
    });
    expect(await editPaper(photographer, paperId, { ...cotton, grammage: 300 })).toEqual({
      kind: "promised",
    });
    await retirePaper(photographer, paperId, true);
    expect((await studioPapers()).map((paper) => [paper.name, paper.retired, paper.openedEditions])).toEqual([
      ["Baryta gloss", false, 0],
      ["Smooth matt cotton", true, 1],
    ]);
  });
});

describe("the list of editions", () => {
  test("is filtered and sorted by what stands in the address", async () => {
    const printId = await print([(await frame()).frameId]);
    await openOf(printId);
    await draftOf(printId, { limit: 2 });
    const ask = (state: "" | "draft" | "open" | "closed", sort: "title" | "limit" = "title") =>
      studioEditions({ q: "", state, sort, down: false });
    expect((await ask("")).map((line) => line.limit)).toEqual([5, 2]);
    expect((await ask("", "limit")).map((line) => line.limit)).toEqual([2, 5]);
    expect((await ask("draft")).map((line) => line.limit)).toEqual([2]);
    expect((await ask("open")).map((line) => [line.limit, line.left, line.outside])).toEqual([[5, 5, 1]]);
    expect(await ask("closed")).toEqual([]);
    expect(await studioEditions({ q: "cotton, 500", state: "", sort: "title", down: true })).toHaveLength(2);
    expect(await studioEditions({ q: "gelatin", state: "", sort: "title", down: false })).toEqual([]);
  });
});

/*
 * Whatever the application believes, its own database role cannot break the promises. Each statement is run as that role
 * against an edition of three with number 1 given, and must fail with the code named.
 */
describe("the database refuses", () => {
  const NOT_ALLOWED = "42501";
  let ids: Record<"edition" | "format" | "one" | "two" | "picture" | "entry" | "sheet", string>;

  beforeEach(async () => {
    const made = await makeEdition({
      paperId,
      limit: 3,
      steps: [
        [1, 2, 28_000],
        [3, 3, 34_000],
      ],
    });
    await place(made.editionId, (await copy(made.editionId, 1)).id, "given", {
      to: { name: "Ember Infirmary", email: "" },
    });
    const [sheet] = await db.select().from(sheets);
    const [picture] = await db.select().from(printPictures).where(eq(printPictures.printId, made.printId));
    const [entry] = await db.select().from(ledgerEntries).orderBy(asc(ledgerEntries.id)).limit(1);
    ids = {
      edition: made.editionId,
      format: made.formatId,
      one: (await copy(made.editionId, 1)).id,
      two: (await copy(made.editionId, 2)).id,
      picture: picture?.id ?? "",
      entry: String(entry?.id ?? 0),
      sheet: sheet?.id ?? "",
    };
  });

  async function codeOf(text: string): Promise<string | undefined> {
    const client = await pool.connect();
    try {
      await client.query("begin");
      await client.query(text);
      // What is checked when a transaction ends must be checked, too.
      await client.query("set constraints all immediate");
      return undefined;
    } catch (error) {
      return sqlState(error);
    } finally {
      await client.query("rollback");
      client.release();
    }
  }

  const statements: [what: string, code: string, text: () => string][] = [
    [
      "a higher limit after issue",
      "NL011",
      () => `update editions set "limit" = 4 where id = '${ids.edition}'`,
    ],
    [
      "a lower limit after issue",
      "NL011",
      () => `update editions set "limit" = 2 where id = '${ids.edition}'`,
    ],
    [
      "forgetting that a number was issued",
      "NL011",
      () => `update editions set first_issued_at = null where id = '${ids.edition}'`,
    ],
    [
      "more artist's proofs of an open edition",
      "NL012",
      () => `update editions set artists_proofs = 9 where id = '${ids.edition}'`,
    ],
    [
      "an open edition made a draft again",
      "NL010",
      () => `update editions set state = 'draft' where id = '${ids.edition}'`,
    ],
    ["deleting an open edition", "NL010", () => `delete from editions where id = '${ids.edition}'`],
    [
      "changing a ledger entry",
      NOT_ALLOWED,
      () => `update ledger_entries set kind = 'sold' where id = ${ids.entry}`,
    ],
    ["deleting a ledger entry", NOT_ALLOWED, () => `delete from ledger_entries where id = ${ids.entry}`],
    ["emptying the ledger", NOT_ALLOWED, () => "truncate ledger_entries cascade"],
    [
      "a ledger entry out of line",
      "NL003",
      () =>
        `insert into ledger_entries (edition_id, line, kind, actor, happened_precision, body) values ('${ids.edition}', 9, 'opened', 'shop', 'unknown', '{}')`,
    ],
    ["deleting what is private in the ledger", NOT_ALLOWED, () => "delete from ledger_private"],
    [
      "rewriting what is private in the ledger",
      "NL002",
      () => `update ledger_private set body = '{"amount": 1}'`,
    ],
    [
      "a number past the limit",
      "NL005",
      () =>
        `insert into copies (id, edition_id, run, number) values ('${newId()}', '${ids.edition}', 'numbered', 4)`,
    ],
    [
      "a number that exists",
      "23505",
      () =>
        `insert into copies (id, edition_id, run, number) values ('${newId()}', '${ids.edition}', 'numbered', 2)`,
    ],
    [
      "an artist's proof that was not announced",
      "NL005",
      () =>
        `insert into copies (id, edition_id, run, number) values ('${newId()}', '${ids.edition}', 'ap', 1)`,
    ],
    ["deleting a copy", "NL004", () => `delete from copies where id = '${ids.two}'`],
    ["emptying the copies", NOT_ALLOWED, () => "truncate copies cascade"],
    ["another number for a copy", "NL006", () => `update copies set number = 3 where id = '${ids.two}'`],
    [
      "a given copy back in hand",
      "NL007",
      () => `update copies set placement = 'in_hand' where id = '${ids.one}'`,
    ],
    [
      "a hold without its checkout",
      "23514",
      () => `update copies set placement = 'held' where id = '${ids.two}'`,
    ],
    [
      "a second live sheet of a copy",
      "23505",
      () =>
        `insert into sheets (id, copy_id, print_picture_id, serial) values ('${newId()}', '${ids.one}', '${ids.picture}', 2)`,
    ],
    ["deleting a sheet", NOT_ALLOWED, () => `delete from sheets where id = '${ids.sheet}'`],
    [
      "a sheet given to another copy",
      "NL016",
      () => `update sheets set copy_id = '${ids.two}' where id = '${ids.sheet}'`,
    ],
    [
      "another size of an open edition",
      "NL014",
      () => `update formats set image_width_mm = 10 where id = '${ids.format}'`,
    ],
    [
      "a rewritten price",
      "NL015",
      () => `update price_steps set amount = 1 where format_id = '${ids.format}'`,
    ],
    ["a deleted price", "NL015", () => `delete from price_steps where format_id = '${ids.format}'`],
    ["the guards taken away", NOT_ALLOWED, () => "alter table copies disable trigger all"],
    ["the guards stepped round", NOT_ALLOWED, () => "set session_replication_role = replica"],
  ];

  test("every one of them, and is left as it was", async () => {
    const before = await everything();
    const codes: [string, string | undefined][] = [];
    for (const [what, , text] of statements) codes.push([what, await codeOf(text())]);
    expect(codes).toEqual(statements.map(([what, code]) => [what, code]));
    expect(await everything()).toEqual(before);
  });

  async function everything() {
    const tables = [
      "editions",
      "formats",
      "price_steps",
      "copies",
      "sheets",
      "ledger_entries",
      "ledger_private",
    ];
    const rows = [];
    for (const table of tables) rows.push((await pool.query(`select * from ${table} order by 1`)).rows);
    return rows;
  }
});
