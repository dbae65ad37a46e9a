import { db, inTransaction, pool } from "db/client.server";
import { editions, printPictures, prints, proofs } from "db/schema/schema";
import { eq } from "drizzle-orm";
import sharp from "sharp";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { Actor } from "~/domain/people/allowed";
import {
  buildPrintProofs,
  dropPrintProofs,
  requestPrintProofs,
} from "~/domain/rolls/build-print-proofs.server";
import { keepReleases } from "~/domain/rolls/look-after-scans.server";
import { publishProofs } from "~/domain/rolls/publish-proofs.server";
import { holdClock } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { objectSize, publicUrl } from "~/platform/storage.server";
import type { StorageServer } from "../../storage-fake/server";
import { testDatabase } from "../support/database";
import { tiff } from "../support/pictures";
import { framesOf, makeActor, makeTestRoll, sendFiles, startStorage, workOff } from "../support/rolls";
import { makeStudio } from "../support/shop";

let storage: StorageServer;
let photographer: Actor;
let frameId: string;
let scanId: string;

beforeAll(async () => {
  storage = await startStorage();
});
afterAll(async () => {
  await stopQueue();
  await storage.close();
  await pool.end();
});
beforeEach(async () => {
  holdClock(undefined);
  await (await testDatabase()).reset();
  await makeStudio();
  photographer = await makeActor("photographer");
  const rollId = await makeTestRoll(photographer, 3);
  const value = (x: number, y: number) => 60 * x + 20 * y;
  const contents = tiff({ width: 800, height: 600, channels: 1, bits: 16, value });
  [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents }]);
  await workOff();
  frameId = (await framesOf(rollId))[0]?.id ?? "";
});

type Print = { printId: string; pictureId: string };

let slugs = 0;
async function makePrint(
  values: Partial<typeof prints.$inferInsert>,
  crop = { x: 250_000, y: 0, width: 500_000, height: 1_000_000 },
): Promise<Print> {
  const [printId, pictureId] = [newId(), newId()];
  await inTransaction(async (tx) => {
    await tx.db
      .insert(prints)
      .values({ id: printId, slug: `print-${++slugs}`, title: "Thorn lane", ...values });
    await tx.db.insert(printPictures).values({ id: pictureId, printId, position: 1, frameId, scanId, crop });
    await requestPrintProofs(tx, pictureId);
  });
  return { printId, pictureId };
}

async function release(printId: string, releaseAt: Date, state: "draft" | "open" = "open"): Promise<void> {
  const dated = { releaseAt, ...(state === "open" ? { openedAt: new Date("2026-01-01") } : {}) };
  await db.insert(editions).values({ id: newId(), printId, limit: 5, state, ...dated });
}

const keysOf = async (printId: string) =>
  (
    await db
      .select({ key: proofs.objectKey })
      .from(proofs)
      .innerJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
      .where(eq(printPictures.printId, printId))
  ).map((row) => row.key);

const anyone = async (key: string) => {
  const answer = await fetch(publicUrl(key));
  await answer.arrayBuffer();
  return answer.status;
};

async function statuses(printId: string): Promise<number[]> {
  return [...new Set(await Promise.all((await keysOf(printId)).map(anyone)))];
}

const publicAt = async (printId: string) =>
  (await db.select({ at: prints.proofsPublicAt }).from(prints).where(eq(prints.id, printId)))[0]?.at;

const hidden = expect.arrayContaining([
  expect.toSatisfy((status: number) => status === 403 || status === 404),
]);

describe("a print's proofs", () => {
  it("show its crop in three formats, and are private while it is a draft", async () => {
    const { printId, pictureId } = await makePrint({});
    expect(await workOff()).toEqual({ "build-print-proofs": 1, "publish-proofs": 1 });
    const rows = await db.select().from(proofs).where(eq(proofs.printPictureId, pictureId));
    expect(rows.map((row) => `${row.format} ${row.width}x${row.height}`).sort()).toEqual(
      ["avif", "jpeg", "webp"].flatMap((format) => [`${format} 320x480`, `${format} 400x600`]).sort(),
    );
    expect(await statuses(printId)).toEqual(hidden);
    expect(await publicAt(printId)).toBeNull();
  });

  it("are public once it is published with a released edition, for anyone and for ever under that name", async () => {
    const { printId } = await makePrint({ state: "published" });
    await release(printId, new Date("2026-01-02"));
    await workOff();
    const keys = await keysOf(printId);
    for (const key of keys) {
      const answer = await fetch(publicUrl(key));
      expect(answer.status).toBe(200);
      expect(answer.headers.get("cache-control")).toBe("public, max-age=31536000, immutable");
      expect(answer.headers.get("content-type")).toMatch(/^image\/(avif|webp|jpeg)$/);
      const header = await sharp(Buffer.from(await answer.arrayBuffer())).metadata();
      expect([header.exif, header.xmp, header.icc]).toEqual([undefined, undefined, undefined]);
    }
    expect(keys.length).toBeGreaterThan(0);
    expect(await publicAt(printId)).not.toBeNull();
  });

  it("are taken back when the print is withdrawn, and come again with it", async () => {
    const { printId } = await makePrint({ state: "published" });
    await release(printId, new Date("2026-01-02"));
    await workOff();
    await db.update(prints).set({ state: "withdrawn" }).where(eq(prints.id, printId));
    await publishProofs(printId);
    expect(await statuses(printId)).toEqual(hidden);
    expect(await publicAt(printId)).toBeNull();
    for (const key of await keysOf(printId)) expect(await objectSize("private", key)).not.toBeNull();
    await db.update(prints).set({ state: "published" }).where(eq(prints.id, printId));
    await publishProofs(printId);
    expect(await statuses(printId)).toEqual([200]);
  });

  it("wait for the release, which the worker keeps; an edition that was never opened releases nothing", async () => {
    holdClock(new Date("2026-12-01T17:59:59Z"));
    const { printId } = await makePrint({ state: "published" });
    await release(printId, new Date("2026-01-01"), "draft");
    await release(printId, new Date("2026-12-01T18:00:00Z"));
    await workOff();
    await keepReleases();
    expect(await statuses(printId)).toEqual(hidden);
    holdClock(new Date("2026-12-01T18:00:00Z"));
    await keepReleases();
    expect(await statuses(printId)).toEqual([200]);
    await db.update(prints).set({ state: "withdrawn" }).where(eq(prints.id, printId));
    await keepReleases();
    expect(await statuses(printId)).toEqual(hidden);
  });

  it("may be shown before the release if the photographer says so", async () => {
    const { printId } = await makePrint({ state: "published", shownBeforeRelease: true });
    await workOff();
    expect(await statuses(printId)).toEqual([200]);
  });

  it("of another crop take the place of the old ones, which go from both buckets", async () => {
    const { printId, pictureId } = await makePrint({ state: "published", shownBeforeRelease: true });
    await workOff();
    const former = await keysOf(printId);
    await inTransaction(async (tx) => {
      const crop = { x: 0, y: 0, width: 400_000, height: 400_000 };
      await tx.db.update(printPictures).set({ crop }).where(eq(printPictures.id, pictureId));
      await requestPrintProofs(tx, pictureId);
    });
    await workOff();
    const now = await keysOf(printId);
    expect(now.some((key) => former.includes(key))).toBe(false);
    expect(await statuses(printId)).toEqual([200]);
    for (const key of former) {
      expect([403, 404]).toContain(await anyone(key));
      expect(await objectSize("private", key)).toBeNull();
    }
  });

  it("that two prints share stay public until the last of them is withdrawn", async () => {
    const one = await makePrint({ state: "published", shownBeforeRelease: true });
    const two = await makePrint({ state: "published", shownBeforeRelease: true });
    await workOff();
    expect((await keysOf(one.printId)).sort()).toEqual((await keysOf(two.printId)).sort());
    await db.update(prints).set({ state: "withdrawn" }).where(eq(prints.id, one.printId));
    await publishProofs(one.printId);
    expect(await statuses(two.printId)).toEqual([200]);
    await db.update(prints).set({ state: "withdrawn" }).where(eq(prints.id, two.printId));
    await publishProofs(two.printId);
    expect(await statuses(two.printId)).toEqual(hidden);
  });

  it("leave nothing behind when the picture is taken out of the print", async () => {
    const { printId, pictureId } = await makePrint({ state: "published", shownBeforeRelease: true });
    await workOff();
    const keys = await keysOf(printId);
    await inTransaction(async (tx) => {
      await dropPrintProofs(tx, { id: pictureId, printId });
      await tx.db.delete(printPictures).where(eq(printPictures.id, pictureId));
    });
    await workOff();
    for (const key of keys) {
      expect([403, 404]).toContain(await anyone(key));
      expect(await objectSize("private", key)).toBeNull();
    }
  });

  it("are built for the crop that is there at the end, though it is changed while they are built", async () => {
    const { pictureId } = await makePrint({});
    const building = buildPrintProofs(pictureId);
    await expect
      .poll(
        async () =>
          (await db.select().from(printPictures).where(eq(printPictures.id, pictureId)))[0]?.proofState,
      )
      .toBe("working");
    const crop = { x: 0, y: 0, width: 200_000, height: 200_000 };
    await db.update(printPictures).set({ crop }).where(eq(printPictures.id, pictureId));
    await building;
    const rows = await db.select().from(proofs).where(eq(proofs.printPictureId, pictureId));
    expect(new Set(rows.map((row) => `${row.width}x${row.height}`))).toEqual(new Set(["160x120"]));
  });
});
