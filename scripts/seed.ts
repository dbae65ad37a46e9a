/**
 * The demo's data. `seed.ts rows` makes every row (studio, accounts, rolls, prints, editions, orders) in some
 * seconds; `seed.ts scans` draws the scans that are still missing, puts them in storage and asks for their
 * proofs (`scans 2`: only until two are there); without a word it does both. Everything may be repeated: what is
 * there is left as it is.
 */
import { pool } from "db/client.server";
import { seedRows } from "db/seed/demo";
import { seedScans } from "db/seed/demo-scans";
import { env } from "~/platform/env.server";
import { stopQueue } from "~/platform/queue.server";

const say = (line: string) => process.stdout.write(`${line}\n`);
if (env.NUMBERLEAF_MODE !== "demo" && env.NUMBERLEAF_MODE !== "test") {
  throw new Error(`There is no demo data in ${env.NUMBERLEAF_MODE} mode.`);
}
const [what, most] = process.argv.slice(2);
if (what !== "scans") await seedRows(say);
if (what !== "rows") await seedScans(say, most === undefined ? undefined : Number(most));
await stopQueue();
await pool.end();
