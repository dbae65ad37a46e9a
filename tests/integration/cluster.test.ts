import { type ChildProcess, spawn } from "node:child_process";
import { chmodSync, existsSync, mkdtempSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import pg from "pg";
import { afterEach, beforeEach, expect, test } from "vitest";
import {
  type Cluster,
  dropDatabase,
  endLeftoverServer,
  openCluster,
  removeCluster,
  setUpDatabase,
  waitForCluster,
} from "../../scripts/lib/cluster.mjs";
import { freePorts } from "../../scripts/lib/ports.mjs";
import { isRunning, postgresProcessesIn } from "../../scripts/lib/processes.mjs";

const superuserPassword = "superuser-secret";
const passwords = { ownerPassword: "owner-secret", appPassword: "app-secret" };

let parent: string;
let port: number;

beforeEach(async () => {
  parent = mkdtempSync(path.join(tmpdir(), "numberleaf-cluster-"));
  // As root the server runs as another user, who has to pass through here.
  chmodSync(parent, 0o711);
  port = Number((await freePorts()).POSTGRES_PORT);
});
afterEach(async () => {
  await endLeftoverServer(path.join(parent, "pg"));
  removeCluster(path.join(parent, "pg"));
  rmSync(parent, { recursive: true });
});

const open = () =>
  openCluster({
    baseDirectory: path.join(parent, "pg"),
    port,
    superuserPassword,
    durable: false,
    elsewhere: tmpdir(),
  });

async function start(cluster: Cluster): Promise<ChildProcess> {
  const [program = "", ...args] = cluster.command;
  const server = spawn(program, args, { cwd: "/", stdio: "ignore", detached: true });
  await waitForCluster(cluster, server.pid ?? 0, () => isRunning(server.pid ?? 0));
  return server;
}

async function asRole(role: string, password: string, statement: string, database = "numberleaf") {
  const client = new pg.Client({ host: "127.0.0.1", port, user: role, password, database });
  await client.connect();
  try {
    return (await client.query(statement)).rows;
  } finally {
    await client.end();
  }
}

test("a new cluster takes only the passwords of its roles, on loopback", { timeout: 60_000 }, async () => {
  const cluster = open();
  await start(cluster);
  setUpDatabase(cluster, { port, superuserPassword, ...passwords });
  // Again, as at every start.
  setUpDatabase(cluster, { port, superuserPassword, ...passwords });
  expect(await asRole("numberleaf_owner", "owner-secret", "create table kept (id int)")).toEqual([]);
  expect(await asRole("numberleaf_app", "app-secret", "select current_user::text as me")).toEqual([
    { me: "numberleaf_app" },
  ]);
  await expect(asRole("numberleaf_app", "app-secret", "create table own (id int)")).rejects.toMatchObject({
    code: "42501",
  });
  for (const [role, password] of [
    ["numberleaf_app", "wrong"],
    ["postgres", "wrong"],
  ] as const) {
    await expect(asRole(role, password, "select 1")).rejects.toMatchObject({ code: "28P01" });
  }
  expect(await asRole("postgres", superuserPassword, "show listen_addresses", "postgres")).toEqual([
    { listen_addresses: "127.0.0.1" },
  ]);
});

test("a server that was left running is ended, and its data is there again", {
  timeout: 60_000,
}, async () => {
  const first = open();
  const left = await start(first);
  setUpDatabase(first, { port, superuserPassword, ...passwords });
  await asRole("numberleaf_owner", "owner-secret", "create table kept as select 7 as n");
  await endLeftoverServer(path.join(parent, "pg"));
  expect(isRunning(left.pid ?? 0)).toBe(false);
  expect(postgresProcessesIn(first.directory)).toEqual([]);
  await start(open());
  expect(await asRole("numberleaf_owner", "owner-secret", "select n from kept")).toEqual([{ n: 7 }]);
  dropDatabase(first, { port, superuserPassword });
  setUpDatabase(first, { port, superuserPassword, ...passwords });
  await expect(asRole("numberleaf_owner", "owner-secret", "select n from kept")).rejects.toMatchObject({
    code: "42P01",
  });
});

test("after kill -9 of the server, a lock file whose number another program has now is no obstacle", {
  timeout: 60_000,
}, async () => {
  const cluster = open();
  const server = await start(cluster);
  const ended = new Promise((resolve) => server.once("exit", resolve));
  process.kill(server.pid ?? 0, "SIGKILL");
  await ended;
  const lockFile = path.join(cluster.directory, "postmaster.pid");
  expect(existsSync(lockFile)).toBe(true);
  // This test's own process, which runs, is not PostgreSQL and must be left alone.
  const lines = readFileSync(lockFile, "utf8").split("\n");
  writeFileSync(lockFile, [String(process.pid), ...lines.slice(1)].join("\n"));
  await endLeftoverServer(path.join(parent, "pg"));
  await start(open());
  expect(await asRole("postgres", superuserPassword, "select 1 as one", "postgres")).toEqual([{ one: 1 }]);
});

test("a cluster whose making was interrupted is made anew", { timeout: 60_000 }, async () => {
  const cluster = open();
  // What a kill in the middle of initdb leaves: the folder under its temporary name.
  renameSync(cluster.directory, path.join(path.dirname(cluster.directory), "unfinished"));
  const again = open();
  await start(again);
  expect(await asRole("postgres", superuserPassword, "select 1 as one", "postgres")).toEqual([{ one: 1 }]);
});

test("as root, where the database's user cannot enter, the data lies elsewhere and is found again", {
  timeout: 60_000,
}, async () => {
  chmodSync(parent, 0o700);
  const cluster = open();
  // An ordinary user runs the server itself and enters its own folder.
  const expected = process.getuid?.() === 0 ? path.join(tmpdir(), "numberleaf-postgres-") : parent;
  expect(cluster.directory.startsWith(expected)).toBe(true);
  expect(open().directory).toBe(cluster.directory);
  await start(cluster);
  await endLeftoverServer(path.join(parent, "pg"));
  removeCluster(path.join(parent, "pg"));
  expect(existsSync(cluster.directory)).toBe(false);
});
