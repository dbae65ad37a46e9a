import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { makeChildren, troubleIn } from "./children.mjs";
import { isRunning } from "./processes.mjs";

let directory: string;
let said: string[];
let failed: Promise<string>;
let children: ReturnType<typeof makeChildren>;

beforeEach(() => {
  directory = mkdtempSync(path.join(tmpdir(), "numberleaf-children-"));
  said = [];
  failed = new Promise((resolve) => {
    children = makeChildren({
      directory,
      logDirectory: path.join(directory, "logs"),
      environment: process.env,
      say: (line) => said.push(line),
      fail: resolve,
    });
  });
});
afterEach(async () => {
  await children.stop();
  rmSync(directory, { recursive: true });
});

const node = (code: string) => [process.execPath, "-e", code];
const log = (name: string) => readFileSync(path.join(directory, "logs", `${name}.log`), "utf8");

test("a command's end is awaited, and its failure tells the end of its output", async () => {
  const lines: string[] = [];
  await children.run("fine", node("console.log('one')"), {
    onLine: (line) => lines.push(line),
  });
  expect(lines).toEqual(["one"]);
  expect(log("fine")).toBe("one\n");
  await expect(children.run("bad", node("console.error('the reason'); process.exit(3)"))).rejects.toThrow(
    "bad failed (code 3):\nthe reason",
  );
});

test("a service that has to run and stops brings the rest down, with its name and log", async () => {
  children.start({ name: "storage", command: node("process.exit(7)"), phase: "services" });
  expect(await failed).toMatch(/^storage stopped by itself \(code 7\); its log is .*storage\.log$/);
});

test("a service that may be started again is, and its troubles are told", async () => {
  const count = path.join(directory, "count");
  const code = `
    const fs = require("node:fs");
    fs.appendFileSync(${JSON.stringify(count)}, "x");
    if (fs.readFileSync(${JSON.stringify(count)}, "utf8") === "xx") {
      process.on("SIGTERM", () => process.exit(0));
      console.log(JSON.stringify({ level: 30, msg: "quiet" }));
      console.log(JSON.stringify({ level: 50, msg: "second try", err: { message: "loud" } }));
      setInterval(() => {}, 1000);
    }`;
  const told = new Promise<void>((resolve) => {
    const push = said.push.bind(said);
    said.push = (...lines) => {
      if (lines.some((line) => line.includes("loud"))) resolve();
      return push(...lines);
    };
  });
  children.start({ name: "web", command: node(code), phase: "work", restart: true });
  await told;
  expect(said[0]).toMatch(/^web stopped by itself \(code 0\) and is started again/);
  expect(said[1]).toBe("web: second try: loud");
  expect(said).toHaveLength(2);
});

test("the database is asked to stop only after those that use it have ended", async () => {
  const order = path.join(directory, "order");
  const service = (name: string, signal: string) =>
    node(`
      const fs = require("node:fs");
      process.on("${signal}", () => {
        fs.appendFileSync(${JSON.stringify(order)}, "${name} ");
        setTimeout(() => { fs.appendFileSync(${JSON.stringify(order)}, "${name}-ended "); process.exit(0); }, 50);
      });
      console.log("up");
      setInterval(() => {}, 1000);`);
  const started = ["database", "services", "work"].map((phase) => {
    const command = service(phase, phase === "database" ? "SIGINT" : "SIGTERM");
    return children.start({ name: phase, command, phase: phase as "database" | "services" | "work" });
  });
  await expect
    .poll(() => ["database", "services", "work"].map(log), { timeout: 10_000 })
    .toEqual(["up\n", "up\n", "up\n"]);
  await children.stop();
  expect(readFileSync(order, "utf8")).toBe(
    "work work-ended services services-ended database database-ended ",
  );
  for (const { pid } of started) expect(isRunning(pid)).toBe(false);
});

test("nothing is started any more once stopping has begun", async () => {
  await children.stop();
  await expect(children.run("late", node(""))).rejects.toThrow("stopped while starting");
});

test("only warnings and errors of structured logs are told, and plain lines of standard error", () => {
  expect(troubleIn('{"level":30,"msg":"listening"}', true)).toBeUndefined();
  expect(troubleIn('{"level":40,"msg":"slow"}', false)).toBe("slow");
  expect(troubleIn('{"level":50,"err":"refused","msg":"queue"}', true)).toBe("queue: refused");
  expect(troubleIn("{not json", true)).toBe("{not json");
  expect(troubleIn("plain", false)).toBeUndefined();
  expect(troubleIn("  ", true)).toBeUndefined();
});
