import { db } from "db/client.server";
import { sql } from "drizzle-orm";
import { addDays, isoDayInZone } from "~/domain/dates";
import { now } from "~/platform/clock";
import { theStudio } from "./studio.server";

export type TodayTask = {
  key: string;
  kind:
    | "attention"
    | "refund_by_hand"
    | "to_send"
    | "to_sign"
    | "to_print"
    | "transfer_due"
    | "email_failed"
    | "scan_refused"
    | "proof_failed";
  count: number;
  /** Where the oldest of them stands, an order or a roll. */
  orderId: string | null;
  rollId: string | null;
  detail: string;
  since: Date | null;
};

export type SoldCopy = { day: string; editionId: string; copyId: string; number: number };

/** What needs doing, what was sold in the last seven days, and what is nearly gone: one read for the first page. */
export async function today() {
  const studio = await theStudio();
  const at = now();
  const day = isoDayInZone(at, studio.zone);
  const weekAgo = addDays(day, -6);
  const [tasks, sold, taken, nearlyGone, next] = await Promise.all([
    db.execute<{
      kind: TodayTask["kind"];
      count: number;
      order_id: string | null;
      roll_id: string | null;
      detail: string;
      since: Date | null;
    }>(sql`
      select 'attention' as kind, count(*) as count, min(id::text) as order_id, null as roll_id,
        coalesce(min(number::text), '') as detail, min(created_at) as since from orders where attention is not null
      union all select 'refund_by_hand', count(*), min(order_id::text), null, '', min(created_at)
        from refunds where state in ('pending', 'failed') and (method <> 'card' or state = 'failed')
      union all select 'to_send', count(distinct o.id), min(o.id::text), null, '', min(o.paid_at)
        from orders o join order_lines l on l.order_id = o.id and l.state = 'sold'
        where o.state = 'paid' and not exists (select from order_lines l2 join sheets s on s.copy_id = l2.copy_id
          where l2.order_id = o.id and l2.state = 'sold' and s.making in ('to_print', 'printed', 'dispatched', 'delivered'))
      union all select 'to_sign', count(*), null, null, '', min(s.created_at)
        from sheets s join copies c on c.id = s.copy_id where s.making = 'printed' and c.placement = 'sold'
      union all select 'to_print', count(*), null, null, '', min(s.created_at)
        from sheets s join copies c on c.id = s.copy_id where s.making = 'to_print' and c.placement = 'sold'
      union all select 'transfer_due', count(*), min(id::text), null, coalesce(min(number::text), ''), min(created_at)
        from orders where state = 'awaiting_payment' and channel = 'studio'
      union all select 'email_failed', count(*), min(order_id::text), null, coalesce(min(kind), ''), min(created_at)
        from emails where state = 'failed'
      union all select 'scan_refused', count(*), null, min(f.roll_id::text), '', min(s.created_at)
        from scans s join frames f on f.id = s.frame_id where s.state = 'refused'
          and not exists (select from scans later where later.frame_id = s.frame_id and later.version > s.version)
      union all select 'proof_failed', count(*), null, min(f.roll_id::text), '', min(s.created_at)
        from scans s join frames f on f.id = s.frame_id where s.proof_state = 'failed'`),
    db.execute<{ day: string; edition_id: string; copy_id: string; number: number }>(sql`
      select to_char(l.happened_at at time zone ${studio.zone}, 'YYYY-MM-DD') as day, l.edition_id, l.copy_id, c.number
      from ledger_entries l join copies c on c.id = l.copy_id
      where l.kind in ('sold', 'sold_by_stockist')
        and l.happened_at >= (${weekAgo}::date)::timestamp at time zone ${studio.zone}
      order by l.happened_at`),
    db.execute<{ this_week: number; before: number; back: number; held: number }>(sql`
      select
        coalesce((select sum(amount) from payments where received_at >= (${weekAgo}::date)::timestamp at time zone ${studio.zone}), 0) as this_week,
        coalesce((select sum(amount) from payments where received_at >= (${addDays(weekAgo, -7)}::date)::timestamp at time zone ${studio.zone}
          and received_at < (${weekAgo}::date)::timestamp at time zone ${studio.zone}), 0) as before,
        coalesce((select sum(amount) from refunds where state = 'succeeded' and settled_at >= (${weekAgo}::date)::timestamp at time zone ${studio.zone}), 0) as back,
        coalesce((select sum(total_amount) from orders where state = 'awaiting_payment'), 0) as held`),
    db.execute<{ id: string; title: string; run_limit: number; placements: string }>(sql`
      select e.id, pr.title, e."limit" as run_limit,
        (select string_agg(c.placement::text, ',' order by c.number) from copies c where c.edition_id = e.id and c.run = 'numbered') as placements
      from editions e join prints pr on pr.id = e.print_id
      where e.state = 'open' and e.release_at <= ${at} and (select count(*) from copies c where c.edition_id = e.id and c.run = 'numbered' and c.placement = 'in_hand') between 1 and 3
      order by (select count(*) from copies c where c.edition_id = e.id and c.run = 'numbered' and c.placement = 'in_hand'), pr.title
      limit 5`),
    db.execute<{ id: string; title: string; run_limit: number; release_at: Date }>(sql`
      select e.id, pr.title, e."limit" as run_limit, e.release_at from editions e join prints pr on pr.id = e.print_id
      where e.state = 'open' and e.release_at > ${at} order by e.release_at limit 1`),
  ]);
  const [sums] = taken.rows;
  return {
    at,
    day,
    zone: studio.zone,
    currency: studio.currency,
    tasks: tasks.rows
      .filter((t) => t.count > 0)
      .map(
        (t): TodayTask => ({
          key: t.kind,
          kind: t.kind,
          count: t.count,
          orderId: t.order_id,
          rollId: t.roll_id,
          detail: t.detail,
          since: t.since === null ? null : new Date(t.since),
        }),
      ),
    sold: sold.rows.map(
      (r): SoldCopy => ({ day: r.day, editionId: r.edition_id, copyId: r.copy_id, number: r.number }),
    ),
    taken: {
      thisWeek: sums?.this_week ?? 0,
      before: sums?.before ?? 0,
      back: sums?.back ?? 0,
      awaited: sums?.held ?? 0,
    },
    nearlyGone: nearlyGone.rows.map((r) => ({
      id: r.id,
      title: r.title,
      limit: r.run_limit,
      placements: r.placements.split(","),
    })),
    next:
      next.rows.map((r) => ({
        id: r.id,
        title: r.title,
        limit: r.run_limit,
        releaseAt: new Date(r.release_at),
      }))[0] ?? null,
  };
}
