import pg from "pg";
import { afterAll, expect, test } from "vitest";
import { assertTestDatabaseName, testDatabase } from "../support/database";

const database = await testDatabase();
const owner = new pg.Client({ connectionString: database.ownerUrl });
const app = new pg.Client({ connectionString: database.url });
await owner.connect();
await app.connect();

afterAll(async () => {
  await app.end();
  await owner.end();
});

async function count(table: string): Promise<number> {
  const { rows } = await owner.query<{ count: string }>(`select count(*)::text as count from ${table}`);
  return Number(rows[0]?.count);
}

test("a reset takes the rows of a test away and keeps those of the migrations, with connections open", async () => {
  const queues = await count("pgboss.queue");
  expect(queues).toBeGreaterThan(1);
  await app.query("insert into webhook_events (id, kind) values ('evt_1', 'anything')");
  await owner.query("delete from pgboss.queue where name = 'send-email'");

  await database.reset();

  expect(await count("webhook_events")).toBe(0);
  expect(await count("pgboss.queue")).toBe(queues);
  const { rows } = await app.query("select 1 as one");
  expect(rows).toEqual([{ one: 1 }]);
});

test("the application's role owns nothing and makes nothing", async () => {
  await expect(app.query("create table mine (id int)")).rejects.toMatchObject({ code: "42501" });
  await expect(app.query("drop table webhook_events")).rejects.toMatchObject({ code: "42501" });
  await expect(app.query("delete from ledger_entries")).rejects.toMatchObject({ code: "42501" });
});

test("a database that is not named for tests is refused", () => {
  expect(() => assertTestDatabaseName("numberleaf")).toThrow("not the name of a test database");
  expect(() => assertTestDatabaseName("contest")).toThrow("not the name of a test database");
  expect(() => assertTestDatabaseName("nl_someone_test")).not.toThrow();
  expect(process.env.DATABASE_URL).toBe(database.url);
});
