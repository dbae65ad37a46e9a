import { db } from "db/client.server";
import { sql } from "drizzle-orm";
import { pingStorage } from "~/platform/storage.server";

type Part = "database" | "storage" | "queue";
export type Readiness = { ready: boolean; failing: Part[] };

async function answers(check: Promise<unknown>): Promise<boolean> {
  let timer: ReturnType<typeof setTimeout> | undefined;
  const late = new Promise<boolean>((resolve) => {
    timer = setTimeout(() => resolve(false), 4_000);
  });
  try {
    return await Promise.race([check.then(() => true), late]);
  } catch {
    return false;
  } finally {
    clearTimeout(timer);
  }
}

/** Asks database, storage and queue; each has four seconds. */
export async function readiness(): Promise<Readiness> {
  const [database, storage, queue] = await Promise.all([
    answers(db.execute(sql`select 1 from studio limit 1`)),
    answers(pingStorage()),
    answers(db.execute(sql`select name from pgboss.queue limit 1`)),
  ]);
  const failing: Part[] = [];
  if (!database) failing.push("database");
  if (!storage) failing.push("storage");
  if (!queue) failing.push("queue");
  return { ready: failing.length === 0, failing };
}
