import { drizzle, type NodePgDatabase } from "drizzle-orm/node-postgres";
import pg from "pg";
import { env } from "~/platform/env.server";
import * as schema from "./schema/schema";

// bigint sums and counts come as strings from pg; all of ours are safe integers (minor units, counts).
pg.types.setTypeParser(pg.types.builtins.INT8, (text) => {
  const value = Number(text);
  if (!Number.isSafeInteger(value)) throw new Error(`integer from the database is too large: ${text}`);
  return value;
});

export const pool = new pg.Pool({
  connectionString: env.DATABASE_URL,
  max: env.DATABASE_POOL,
  connectionTimeoutMillis: 5_000,
  idleTimeoutMillis: 30_000,
  application_name: "numberleaf",
});
// A connection lost while idle (a restarted server) must not take the process down; the next query reconnects.
pool.on("error", () => undefined);

const options = { schema, casing: "snake_case" as const };

/** For single statements outside a transaction. */
export const db = drizzle(pool, options);

export type Database = NodePgDatabase<typeof schema>;

/** A transaction: Drizzle on one connection, and that connection for the queue. */
export type Tx = { db: Database; client: pg.PoolClient };

/** SQLSTATEs after which the same transaction may simply be tried again. */
const AGAIN = new Set(["40001", "40P01"]);

/**
 * Runs `work` in one transaction (read committed; locks are taken by the commands themselves) and commits.
 * Retries on deadlock or serialization failure, so `work` must have no effect outside the database.
 */
export async function inTransaction<T>(work: (tx: Tx) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    const client = await pool.connect();
    let broken: Error | undefined;
    try {
      await client.query("begin");
      const result = await work({ db: drizzle(client, options), client });
      await client.query("commit");
      return result;
    } catch (error) {
      await client.query("rollback").catch((e: Error) => {
        broken = e;
      });
      if (attempt < 4 && AGAIN.has(sqlState(error) ?? "")) continue;
      throw error;
    } finally {
      client.release(broken);
    }
  }
}

/** The SQLSTATE behind an error thrown by pg or wrapped by Drizzle, if there is one. */
export function sqlState(error: unknown): string | undefined {
  for (let e: unknown = error; e instanceof Error; e = e.cause) {
    if ("code" in e && typeof e.code === "string" && /^[0-9A-Z]{5}$/.test(e.code)) return e.code;
  }
  return undefined;
}

/** The name of the violated constraint, if the database named one. */
export function violatedConstraint(error: unknown): string | undefined {
  for (let e: unknown = error; e instanceof Error; e = e.cause) {
    if ("constraint" in e && typeof e.constraint === "string") return e.constraint;
  }
  return undefined;
}
