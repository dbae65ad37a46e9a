import { chmodSync, mkdtempSync, readFileSync, rmSync, statSync } from "node:fs";
import net from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { endLeftoverServer, removeCluster } from "../../scripts/lib/cluster.mjs";
import { freePorts, type PortName } from "../../scripts/lib/ports.mjs";
import {
  endLeftovers,
  isRunning,
  postgresProcessesIn,
  processesOfInstance,
} from "../../scripts/lib/processes.mjs";
import { type Shop, startShop } from "../../scripts/lib/shop.mjs";

/*
 * The start command as a person meets it, on studios without demo data.
 */

type Instance = { directory: string; ports: Record<PortName, string> };

const instances: Instance[] = [];
const shops: Shop[] = [];
let instance: Instance;

beforeEach(async () => {
  instance = await newInstance();
});
afterEach(async () => {
  for (const shop of shops.splice(0)) await shop.stop();
  for (const { directory } of instances.splice(0)) {
    await endLeftovers(directory);
    await endLeftoverServer(path.join(directory, "pg"));
    removeCluster(path.join(directory, "pg"));
    rmSync(directory, { recursive: true, force: true });
  }
});

async function newInstance(): Promise<Instance> {
  const made = {
    directory: mkdtempSync(path.join(tmpdir(), "numberleaf-start-")),
    ports: await freePorts(),
  };
  // As root, the database's user has to pass through.
  chmodSync(made.directory, 0o711);
  instances.push(made);
  return made;
}

function start({ directory, ports }: Instance, args = ["--empty"], more: Record<string, string> = {}): Shop {
  const shop = startShop({ environment: { ...ports, DATA_DIR: directory, ...more }, args });
  shops.push(shop);
  return shop;
}

/** Everything of an instance that runs. */
function running({ directory }: Instance): number[] {
  return [...processesOfInstance(directory), ...postgresProcessesIn(path.join(directory, "pg", "data"))];
}

async function answersOn(address: string): Promise<number> {
  return (await fetch(`${address}/readyz`)).status;
}

test("a new studio is told its address and its code, and starts and stops in time", async () => {
  const first = start(instance);
  const address = await first.ready;
  expect(address).toBe(`http://127.0.0.1:${instance.ports.PORT}`);
  expect(first.output().trimEnd().split("\n").at(-1)).toBe(`ready ${address}`);
  expect(first.output()).toContain(`${address}/setup`);
  const code = /^ {2}(([2-9a-z]{5}-){3}[2-9a-z]{5})$/m.exec(first.output())?.[1];
  expect(code).toBeDefined();
  expect(statSync(path.join(instance.directory, "secrets.json")).mode & 0o777).toBe(0o600);
  expect(await answersOn(address)).toBe(200);

  const stopped = await first.stop("SIGINT");
  expect(stopped.code).toBe(0);
  expect(stopped.milliseconds).toBeLessThan(10_000);
  expect(running(instance)).toEqual([]);

  // Without --empty it stays the studio it is, with the same code until that is used.
  const since = Date.now();
  const second = start(instance, []);
  await second.ready;
  expect(Date.now() - since).toBeLessThan(10_000);
  expect(second.output()).toContain(code);
  expect(second.output()).not.toContain("Demo accounts");
});

test("a second start on the same folder says where the first one is, and leaves it alone", async () => {
  const first = start(instance);
  const address = await first.ready;
  const second = start(instance);
  await expect(second.ready).rejects.toThrow(`It is already running on ${instance.directory}, at ${address}`);
  expect(await second.ended).toBe(1);
  expect(await answersOn(address)).toBe(200);
});

test("two instances run side by side, and stopping one leaves the other", async () => {
  const other = await newInstance();
  const shop = start(instance);
  const otherShop = start(other);
  const [address, otherAddress] = await Promise.all([shop.ready, otherShop.ready]);
  expect([await answersOn(address), await answersOn(otherAddress)]).toEqual([200, 200]);
  await shop.stop();
  expect(running(instance)).toEqual([]);
  expect(await answersOn(otherAddress)).toBe(200);
});

test("a taken port is named before anything is started", async () => {
  const server = net.createServer();
  await new Promise<void>((resolve) => {
    server.listen(Number(instance.ports.STRIPE_PORT), "127.0.0.1", resolve);
  });
  const shop = start(instance);
  await expect(shop.ready).rejects.toThrow(
    `Port ${instance.ports.STRIPE_PORT} (STRIPE_PORT) is taken by another program.`,
  );
  expect(running(instance)).toEqual([]);
  await new Promise((resolve) => server.close(resolve));
});

test("killed in one stroke, all of it, it starts again", async () => {
  const shop = start(instance);
  await shop.ready;
  const all = running(instance);
  expect(all.length).toBeGreaterThanOrEqual(6);
  for (const pid of [shop.pid, ...all]) {
    if (isRunning(pid)) process.kill(pid, "SIGKILL");
  }
  expect(await shop.ended).toBe("SIGKILL");
  const again = start(instance);
  expect(await answersOn(await again.ready)).toBe(200);
});

test("killed while it is still starting, it starts again", async () => {
  const shop = start(instance);
  await expect.poll(() => running(instance).length, { timeout: 60_000, interval: 20 }).toBeGreaterThan(1);
  process.kill(shop.pid, "SIGKILL");
  await shop.ended;
  const again = start(instance);
  expect(await answersOn(await again.ready)).toBe(200);
});

test("a killed web process is started again, and a killed service brings everything down in words", async () => {
  const shop = start(instance);
  const address = await shop.ready;
  const find = (script: string) =>
    processesOfInstance(instance.directory).find((pid) =>
      readFileSync(`/proc/${pid}/cmdline`, "utf8").includes(script),
    ) ?? 0;
  const web = find("scripts/serve.ts");
  process.kill(web, "SIGKILL");
  await expect.poll(() => find("scripts/serve.ts"), { timeout: 30_000 }).not.toBe(web);
  await expect.poll(() => answersOn(address).catch(() => 0), { timeout: 30_000, interval: 100 }).toBe(200);
  expect(shop.output()).toContain("web stopped by itself (signal SIGKILL) and is started again");

  process.kill(find("storage-fake/main.ts"), "SIGKILL");
  expect(await shop.ended).toBe(1);
  expect(shop.output()).toContain("storage stopped by itself (signal SIGKILL)");
  expect(running(instance)).toEqual([]);
});

test("production is refused, and so are words it does not know", async () => {
  const production = start(instance, [], { NUMBERLEAF_MODE: "production" });
  await expect(production.ready).rejects.toThrow("npm run serve");
  const unknown = start(instance, ["--emty"]);
  await expect(unknown.ready).rejects.toThrow("npm start does not know --emty");
});
