import { mkdtemp, readdir, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import type { Contents, ObjectFacts } from "./bucket-objects";
import { Store } from "./store";

const FACTS: ObjectFacts = {
  etag: "e",
  modifiedAt: 0,
  attributes: { contentType: "text/plain", metadata: [] },
};

let folder: string;
let store: Store;
const problems: string[] = [];

const openStore = () =>
  Store.open({ folder, buckets: ["studio"], reportProblem: (message) => problems.push(message) });

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "numberleaf-store-"));
  store = await openStore();
});
afterEach(async () => {
  await rm(folder, { recursive: true, force: true });
  expect(problems.splice(0)).toEqual([]);
});

async function* pieces(...texts: string[]): AsyncGenerator<Buffer> {
  for (const text of texts) yield Buffer.from(text);
}

async function received(text: string): Promise<Contents> {
  const { path, size } = await store.receive(pieces(text), ["md5"]);
  return { path, size, mode: "move" };
}

async function dataFiles(): Promise<string[]> {
  const names = await readdir(folder, { recursive: true });
  return names.filter((name) => name.endsWith(".data"));
}

test("whoever reads gets the whole of what they began with, whatever is written meanwhile", async () => {
  const { objects } = store.bucket("studio");
  await objects.commit("key", [await received("first "), await received("second")], FACTS);
  const reader = objects.open("key");
  if (!reader) throw new Error("the object is not there");
  const reading = reader.read(0, reader.record.size);
  expect((await reading.next()).value?.toString()).toBe("first ");

  await objects.commit("key", [await received("replaced")], FACTS);
  await objects.delete("key");
  expect(objects.get("key")).toBeUndefined();
  // The second data file is only opened now.
  expect((await reading.next()).value?.toString()).toBe("second");
  expect((await reading.next()).done).toBe(true);
  expect(await dataFiles()).toHaveLength(2);
  reader.close();
  reader.close();
  await expect.poll(dataFiles).toEqual([]);
});

test("a source that fails, or a check that refuses, leaves no file", async () => {
  async function* failing(): AsyncGenerator<Buffer> {
    yield Buffer.from("half");
    throw new Error("cut off");
  }
  await expect(store.receive(failing(), ["md5"])).rejects.toThrow("cut off");
  const refuse = () => {
    throw new Error("refused");
  };
  await expect(store.receive(pieces("all"), ["md5"], refuse)).rejects.toThrow("refused");
  expect(await readdir(join(folder, "tmp"))).toEqual([]);
});

test("shared contents stay where they are, and each object has its own life", async () => {
  const { objects } = store.bucket("studio");
  await objects.commit("source", [await received("text")], FACTS);
  const reader = objects.open("source");
  const [path = ""] = reader?.segmentPaths ?? [];
  await objects.commit("copy", [{ path, size: 4, mode: "share" }], FACTS);
  reader?.close();
  await objects.delete("source");
  const copy = objects.open("copy");
  expect((await copy?.read(1, 3).next())?.value?.toString()).toBe("ex");
  copy?.close();

  store = await openStore();
  expect(
    store.bucket("studio").objects.list({ prefix: "", delimiter: "", after: undefined, limit: 9 }),
  ).toMatchObject({
    records: [{ key: "copy", size: 4 }],
    next: undefined,
  });
});

test.each(["ab", "UPPER", "..", "a..b", "-abc", "a/b", "a".repeat(64)])(
  "%s is no name of a bucket",
  async (name) => {
    await expect(Store.open({ folder, buckets: [name], reportProblem: () => {} })).rejects.toThrow(
      "bucket name",
    );
  },
);
