import { randomUUID } from "node:crypto";
import pg from "pg";
import { migrate } from "../../scripts/migrate";

/*
 * A real PostgreSQL for integration tests. One template database is migrated for each run of the suite; every
 * worker clones it once and empties its clone between test files. `npm test` starts a cluster for it; for
 * a single file, point TEST_POSTGRES_URL at any cluster as superuser and run
 *
 *   TEST_POSTGRES_URL=postgres://postgres@127.0.0.1:5432/postgres npx vitest run --project integration PATH
 */

/** Roles of test databases only, so that a cluster used for something else too keeps its own. */
const OWNER_ROLE = "numberleaf_test_owner";
const APP_ROLE = "numberleaf_test_app";
/** These roles own nothing but databases that are dropped after the run. */
const ROLE_PASSWORD = "only-for-tests";

/** Schema of the clone's own bookkeeping, see `RESET_FUNCTION`. */
const SNAPSHOT_SCHEMA = "test_snapshot";

export type TestDatabase = {
  /** Connects as the application's role, which owns no table: what the web and worker processes would use. */
  url: string;
  /** Connects as the owner of the tables. */
  ownerUrl: string;
  /** Connects as the cluster's superuser. */
  superuserUrl: string;
  /**
   * Puts the database back to the state just after the migrations, whatever triggers say; open connections stay
   * usable. Takes some milliseconds. Nothing else may be using the database meanwhile.
   */
  reset(): Promise<void>;
};

let worker: Promise<TestDatabase> | undefined;

/**
 * This worker's own database, made on first use. It is empty (as migrated) at the beginning of every test
 * file of the `integration` project, and `DATABASE_URL` already names it there; inside a file, call `reset()` in
 * `beforeEach` where tests must not see each other's rows.
 */
export function testDatabase(): Promise<TestDatabase> {
  worker ??= openWorkerDatabase();
  return worker;
}

async function openWorkerDatabase(): Promise<TestDatabase> {
  const template = required("TEST_TEMPLATE_DATABASE");
  const name = template.replace("_template_", `_w${process.env.VITEST_POOL_ID ?? "0"}_`);
  assertTestDatabaseName(name);
  const superuser = required("TEST_POSTGRES_URL");
  const database: TestDatabase = {
    url: connectionUrl(superuser, name, APP_ROLE),
    ownerUrl: connectionUrl(superuser, name, OWNER_ROLE),
    superuserUrl: connectionUrl(superuser, name),
    reset: () => withClient(connectionUrl(superuser, name), (client) => query(client, "select test_reset()")),
  };
  const made = await withClient(superuser, async (client) => {
    const { rowCount } = await client.query("select from pg_database where datname = $1", [name]);
    if (rowCount === 1) return false;
    await client.query(`create database ${quoted(name)} template ${quoted(template)} owner ${OWNER_ROLE}`);
    return true;
  });
  if (!made) await database.reset();
  return database;
}

/**
 * One more database without anything in it, for tests of the migration itself.
 *
 * @returns its owner's connection, the application's role, and a function that drops it.
 */
export async function bareDatabase(): Promise<{ ownerUrl: string; appRole: string; drop(): Promise<void> }> {
  const superuser = required("TEST_POSTGRES_URL");
  const name = `${required("TEST_TEMPLATE_DATABASE").replace("_template_", "_bare_")}_${randomUUID().slice(0, 8)}`;
  assertTestDatabaseName(name);
  await withClient(superuser, (client) =>
    query(client, `create database ${quoted(name)} owner ${OWNER_ROLE}`),
  );
  return {
    ownerUrl: connectionUrl(superuser, name, OWNER_ROLE),
    appRole: APP_ROLE,
    drop: () =>
      withClient(superuser, (client) =>
        query(client, `drop database if exists ${quoted(name)} with (force)`),
      ),
  };
}

/**
 * Makes the roles and a migrated template database of one run, named in TEST_TEMPLATE_DATABASE for the workers.
 *
 * @returns a function that drops the template and every clone of it.
 */
export async function makeTemplateDatabase(): Promise<() => Promise<void>> {
  const superuser = process.env.TEST_POSTGRES_URL;
  if (!superuser) {
    throw new Error(
      "Integration tests need a PostgreSQL cluster: run `npm test`, or set TEST_POSTGRES_URL to the superuser's connection.",
    );
  }
  const run = `${Date.now().toString(36)}${process.pid.toString(36)}`;
  const template = `numberleaf_test_template_${run}`;
  assertTestDatabaseName(template);
  await withClient(superuser, async (client) => {
    // Two runs on one cluster may both want to make the roles.
    await client.query("select pg_advisory_lock(7025002)");
    for (const role of [OWNER_ROLE, APP_ROLE]) {
      const { rowCount } = await client.query("select from pg_roles where rolname = $1", [role]);
      if (rowCount === 0) await client.query(`create role ${role} login password '${ROLE_PASSWORD}'`);
    }
    await client.query(`create database ${quoted(template)} owner ${OWNER_ROLE}`);
  });
  await migrate({ ownerUrl: connectionUrl(superuser, template, OWNER_ROLE), appRole: APP_ROLE });
  await withClient(connectionUrl(superuser, template), takeSnapshot);
  process.env.TEST_TEMPLATE_DATABASE = template;

  return () =>
    withClient(superuser, async (client) => {
      const { rows } = await client.query<{ datname: string }>(
        "select datname from pg_database where datname like 'numberleaf\\_test\\_%' and datname like $1",
        [`%\\_${run}`],
      );
      for (const { datname } of rows) {
        assertTestDatabaseName(datname);
        await client.query(`drop database if exists ${quoted(datname)} with (force)`);
      }
    });
}

/** Throws unless a database is named for tests: nothing here may ever empty or drop another one. */
export function assertTestDatabaseName(name: string): void {
  if (!/(^|_)test(_|$)/.test(name)) throw new Error(`"${name}" is not the name of a test database`);
}

/**
 * Remembers the rows that migrations themselves put in (the queue's own tables, reference data), so that a reset can
 * bring them back, and adds the function that resets. Rows are deleted rather than truncated: with the few rows of
 * a test that is several times faster. `session_replication_role` keeps triggers and foreign keys out of it.
 */
async function takeSnapshot(client: pg.Client): Promise<void> {
  await client.query(`create schema ${SNAPSHOT_SCHEMA}`);
  const { rows } = await client.query<{ name: string }>(
    `select format('%I.%I', n.nspname, c.relname) as name
       from pg_class c join pg_namespace n on n.oid = c.relnamespace
      where c.relkind = 'r' and n.nspname in ('public', 'pgboss') order by 1`,
  );
  for (const { name } of rows) {
    const filled = await client.query(`select from ${name} limit 1`);
    if (filled.rowCount === 1) {
      await client.query(`create table ${SNAPSHOT_SCHEMA}.${quoted(name)} as table ${name}`);
    }
  }
  await client.query(
    `create table ${SNAPSHOT_SCHEMA}.sequences as
     select format('%I.%I', schemaname, sequencename) as name, coalesce(last_value, start_value) as value,
            last_value is not null as called
       from pg_sequences where schemaname in ('public', 'pgboss')`,
  );
  await client.query(RESET_FUNCTION);
}

const RESET_FUNCTION = `
  create function public.test_reset() returns void language plpgsql as $$
  declare
    t text;
    filled boolean;
  begin
    set local session_replication_role = replica;
    for t in
      select format('%I.%I', n.nspname, c.relname)
        from pg_class c join pg_namespace n on n.oid = c.relnamespace
       where c.relkind = 'r' and n.nspname in ('public', 'pgboss')
    loop
      execute 'select exists (select from ' || t || ')' into filled;
      if filled then execute 'delete from ' || t; end if;
      if to_regclass(format('${SNAPSHOT_SCHEMA}.%I', t)) is not null then
        execute format('insert into %s overriding system value table ${SNAPSHOT_SCHEMA}.%I', t, t);
      end if;
    end loop;
    perform setval(s.name::regclass, s.value, s.called) from ${SNAPSHOT_SCHEMA}.sequences s;
  end
  $$`;

function required(name: string): string {
  const value = process.env[name];
  if (!value) throw new Error(`${name} is not set: this belongs in the integration project of Vitest`);
  return value;
}

function connectionUrl(superuserUrl: string, database: string, role?: string): string {
  assertTestDatabaseName(database);
  const url = new URL(superuserUrl);
  url.pathname = `/${database}`;
  if (role !== undefined) {
    url.username = role;
    url.password = ROLE_PASSWORD;
  }
  return url.href;
}

function quoted(identifier: string): string {
  return `"${identifier.replaceAll('"', '""')}"`;
}

async function query(client: pg.Client, text: string): Promise<void> {
  await client.query(text);
}

async function withClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url, connectionTimeoutMillis: 10_000 });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}
