import { spawn } from "node:child_process";
import { mkdtempSync, rmSync, symlinkSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { lockNote, tryLock, withLock } from "./locks.mjs";

let directory: string;
beforeEach(() => {
  directory = mkdtempSync(path.join(tmpdir(), "numberleaf-locks-"));
});
afterEach(() => {
  rmSync(directory, { recursive: true });
});

test("one holds the lock, the other reads its note, and it can be had again", async () => {
  const lock = await tryLock("instance", directory, "http://127.0.0.1:3000");
  expect(await tryLock("instance", directory)).toBeUndefined();
  expect(await tryLock("build", directory)).toBeDefined();
  const link = `${directory}-link`;
  symlinkSync(directory, link);
  expect(await lockNote("instance", link)).toBe("http://127.0.0.1:3000");
  rmSync(link);
  lock?.release();
  expect(await lockNote("instance", directory)).toBeUndefined();
  (await tryLock("instance", directory))?.release();
});

test("a killed process holds no lock", async () => {
  const code = `
    const { tryLock } = await import(${JSON.stringify(new URL("./locks.mjs", import.meta.url).href)});
    await tryLock("instance", ${JSON.stringify(directory)}, "child");
    console.log("locked");
    setInterval(() => {}, 1000);`;
  const child = spawn(process.execPath, ["--input-type=module", "-e", code], {
    stdio: ["ignore", "pipe", "inherit"],
  });
  await new Promise((resolve) => child.stdout.once("data", resolve));
  expect(await lockNote("instance", directory)).toBe("child");
  const ended = new Promise((resolve) => child.once("exit", resolve));
  child.kill("SIGKILL");
  await ended;
  const lock = await tryLock("instance", directory);
  expect(lock).toBeDefined();
  lock?.release();
});

test("work under one lock never overlaps", async () => {
  let inside = 0;
  let most = 0;
  const work = async () => {
    inside += 1;
    most = Math.max(most, inside);
    await new Promise((resolve) => setImmediate(resolve));
    inside -= 1;
  };
  await Promise.all(Array.from({ length: 5 }, () => withLock("build", directory, work)));
  expect(most).toBe(1);
});
