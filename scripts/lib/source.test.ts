import { spawn } from "node:child_process";
import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { ensureBuild, ensureNodePackages, nodePackagesMatch, sourceDigest } from "./source.mjs";

let project: string;
beforeEach(() => {
  project = mkdtempSync(path.join(tmpdir(), "numberleaf-source-"));
});
afterEach(() => {
  rmSync(project, { recursive: true });
});

function write(file: string, content: unknown): void {
  const full = path.join(project, file);
  mkdirSync(path.dirname(full), { recursive: true });
  writeFileSync(full, typeof content === "string" ? content : JSON.stringify(content));
}

const say = () => {};

test("packages match when what npm installed is what the lock names, other systems' binaries apart", async () => {
  const one = { version: "1.0.0", integrity: "sha512-a" };
  const lock = {
    packages: {
      "": { name: "anything" },
      "node_modules/one": one,
      "node_modules/one-other-system": { version: "1.0.0", optional: true },
    },
  };
  write("package-lock.json", lock);
  expect(nodePackagesMatch(project)).toBe(false);
  write("node_modules/.package-lock.json", { packages: { "node_modules/one": one } });
  expect(nodePackagesMatch(project)).toBe(true);
  await ensureNodePackages(project, { say, run: () => Promise.reject(new Error("must not install")) });

  write("node_modules/.package-lock.json", {
    packages: { "node_modules/one": { ...one, version: "0.9.0" } },
  });
  expect(nodePackagesMatch(project)).toBe(false);
  const commands: string[][] = [];
  await ensureNodePackages(project, {
    say,
    run: async (_name, command) => {
      commands.push(command);
    },
  });
  expect(commands).toHaveLength(1);
  expect(commands[0]).toContain("ci");
});

test("the digest follows the content of what is built, not its dates, and not its tests", () => {
  write("app/root.tsx", "one");
  write("package-lock.json", {});
  const before = sourceDigest(project);
  write("app/root.tsx", "one");
  write("app/domain/money.test.ts", "a test");
  write("README.md", "words");
  expect(sourceDigest(project)).toBe(before);
  write("app/root.tsx", "two");
  expect(sourceDigest(project)).not.toBe(before);
});

test("each state of the source is built once, beside the builds before it", async () => {
  const built: string[] = [];
  const run = async (_name: string, _command: string[], options: { environment: Record<string, string> }) => {
    built.push(options.environment.BUILD_DIRECTORY ?? "");
  };
  const states = ["one", "two", "one", "three", "four", "five"];
  for (const state of states) {
    write("app/root.tsx", state);
    await ensureBuild(project, { say, run });
  }
  expect(built).toHaveLength(5);
  expect(new Set(built).size).toBe(5);
  expect(built.every((directory) => directory.startsWith("build/"))).toBe(true);
  expect(readdirSync(path.join(project, "build"))).toHaveLength(4);
});

test("a build that a web process serves is kept, however many are made after it", async () => {
  const run = async () => {};
  write("app/root.tsx", "served");
  const served = await ensureBuild(project, { say, run });
  const web = spawn(process.execPath, ["-e", "console.log('up'); setInterval(() => {}, 1000)", served], {
    stdio: ["ignore", "pipe", "inherit"],
  });
  try {
    await new Promise((resolve) => web.stdout.once("data", resolve));
    for (const state of ["one", "two", "three", "four", "five"]) {
      write("app/root.tsx", state);
      await ensureBuild(project, { say, run });
    }
    expect(readdirSync(path.join(project, "build"))).toContain(path.basename(served));
  } finally {
    web.kill("SIGKILL");
  }
});

test("a build that was interrupted is made again", async () => {
  write("app/root.tsx", "one");
  await expect(ensureBuild(project, { say, run: () => Promise.reject(new Error("killed")) })).rejects.toThrow(
    "killed",
  );
  let builds = 0;
  await ensureBuild(project, {
    say,
    run: async () => {
      builds += 1;
    },
  });
  expect(builds).toBe(1);
});
