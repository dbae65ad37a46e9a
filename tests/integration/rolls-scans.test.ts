import { db, pool } from "db/client.server";
import { printPictures, prints, proofs, scans } from "db/schema/schema";
import { and, eq, isNull } from "drizzle-orm";
import sharp from "sharp";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { Actor } from "~/domain/people/allowed";
import { beginUploads } from "~/domain/rolls/begin-uploads.server";
import { buildProofs } from "~/domain/rolls/build-proofs.server";
import { checkScan } from "~/domain/rolls/check-scan.server";
import { finishUpload } from "~/domain/rolls/finish-upload.server";
import { findLostImaging, takeArrivedScans } from "~/domain/rolls/look-after-scans.server";
import { moveFrame } from "~/domain/rolls/move-frame.server";
import { removeFrame } from "~/domain/rolls/remove-frame.server";
import { retryScans } from "~/domain/rolls/retry-scan.server";
import { signUpload } from "~/domain/rolls/sign-upload.server";
import { shiftClock } from "~/platform/clock";
import { newId, sha256 } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { objectSize, presignGet, putObject, removeObject } from "~/platform/storage.server";
import type { StorageServer } from "../../storage-fake/server";
import { testDatabase } from "../support/database";
import { pngClaiming, tiff } from "../support/pictures";
import {
  framesOf,
  makeActor,
  makeTestRoll,
  scanRow,
  sendFiles,
  startStorage,
  workOff,
} from "../support/rolls";
import { makeStudio } from "../support/shop";

let storage: StorageServer;
let photographer: Actor;
let rollId: string;

beforeAll(async () => {
  storage = await startStorage();
});
afterAll(async () => {
  await stopQueue();
  await storage.close();
  await pool.end();
});
beforeEach(async () => {
  shiftClock(0);
  await (await testDatabase()).reset();
  await makeStudio();
  photographer = await makeActor("photographer");
  rollId = await makeTestRoll(photographer, 214);
});

const grey = (width: number, height: number, seed = 1) =>
  tiff({
    width,
    height,
    channels: 1,
    bits: 16,
    value: (x, y) => 65_535 * (0.05 * seed + 0.3 * (x / width) + 0.2 * (y / height)),
  });

async function privateObject(key: string): Promise<Buffer> {
  const answer = await fetch(await presignGet(key, 60));
  expect(answer.status).toBe(200);
  return Buffer.from(await answer.arrayBuffer());
}

describe("a scan that is sent", () => {
  it("of 5,200 x 5,000 px in 16-bit grey is checked and gets its proofs, grey and without metadata", async () => {
    const [width, height] = [5_200, 5_000];
    const contents = grey(width, height);
    const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "roll214_01.tif", contents }]);
    expect(await workOff()).toEqual({ "check-scan": 1, "build-proofs": 1 });

    expect(await scanRow(scanId)).toMatchObject({
      state: "ready",
      bytes: contents.length,
      sha256: sha256(contents),
      mediaType: "image/tiff",
      width,
      height,
      bitDepth: 16,
      channels: 1,
      proofState: "ready",
      proofFailure: null,
    });
    const rows = await db.select().from(proofs).where(eq(proofs.scanId, scanId));
    expect(rows.map((row) => `${row.format} ${row.width}`).sort()).toEqual(
      ["avif", "jpeg", "webp"].flatMap((format) => [1280, 320, 640].map((w) => `${format} ${w}`)).sort(),
    );
    for (const row of rows) {
      const object = await privateObject(row.objectKey);
      expect(sha256(object)).toBe(row.sha256);
      expect(row.objectKey).toContain(row.sha256);
      const header = await sharp(object).metadata();
      expect([header.width, header.height]).toEqual([row.width, row.height]);
      expect([header.exif, header.xmp, header.icc]).toEqual([undefined, undefined, undefined]);
      if (row.format === "jpeg") expect(header.channels).toBe(1);
    }
  }, 60_000);

  it("keeps the order of the file names, counted as a person counts", async () => {
    const files = ["r_10.tif", "r_2.tif", "r_1.tif"].map((name, i) => ({ name, contents: grey(40, 30, i) }));
    await sendFiles(photographer, rollId, files);
    await sendFiles(photographer, rollId, [{ name: "r_0.tif", contents: grey(40, 30, 9) }]);
    const order = await framesOf(rollId);
    const names = await Promise.all(
      order.map(
        async (frame) => (await db.select().from(scans).where(eq(scans.frameId, frame.id)))[0]?.fileName,
      ),
    );
    expect(names).toEqual(["r_1.tif", "r_2.tif", "r_10.tif", "r_0.tif"]);
    expect(order.map((frame) => [frame.position, frame.label])).toEqual([
      [1, "1"],
      [2, "2"],
      [3, "3"],
      [4, "4"],
    ]);
  });

  it("takes its frame again when it did not arrive the first time", async () => {
    const file = { name: "a.tif", size: 5_000 };
    const [first] = await beginUploads(photographer, { rollId, files: [file] });
    const again = await beginUploads(photographer, { rollId, files: [file, { name: "b.tif", size: 10 }] });
    expect(again[0]).toEqual(first);
    expect(again[1]?.frameId).not.toBe(first?.frameId);
    expect(await framesOf(rollId)).toHaveLength(2);
  });

  it("is taken although the page was closed before it could say so", async () => {
    const contents = grey(60, 40);
    const [begun] = await beginUploads(photographer, {
      rollId,
      files: [{ name: "a.tif", size: contents.length }],
    });
    const scanId = begun?.scanId ?? "";
    const signed = await signUpload(photographer, { rollId, scanId, method: "PUT" });
    await fetch(signed.url, { method: "PUT", headers: signed.headers, body: new Uint8Array(contents) });
    await takeArrivedScans();
    expect((await scanRow(scanId)).state).toBe("expected");
    shiftClock(5 * 60_000);
    await takeArrivedScans();
    await workOff();
    expect(await scanRow(scanId)).toMatchObject({ state: "ready", proofState: "ready" });
  });

  it("is checked once although it is said twice to have been sent", async () => {
    const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents: grey(60, 40) }]);
    expect(await finishUpload(photographer, { rollId, scanId })).toEqual({ arrived: true });
    expect(await workOff()).toEqual({ "check-scan": 1, "build-proofs": 1 });
    await checkScan(scanId);
    await buildProofs(scanId);
    expect(await workOff()).toEqual({});
    expect(await scanRow(scanId)).toMatchObject({ state: "ready", proofState: "ready" });
  });

  it("is not taken while storage does not have it", async () => {
    const [begun] = await beginUploads(photographer, { rollId, files: [{ name: "a.tif", size: 100 }] });
    const scanId = begun?.scanId ?? "";
    expect(await finishUpload(photographer, { rollId, scanId })).toEqual({ arrived: false });
    expect((await scanRow(scanId)).state).toBe("expected");
  });

  it("may come in parts, each signed by itself", async () => {
    const contents = grey(2_400, 1_600);
    const [begun] = await beginUploads(photographer, {
      rollId,
      files: [{ name: "big.tif", size: contents.length }],
    });
    const scanId = begun?.scanId ?? "";
    const sign = (method: "POST" | "PUT" | "GET", rest: { uploadId?: string; partNumber?: number } = {}) =>
      signUpload(photographer, { rollId, scanId, method, ...rest });
    const create = await sign("POST");
    const created = await (await fetch(create.url, { method: "POST", headers: create.headers })).text();
    const uploadId = /<UploadId>([^<]+)</.exec(created)?.[1] ?? "";
    const cut = 5 * 1024 * 1024;
    const parts: string[] = [];
    for (const [i, part] of [contents.subarray(0, cut), contents.subarray(cut)].entries()) {
      const { url } = await sign("PUT", { uploadId, partNumber: i + 1 });
      const answer = await fetch(url, { method: "PUT", body: new Uint8Array(part) });
      parts.push(`<Part><PartNumber>${i + 1}</PartNumber><ETag>${answer.headers.get("etag")}</ETag></Part>`);
    }
    const listed = await (await fetch((await sign("GET", { uploadId })).url)).text();
    expect(listed.match(/<PartNumber>/g)).toHaveLength(2);
    const complete = await fetch((await sign("POST", { uploadId })).url, {
      method: "POST",
      headers: { "Content-Type": "application/xml" },
      body: `<CompleteMultipartUpload>${parts.join("")}</CompleteMultipartUpload>`,
    });
    expect(complete.status).toBe(200);
    await finishUpload(photographer, { rollId, scanId });
    await workOff();
    expect(await scanRow(scanId)).toMatchObject({ state: "ready", sha256: sha256(contents) });
  });
});

describe("among many files, each that is no scan is refused with its reason, and the others go on", () => {
  it("in one batch", async () => {
    const good = grey(300, 200);
    const png = await sharp(good).toColourspace("srgb").png().toBuffer();
    const jpeg = await sharp(good).jpeg().toBuffer();
    const half = (whole: Buffer) => Buffer.from(whole.subarray(0, Math.floor(whole.length / 2)));
    const cases: [name: string, contents: Buffer, reason: RegExp | null][] = [
      ["01.tif", good, null],
      ["02 empty.tif", Buffer.alloc(0), /^The file is empty\.$/],
      ["03 text.tif", Buffer.from("Second frost, the one.\n"), /not a picture/],
      ["04 half.tif", half(good), /The TIFF is cut short/],
      ["05 half.jpg", half(jpeg), /The JPEG is cut short/],
      ["06 half.png", half(png), /The PNG is cut short/],
      [
        "07 drawing.tif",
        Buffer.from('<svg xmlns="http://www.w3.org/2000/svg" width="9" height="9"/>'),
        /a drawing \(SVG\)/,
      ],
      ["08 bomb.png", pngClaiming(60_000, 50_000), /3,000 megapixels \(60,000 × 50,000\).* up to 200/],
      ["09 moving.tif", await sharp(good).gif().toBuffer(), /a GIF/],
      ["10.png", png, null],
      ["11.jpg", jpeg, null],
    ];
    const sent = await sendFiles(
      photographer,
      rollId,
      cases.map(([name, contents]) => ({ name, contents })),
    );
    await workOff();
    for (const [i, [name, , reason]] of cases.entries()) {
      const row = await scanRow(sent[i] ?? "");
      expect(row.fileName).toBe(name);
      if (reason === null) {
        expect(row).toMatchObject({ state: "ready", refusedReason: null, proofState: "ready" });
      } else {
        expect(row.state).toBe("refused");
        expect(row.refusedReason).toMatch(reason);
        expect(await objectSize("private", row.objectKey)).toBeNull();
      }
    }
    expect(await framesOf(rollId)).toHaveLength(cases.length);
  });

  it("when fewer bytes lie in storage than were announced", async () => {
    const contents = grey(60, 40);
    const [begun] = await beginUploads(photographer, {
      rollId,
      files: [{ name: "a.tif", size: contents.length + 1 }],
    });
    const scanId = begun?.scanId ?? "";
    const create = await signUpload(photographer, { rollId, scanId, method: "POST" });
    const created = await (await fetch(create.url, { method: "POST", headers: create.headers })).text();
    const uploadId = /<UploadId>([^<]+)</.exec(created)?.[1] ?? "";
    const { url } = await signUpload(photographer, {
      rollId,
      scanId,
      method: "PUT",
      uploadId,
      partNumber: 1,
    });
    const etag = (await fetch(url, { method: "PUT", body: new Uint8Array(contents) })).headers.get("etag");
    await fetch((await signUpload(photographer, { rollId, scanId, method: "POST", uploadId })).url, {
      method: "POST",
      body: `<CompleteMultipartUpload><Part><PartNumber>1</PartNumber><ETag>${etag}</ETag></Part></CompleteMultipartUpload>`,
    });
    await finishUpload(photographer, { rollId, scanId });
    await workOff();
    const row = await scanRow(scanId);
    expect(row.state).toBe("refused");
    expect(row.refusedReason).toContain("bytes arrived, but the file has");
  });

  it("and sent again under its name, takes its place", async () => {
    const contents = grey(300, 200);
    await sendFiles(photographer, rollId, [{ name: "a.tif", contents: Buffer.from("no picture") }]);
    await workOff();
    const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents }]);
    await workOff();
    expect(await framesOf(rollId)).toHaveLength(1);
    expect(await scanRow(scanId)).toMatchObject({ version: 2, state: "ready" });
  });
});

describe("what may be signed", () => {
  it("is nothing for somebody without the permission, for another roll, or for a scan that has arrived", async () => {
    const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents: grey(60, 40) }]);
    const [begun] = await beginUploads(photographer, { rollId, files: [{ name: "b.tif", size: 10 }] });
    const open = begun?.scanId ?? "";
    const bookkeeper = await makeActor("bookkeeper");
    const other = await makeTestRoll(photographer, 215);
    const put = { rollId, scanId: open, method: "PUT" } as const;
    await expect(signUpload(bookkeeper, put)).rejects.toMatchObject({ code: "not_allowed" });
    await expect(signUpload(photographer, { ...put, rollId: other })).rejects.toMatchObject({
      code: "not_found",
    });
    await expect(signUpload(photographer, { ...put, scanId })).rejects.toMatchObject({ code: "gone" });
    await expect(beginUploads(bookkeeper, { rollId, files: [] })).rejects.toMatchObject({
      code: "not_allowed",
    });
    await expect(finishUpload(bookkeeper, put)).rejects.toMatchObject({ code: "not_allowed" });
  });

  it("binds the length that was announced", async () => {
    const [begun] = await beginUploads(photographer, { rollId, files: [{ name: "b.tif", size: 10 }] });
    const { url, headers } = await signUpload(photographer, {
      rollId,
      scanId: begun?.scanId ?? "",
      method: "PUT",
    });
    const answer = await fetch(url, { method: "PUT", headers, body: "eleven byte" });
    expect(answer.status).toBe(403);
  });
});

describe("a frame", () => {
  it("gets a better version of its scan; the old one is kept", async () => {
    const [first = ""] = await sendFiles(photographer, rollId, [
      { name: "a.tif", contents: grey(300, 200, 1) },
    ]);
    const [frame] = await framesOf(rollId);
    const [second = ""] = await sendFiles(
      photographer,
      rollId,
      [{ name: "better.tif", contents: grey(600, 400, 2) }],
      frame?.id,
    );
    await workOff();
    expect(await framesOf(rollId)).toHaveLength(1);
    expect(await scanRow(first)).toMatchObject({ version: 1, state: "ready" });
    expect(await scanRow(second)).toMatchObject({ version: 2, state: "ready", width: 600 });
    expect(await objectSize("private", (await scanRow(first)).objectKey)).not.toBeNull();
  });

  it("changes places with its neighbour, and stays at the ends", async () => {
    await beginUploads(photographer, { rollId, files: ["a", "b", "c"].map((name) => ({ name, size: 5 })) });
    const [a, , c] = await framesOf(rollId);
    const order = async () => (await framesOf(rollId)).map((frame) => frame.label);
    await moveFrame(photographer, { rollId, frameId: c?.id ?? "", to: "earlier" });
    expect(await order()).toEqual(["1", "3", "2"]);
    await moveFrame(photographer, { rollId, frameId: a?.id ?? "", to: "earlier" });
    expect(await order()).toEqual(["1", "3", "2"]);
    await moveFrame(photographer, { rollId, frameId: a?.id ?? "", to: "later" });
    expect(await order()).toEqual(["3", "1", "2"]);
    expect((await framesOf(rollId)).map((frame) => frame.position)).toEqual([1, 2, 3]);
  });

  it("keeps one place for each frame when several are moved at once", async () => {
    const files = Array.from({ length: 6 }, (_, i) => ({ name: `f${i}`, size: 5 }));
    await beginUploads(photographer, { rollId, files });
    const before = await framesOf(rollId);
    await Promise.all(
      before.map((frame, i) =>
        moveFrame(photographer, { rollId, frameId: frame.id, to: i % 2 === 0 ? "later" : "earlier" }),
      ),
    );
    const after = await framesOf(rollId);
    expect(after.map((frame) => frame.position)).toEqual([1, 2, 3, 4, 5, 6]);
    expect(new Set(after.map((frame) => frame.id)).size).toBe(6);
  });

  it("is removed when it was refused; the later ones move up and keep their numbers", async () => {
    const sent = ["a", "b", "c"].map((name, i) => ({
      name: `${name}.tif`,
      contents: name === "b" ? Buffer.from("no picture") : grey(60, 40, i),
    }));
    await sendFiles(photographer, rollId, sent);
    await workOff();
    const [, middle] = await framesOf(rollId);
    expect(await removeFrame(photographer, { rollId, frameId: middle?.id ?? "", sure: false })).toEqual({
      code: "removed",
    });
    expect((await framesOf(rollId)).map((frame) => [frame.position, frame.label])).toEqual([
      [1, "1"],
      [2, "3"],
    ]);
    await sendFiles(photographer, rollId, [{ name: "d.tif", contents: grey(60, 40, 7) }]);
    expect((await framesOf(rollId)).map((frame) => frame.label)).toEqual(["1", "3", "4"]);
  });

  it("with a scan is removed only when one is sure, and then leaves nothing in storage", async () => {
    const [scanId = ""] = await sendFiles(photographer, rollId, [
      { name: "blank.tif", contents: grey(60, 40) },
    ]);
    await workOff();
    const [frame] = await framesOf(rollId);
    const frameId = frame?.id ?? "";
    const keys = [
      (await scanRow(scanId)).objectKey,
      ...(await db.select().from(proofs).where(eq(proofs.scanId, scanId))).map((row) => row.objectKey),
    ];
    expect(await removeFrame(photographer, { rollId, frameId, sure: false })).toEqual({ code: "has_a_scan" });
    expect(await removeFrame(photographer, { rollId, frameId, sure: true })).toEqual({ code: "removed" });
    for (const key of keys) expect(await objectSize("private", key)).toBeNull();
  });

  it("on which a print rests is not removed", async () => {
    const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents: grey(60, 40) }]);
    await workOff();
    const [frame] = await framesOf(rollId);
    const printId = newId();
    await db.insert(prints).values({ id: printId, slug: "a-print", title: "A print" });
    await db
      .insert(printPictures)
      .values({ id: newId(), printId, position: 1, frameId: frame?.id ?? "", scanId });
    const outcome = await removeFrame(photographer, { rollId, frameId: frame?.id ?? "", sure: true });
    expect(outcome).toEqual({ code: "in_a_print" });
    expect((await scanRow(scanId)).state).toBe("ready");
  });
});

describe("what fails", () => {
  it("is seen, and goes well after another try", async () => {
    const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents: grey(60, 40) }]);
    await checkScan(scanId);
    const { objectKey } = await scanRow(scanId);
    const contents = await privateObject(objectKey);
    await removeObject("private", objectKey);
    for (let attempt = 0; attempt < 5; attempt++) {
      await db.execute("update pgboss.job set start_after = now() where state = 'retry'");
      await workOff();
    }
    expect(await scanRow(scanId)).toMatchObject({
      state: "ready",
      proofState: "failed",
      proofFailure: "The scan has gone from storage.",
    });
    await putObject("private", objectKey, contents, "application/octet-stream");
    expect(await retryScans(photographer, { rollId })).toBe(1);
    expect(await retryScans(photographer, { rollId })).toBe(0);
    await workOff();
    expect(await scanRow(scanId)).toMatchObject({ proofState: "ready", proofFailure: null });
  });

  it("or was lost is found: a job that is gone is made again, one that was given up is shown", async () => {
    const [lost = "", givenUp = ""] = await sendFiles(photographer, rollId, [
      { name: "a.tif", contents: grey(60, 40, 1) },
      { name: "b.tif", contents: grey(60, 40, 2) },
    ]);
    await pool.query("delete from pgboss.job where data->>'scanId' = $1", [lost]);
    await pool.query("update pgboss.job set state = 'failed' where data->>'scanId' = $1", [givenUp]);
    await findLostImaging();
    await workOff();
    expect(await scanRow(lost)).toMatchObject({ state: "ready", proofState: "ready" });
    expect(await scanRow(givenUp)).toMatchObject({ state: "checking", proofState: "failed" });
    expect((await scanRow(givenUp)).proofFailure).toContain("stopped again and again");
    await retryScans(photographer, { rollId });
    await workOff();
    expect(await scanRow(givenUp)).toMatchObject({ state: "ready", proofState: "ready" });
  });
});

it("the contact sheet's proofs of a frame are never public", async () => {
  const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents: grey(60, 40) }]);
  await workOff();
  const rows = await db
    .select()
    .from(proofs)
    .where(and(eq(proofs.scanId, scanId), isNull(proofs.printPictureId)));
  expect(rows.length).toBeGreaterThan(0);
  for (const row of rows) expect(await objectSize("public", row.objectKey)).toBeNull();
});
