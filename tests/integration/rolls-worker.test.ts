import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { db, pool } from "db/client.server";
import { proofs } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { afterAll, afterEach, beforeAll, beforeEach, expect, it } from "vitest";
import type { Actor } from "~/domain/people/allowed";
import { stopQueue } from "~/platform/queue.server";
import type { StorageServer } from "../../storage-fake/server";
import { testDatabase } from "../support/database";
import { tiff } from "../support/pictures";
import { makeActor, makeTestRoll, scanRow, sendFiles, startStorage } from "../support/rolls";
import { makeStudio } from "../support/shop";

/*
 * The worker as the process it is in life: killed in the middle of a proof, and asked to stop in the middle of one.
 */
let storage: StorageServer;
let photographer: Actor;
let rollId: string;
const workers: ChildProcess[] = [];

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
  rollId = await makeTestRoll(photographer, 1);
});
afterEach(async () => {
  for (const worker of workers.splice(0)) await end(worker, "SIGKILL");
});

async function startWorker(): Promise<ChildProcess> {
  const worker = spawn(process.execPath, ["--import", "tsx", "scripts/worker.ts"], {
    env: { ...process.env, LOG_LEVEL: "info" },
    stdio: ["ignore", "pipe", "pipe"],
  });
  workers.push(worker);
  let said = "";
  await new Promise<void>((resolve, reject) => {
    const listen = (piece: Buffer) => {
      said += piece.toString();
      if (said.includes("worker ready")) resolve();
    };
    worker.stdout?.on("data", listen);
    worker.stderr?.on("data", listen);
    worker.on("exit", () => reject(new Error(`the worker ended:\n${said}`)));
  });
  return worker;
}

async function end(worker: ChildProcess, signal: NodeJS.Signals): Promise<void> {
  if (worker.exitCode !== null || worker.signalCode !== null) return;
  const gone = once(worker, "exit");
  worker.kill(signal);
  await gone;
}

const state = async (scanId: string) => {
  const row = await scanRow(scanId);
  return `${row.state} ${row.proofState}`;
};
const patient = { timeout: 120_000, interval: 50 };

/** Large enough that there is time to kill the worker while it builds the proofs. */
const large = tiff({
  width: 2_600,
  height: 2_600,
  channels: 1,
  bits: 16,
  value: (x, y) => 12 * x + 9 * y + ((x * y) % 17) * 200,
});

const tries = async () =>
  (
    await pool.query<{ retry_count: number }>(
      "select retry_count from pgboss.job where name = 'build-proofs'",
    )
  ).rows.map((row) => row.retry_count);

it("a proof that was being built when the worker was killed is built by the next one", async () => {
  const [scanId = ""] = await sendFiles(photographer, rollId, [{ name: "a.tif", contents: large }]);
  const first = await startWorker();
  await expect.poll(() => state(scanId), patient).toBe("ready working");
  await end(first, "SIGKILL");
  expect(await state(scanId)).toBe("ready working");
  expect(await db.select().from(proofs).where(eq(proofs.scanId, scanId))).toEqual([]);

  await startWorker();
  await expect.poll(() => state(scanId), patient).toBe("ready ready");
  expect(await db.select().from(proofs).where(eq(proofs.scanId, scanId))).toHaveLength(9);
  expect(await tries()).toEqual([1]);
}, 240_000);

it("a worker that is asked to stop ends within ten seconds, and its job is not lost nor counted as a failed try", async () => {
  const files = ["a.tif", "b.tif"].map((name) => ({ name, contents: large }));
  const sent = await sendFiles(photographer, rollId, files);
  const first = await startWorker();
  await expect
    .poll(async () => (await Promise.all(sent.map(state))).includes("ready working"), patient)
    .toBe(true);
  const asked = performance.now();
  await end(first, "SIGTERM");
  expect(performance.now() - asked).toBeLessThan(10_000);
  expect(first.exitCode).toBe(0);
  const { rows } = await pool.query<{ n: number }>(
    "select count(*)::int as n from pgboss.job where state = 'active' and name in ('check-scan', 'build-proofs')",
  );
  expect(rows[0]?.n).toBe(0);

  await startWorker();
  await expect
    .poll(async () => new Set(await Promise.all(sent.map(state))), patient)
    .toEqual(new Set(["ready ready"]));
  expect(await tries()).toEqual([0, 0]);
}, 240_000);
