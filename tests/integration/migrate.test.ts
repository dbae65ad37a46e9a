import { cp, mkdtemp, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import path from "node:path";
import pg from "pg";
import { afterEach, beforeEach, expect, test } from "vitest";
import { QUEUES } from "../../app/jobs/queues";
import { MIGRATIONS_FOLDER, migrate } from "../../scripts/migrate";
import { bareDatabase } from "../support/database";

let database: Awaited<ReturnType<typeof bareDatabase>>;
let folder: string;

beforeEach(async () => {
  database = await bareDatabase();
  folder = await mkdtemp(path.join(tmpdir(), "numberleaf-migrations-"));
  await cp(MIGRATIONS_FOLDER, folder, { recursive: true });
});
afterEach(async () => {
  await database.drop();
  await rm(folder, { recursive: true });
});

const run = () => migrate({ ...database, migrationsFolder: folder });

async function journal(): Promise<{ entries: { tag: string; when: number; idx: number }[] }> {
  return JSON.parse(await readFile(path.join(folder, "meta", "_journal.json"), "utf8"));
}

async function addMigration(when: number): Promise<void> {
  const before = await journal();
  before.entries.push({ idx: before.entries.length, when, tag: "9999_more" });
  await writeFile(path.join(folder, "meta", "_journal.json"), JSON.stringify(before));
  await writeFile(path.join(folder, "9999_more.sql"), "create table more (id int);");
}

async function rows(text: string): Promise<unknown[]> {
  const client = new pg.Client({ connectionString: database.ownerUrl });
  await client.connect();
  try {
    return (await client.query(text)).rows;
  } finally {
    await client.end();
  }
}

test("two at once both succeed, one of them doing the work, and a third finds nothing to do", async () => {
  const { entries } = await journal();
  const both = await Promise.all([run(), run()]);
  expect(both.map((result) => result.applied).sort()).toEqual([0, entries.length]);
  expect(await run()).toEqual({ applied: 0 });
  const queues = await rows("select name from pgboss.queue where name not like '\\_\\_%' order by name");
  expect(queues).toEqual(QUEUES.map(({ name }) => ({ name })).sort((a, b) => (a.name < b.name ? -1 : 1)));
});

test("changed limits of a queue reach the queue that is there", async () => {
  await run();
  await rows("update pgboss.queue set retry_limit = 77");
  await run();
  expect(await rows("select 1 from pgboss.queue where retry_limit = 77 and name not like '\\_\\_%'")).toEqual(
    [],
  );
});

test("a migration added later is applied, one that was changed or is dated too early is refused", async () => {
  await run();
  const last = (await journal()).entries.at(-1)?.when ?? 0;
  await addMigration(last + 1);
  expect(await run()).toEqual({ applied: 1 });
  await writeFile(path.join(folder, "9999_more.sql"), "create table more (id int, name text);");
  await expect(run()).rejects.toThrow(/changed after they were applied.*9999_more/);
});

test("a migration that Drizzle would pass over for its date is refused", async () => {
  await run();
  await addMigration(1);
  await expect(run()).rejects.toThrow(/dated before the last applied one: 9999_more/);
});

test("a database from a newer version of the program is left alone", async () => {
  const last = (await journal()).entries.at(-1)?.when ?? 0;
  const before = await readFile(path.join(folder, "meta", "_journal.json"), "utf8");
  await addMigration(last + 1);
  await run();
  await writeFile(path.join(folder, "meta", "_journal.json"), before);
  await expect(run()).rejects.toThrow("it is older than the database");
});
