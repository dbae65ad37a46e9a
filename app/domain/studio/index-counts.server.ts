import { db } from "db/client.server";
import { sql } from "drizzle-orm";

/** What waits behind each entry of the studio's index. */
export type IndexCounts = {
  /** Sheets to be printed. */
  printRoom: number;
  /** Paid orders that have not been sent, and orders a person must look at. */
  orders: number;
  /** Scans being checked or refused, and proofs that failed. */
  rolls: number;
};

/** Counts in one query; the index is on every page of the studio. */
export async function indexCounts(): Promise<IndexCounts> {
  const { rows } = await db.execute<{ print_room: number; orders: number; rolls: number }>(sql`
    select
      (select count(*) from sheets where making = 'to_print') as print_room,
      (select count(*) from orders o
        where o.attention is not null
           or (o.state = 'paid' and o.delivery_method <> 'handed_over'
               and exists (select from order_lines l where l.order_id = o.id and l.state = 'sold')
               and not exists (select from dispatches d where d.order_id = o.id))) as orders,
      (select count(*) from scans where state in ('checking', 'refused') or proof_state = 'failed') as rolls`);
  const [row] = rows;
  return { printRoom: row?.print_room ?? 0, orders: row?.orders ?? 0, rolls: row?.rolls ?? 0 };
}
