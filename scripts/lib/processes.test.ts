import { type ChildProcess, spawn } from "node:child_process";
import { afterEach, expect, test } from "vitest";
import { endLeftovers, INSTANCE_VARIABLE, isRunning, processesOfInstance } from "./processes.mjs";

const children: ChildProcess[] = [];
afterEach(() => {
  for (const child of children.splice(0)) child.kill("SIGKILL");
});

/** A process that says when it is ready to be signalled. */
async function launch(code: string, instance: string): Promise<number> {
  const child = spawn(process.execPath, ["-e", `${code}; setInterval(() => {}, 1000); console.log("up")`], {
    stdio: ["ignore", "pipe", "inherit"],
    env: { ...process.env, [INSTANCE_VARIABLE]: instance },
  });
  children.push(child);
  await new Promise((resolve) => child.stdout?.once("data", resolve));
  return child.pid ?? 0;
}

test("only the processes of that data folder are found and ended", async () => {
  const mine = await launch("", "/nowhere/mine");
  const other = await launch("", "/nowhere/mine-too");
  expect(processesOfInstance("/nowhere/mine")).toEqual([mine]);
  expect(await endLeftovers("/nowhere/mine")).toBe(1);
  expect(isRunning(mine)).toBe(false);
  expect(isRunning(other)).toBe(true);
  expect(await endLeftovers("/nowhere/mine")).toBe(0);
});

test("whoever does not end when asked is ended by force", { timeout: 20_000 }, async () => {
  const stubborn = await launch("process.on('SIGTERM', () => {})", "/nowhere/stubborn");
  expect(await endLeftovers("/nowhere/stubborn")).toBe(1);
  expect(isRunning(stubborn)).toBe(false);
});

test("this process and those that started it are never taken for leftovers", () => {
  const inherited = process.env[INSTANCE_VARIABLE];
  expect(processesOfInstance(inherited ?? "/nowhere/at/all")).not.toContain(process.pid);
  expect(isRunning(process.pid)).toBe(true);
  expect(isRunning(2 ** 22 + 1)).toBe(false);
});
