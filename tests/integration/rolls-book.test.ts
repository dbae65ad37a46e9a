import { randomUUID } from "node:crypto";
import { db, pool } from "db/client.server";
import { rolls } from "db/schema/schema";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { Actor } from "~/domain/people/allowed";
import { chooseFrame, noteFrame } from "~/domain/rolls/edit-frame.server";
import { editRoll } from "~/domain/rolls/edit-roll.server";
import { frameForm } from "~/domain/rolls/frame-form";
import { makeRoll } from "~/domain/rolls/make-roll.server";
import { proofFile } from "~/domain/rolls/proof-file.server";
import { nextRollNumber, rollList } from "~/domain/rolls/roll-list.server";
import { framePage, rollPage } from "~/domain/rolls/roll-page.server";
import { stopQueue } from "~/platform/queue.server";
import type { StorageServer } from "../../storage-fake/server";
import { testDatabase } from "../support/database";
import { tiff } from "../support/pictures";
import { framesOf, makeActor, makeTestRoll, sendFiles, startStorage, workOff } from "../support/rolls";
import { makeStudio } from "../support/shop";

let storage: StorageServer;
let photographer: Actor;

beforeAll(async () => {
  storage = await startStorage();
});
afterAll(async () => {
  await stopQueue();
  await storage.close();
  await pool.end();
});
beforeEach(async () => {
  await (await testDatabase()).reset();
  await makeStudio();
  photographer = await makeActor("photographer");
});

const fields = {
  number: 7,
  filmFormat: "120-6x9",
  camera: "6x9 folding camera",
  film: "ISO 100",
  exposed: { value: "2026-11-29", precision: "day" },
  notes: "",
} as const;
const grey = (value: number) => tiff({ width: 90, height: 60, channels: 1, bits: 16, value: () => value });

describe("a roll", () => {
  it("is made once although its form is sent twice, even at the same moment", async () => {
    const roll = { ...fields, id: randomUUID() };
    const made = await Promise.all([makeRoll(photographer, roll), makeRoll(photographer, roll)]);
    expect(made).toEqual([
      { code: "made", rollId: roll.id },
      { code: "made", rollId: roll.id },
    ]);
    expect(await makeRoll(photographer, roll)).toEqual({ code: "made", rollId: roll.id });
    expect(await db.select().from(rolls)).toHaveLength(1);
  });

  it("does not take the number of another, made or edited", async () => {
    await makeRoll(photographer, { ...fields, id: randomUUID() });
    expect(await makeRoll(photographer, { ...fields, id: randomUUID() })).toEqual({ code: "number_taken" });
    const other = await makeTestRoll(photographer, 8);
    expect(await editRoll(photographer, other, fields)).toEqual({ code: "number_taken" });
    expect(await editRoll(photographer, other, { ...fields, number: 9 })).toEqual({ code: "saved" });
    expect(await nextRollNumber()).toBe(10);
  });

  it("is changed only by those who may", async () => {
    const rollId = await makeTestRoll(photographer, 1);
    const assistant = await makeActor("assistant");
    expect(await editRoll(assistant, rollId, fields)).toEqual({ code: "saved" });
    for (const role of ["printer", "stockist", "bookkeeper", "collector"] as const) {
      const other = await makeActor(role);
      await expect(editRoll(other, rollId, fields)).rejects.toMatchObject({ code: "not_allowed" });
      await expect(makeRoll(other, { ...fields, id: randomUUID() })).rejects.toMatchObject({
        code: "not_allowed",
      });
    }
  });

  it("that is not there is not found, whatever its address looks like", async () => {
    expect(await rollPage(randomUUID())).toBeNull();
    expect(await rollPage("new-one")).toBeNull();
    expect(await framePage(await makeTestRoll(photographer, 1), randomUUID())).toBeNull();
    expect(await proofFile("../secrets")).toBeNull();
    await expect(editRoll(photographer, randomUUID(), fields)).rejects.toMatchObject({ code: "not_found" });
  });
});

describe("a roll's page", () => {
  it("shows every frame, its proofs, its reason when refused, and where the same file lies already", async () => {
    const first = await makeTestRoll(photographer, 12);
    await sendFiles(photographer, first, [{ name: "x.tif", contents: grey(9_000) }]);
    const second = await makeTestRoll(photographer, 13);
    await sendFiles(photographer, second, [
      { name: "1.tif", contents: grey(20_000) },
      { name: "2.tif", contents: Buffer.from("no picture") },
      { name: "3.tif", contents: grey(9_000) },
    ]);
    await workOff();
    const page = await rollPage(second);
    expect(page?.frames.map((frame) => [frame.label, frame.standing.state, frame.proofs.length > 0])).toEqual(
      [
        ["1", "ready", true],
        ["2", "refused", false],
        ["3", "ready", true],
      ],
    );
    expect(page?.frames[1]?.standing.more).toContain("not a picture");
    expect(page?.frames.map((frame) => frame.scan?.sameAs)).toEqual([null, null, "frame 1 of roll 12"]);
    const proof = page?.frames[0]?.proofs[0];
    const file = await proofFile(proof?.id ?? "");
    expect(file?.contentType).toMatch(/^image\//);
    expect((await new Response(file?.body).arrayBuffer()).byteLength).toBe(file?.bytes);
    expect(await rollList()).toMatchObject([
      { number: 13, frames: 3, needsLook: 1, pending: 0 },
      { number: 12, frames: 1, needsLook: 0, pending: 0 },
    ]);
  });

  it("shows what was noted of a frame, and its pencil mark", async () => {
    const rollId = await makeTestRoll(photographer, 1);
    await sendFiles(photographer, rollId, [{ name: "1.tif", contents: grey(1) }]);
    const frameId = (await framesOf(rollId))[0]?.id ?? "";
    const form = frameForm.parse({
      intent: "notes",
      label: "12A",
      aperture: "f/22",
      time: "1:30",
      metered: "40",
      note: "second frost",
    });
    if (form.intent !== "notes") throw new Error("another form");
    await noteFrame(photographer, { rollId, frameId }, form);
    await chooseFrame(photographer, { rollId, frameId }, true);
    const page = await framePage(rollId, frameId);
    expect(page?.frame).toMatchObject({
      label: "12A",
      exposure: "f/22, 1 min 30 s",
      metered: "metered 40 s",
      note: "second frost",
      chosen: true,
      fields: { aperture: "f/22", time: "1 min 30 s", metered: "40 s", lens: "" },
    });
    const other = await makeTestRoll(photographer, 2);
    await expect(chooseFrame(photographer, { rollId: other, frameId }, false)).rejects.toMatchObject({
      code: "not_found",
    });
    const bookkeeper = await makeActor("bookkeeper");
    await expect(chooseFrame(bookkeeper, { rollId, frameId }, false)).rejects.toMatchObject({
      code: "not_allowed",
    });
  });
});
