import { readFile } from "node:fs/promises";
import { fileURLToPath, pathToFileURL } from "node:url";
import { readMigrationFiles } from "drizzle-orm/migrator";
import { drizzle } from "drizzle-orm/node-postgres";
import { migrate as applyMigrations } from "drizzle-orm/node-postgres/migrator";
import pg from "pg";
import PgBoss from "pg-boss";
import { QUEUES } from "../app/jobs/queues";
import { grantStatements } from "../db/grants";

/** Any number, as long as no other program uses it in the same database. */
const MIGRATION_LOCK = 7_025_001;

/** pg-boss makes this queue itself when its scheduler starts, which the application's role may not. */
const SCHEDULER_QUEUE = "__pgboss__send-it";

export type MigrateOptions = {
  /** Connection of the role that owns the tables. */
  ownerUrl: string;
  /** Name of the role the application connects as; it must exist. */
  appRole: string;
  /** Folder with Drizzle's migrations; the project's own unless given. */
  migrationsFolder?: string;
};

/** The project's own migrations. */
export const MIGRATIONS_FOLDER = fileURLToPath(new URL("../db/migrations", import.meta.url));

/**
 * Brings a database up to date: tables, the queue's schema and queues, and the application role's privileges.
 * May be run at any time and by several processes at once; the later ones wait and then find nothing to do.
 *
 * @returns how many migrations were applied.
 * @throws if the database has had a migration that the folder does not have, or has it in another wording, or
 *   if Drizzle passed one over because its date is older than the last one applied.
 */
export async function migrate(options: MigrateOptions): Promise<{ applied: number }> {
  const migrationsFolder = options.migrationsFolder ?? MIGRATIONS_FOLDER;
  const client = new pg.Client({
    connectionString: options.ownerUrl,
    application_name: "numberleaf migrate",
    connectionTimeoutMillis: 10_000,
  });
  await client.connect();
  try {
    // Ends with the connection, however this process ends.
    await client.query("select pg_advisory_lock($1)", [MIGRATION_LOCK]);
    const before = (await appliedMigrations(client)).length;
    await applyMigrations(drizzle(client), { migrationsFolder });
    const after = await appliedMigrations(client);
    assertSameMigrations(await folderMigrations(migrationsFolder), after);
    await makeQueues(client);
    await grant(client, options.appRole);
    return { applied: after.length - before };
  } finally {
    await client.end();
  }
}

type Applied = { hash: string; when: number };

async function appliedMigrations(client: pg.Client): Promise<Applied[]> {
  const table = await client.query<{ name: string | null }>(
    "select to_regclass('drizzle.__drizzle_migrations')::text as name",
  );
  if (table.rows[0]?.name == null) return [];
  const { rows } = await client.query<{ hash: string; created_at: string }>(
    "select hash, created_at::text from drizzle.__drizzle_migrations order by created_at",
  );
  return rows.map((row) => ({ hash: row.hash, when: Number(row.created_at) }));
}

async function folderMigrations(folder: string): Promise<{ tag: string; hash: string }[]> {
  const journal: { entries: { tag: string }[] } = JSON.parse(
    await readFile(`${folder}/meta/_journal.json`, "utf8"),
  );
  return readMigrationFiles({ migrationsFolder: folder }).map((file, i) => ({
    tag: journal.entries[i]?.tag ?? `migration ${i}`,
    hash: file.hash,
  }));
}

/** Drizzle compares dates only: a changed file, or one dated before the last applied, would pass unnoticed. */
function assertSameMigrations(folder: { tag: string; hash: string }[], applied: Applied[]): void {
  const inDatabase = new Set(applied.map((migration) => migration.hash));
  const missing = folder.filter((migration) => !inDatabase.has(migration.hash));
  if (missing.length > 0) {
    throw new Error(
      `These migrations were changed after they were applied, or are dated before the last applied one: ${missing
        .map((migration) => migration.tag)
        .join(", ")}`,
    );
  }
  if (applied.length > folder.length) {
    throw new Error(
      `The database has had ${applied.length} migrations, this version of the program knows only ${folder.length}: it is older than the database.`,
    );
  }
}

async function makeQueues(client: pg.Client): Promise<void> {
  const boss = new PgBoss({
    db: { executeSql: (text, values) => client.query(text, values) },
    migrate: true,
    supervise: false,
    schedule: false,
  });
  const failures: Error[] = [];
  boss.on("error", (error) => failures.push(error));
  await boss.start();
  const existing = new Set((await boss.getQueues()).map((queue) => queue.name));
  if (!existing.has(SCHEDULER_QUEUE)) await boss.createQueue(SCHEDULER_QUEUE);
  for (const { name, options } of QUEUES) {
    if (existing.has(name)) await boss.updateQueue(name, { name, ...options });
    else await boss.createQueue(name, { name, ...options });
  }
  await boss.stop({ graceful: false, wait: false });
  if (failures[0] !== undefined) throw failures[0];
}

/** In one transaction, so that a running shop is never without its privileges in between. */
async function grant(client: pg.Client, appRole: string): Promise<void> {
  await client.query("begin");
  try {
    for (const statement of grantStatements(appRole)) await client.query(statement);
    await client.query("commit");
  } catch (error) {
    await client.query("rollback");
    throw error;
  }
}

async function main(): Promise<void> {
  const ownerUrl = process.env.DATABASE_OWNER_URL;
  const appUrl = process.env.DATABASE_URL;
  if (!ownerUrl || !appUrl) {
    throw new Error(
      "Set DATABASE_OWNER_URL (the role that owns the tables) and DATABASE_URL (the application's role).",
    );
  }
  const { applied } = await migrate({ ownerUrl, appRole: decodeURIComponent(new URL(appUrl).username) });
  console.log(applied === 0 ? "the database is up to date" : `applied ${applied} migrations`);
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href) {
  await main();
}
