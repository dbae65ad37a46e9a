import { db } from "db/client.server";
import { sql } from "drizzle-orm";
import { type OrderStands, standsAt } from "./order-view.server";

/** What the list of orders can be asked for; the address carries it. */
export type OrdersWanted = {
  q: string;
  stands: "" | "to_do" | "awaiting_payment" | "paid" | "sent" | "ended" | "attention";
  sort: "number" | "buyer" | "total";
  descending: boolean;
  page: number;
};

export const ORDERS_A_PAGE = 50;

export type OrderRow = {
  id: string;
  number: number;
  createdAt: Date;
  buyer: string;
  stands: OrderStands;
  marks: string;
  total: number;
  currency: string;
  attention: string | null;
  channel: "shop" | "studio";
};

const STANDS = ["to_do", "awaiting_payment", "paid", "sent", "ended", "attention"] as const;

/** Reads the wishes from an address; what is not understood counts as not asked. */
export function ordersWanted(search: URLSearchParams): OrdersWanted {
  const stands = STANDS.find((s) => s === search.get("stands")) ?? "";
  const sort = search.get("sort") ?? "";
  const page = Number(search.get("page") ?? "1");
  return {
    q: (search.get("q") ?? "").trim().slice(0, 100),
    stands,
    sort: sort === "buyer" || sort === "total" ? sort : "number",
    descending: search.get("order") !== "up",
    page: Number.isInteger(page) && page >= 1 && page < 100_000 ? page : 1,
  };
}

/** One page of orders, newest first unless asked otherwise; search goes over number, buyer, e-mail and title. */
export async function findOrders(wanted: OrdersWanted): Promise<{ rows: OrderRow[]; total: number }> {
  const like = `%${wanted.q.replace(/[\\%_]/g, (c) => `\\${c}`)}%`;
  const number = /^#?\d{1,9}$/.test(wanted.q) ? Number(wanted.q.replace("#", "")) : -1;
  const searched =
    wanted.q === ""
      ? sql`true`
      : sql`(o.number = ${number} or p.name ilike ${like} or coalesce(o.email, '') ilike ${like} or exists (
          select from order_lines l join editions e on e.id = l.edition_id join prints pr on pr.id = e.print_id
          where l.order_id = o.id and pr.title ilike ${like}))`;
  // An order is sent when every live sheet of its sold copies has left the studio.
  const sent = sql`not exists (select from order_lines l join sheets s on s.copy_id = l.copy_id
      where l.order_id = o.id and l.state = 'sold' and s.making in ('to_print', 'printed', 'signed', 'packed', 'returned'))`;
  const filter = {
    "": sql`true`,
    to_do: sql`o.state = 'paid' and not (${sent})`,
    awaiting_payment: sql`o.state = 'awaiting_payment'`,
    paid: sql`o.state = 'paid'`,
    sent: sql`o.state = 'paid' and ${sent}`,
    ended: sql`o.state in ('cancelled', 'expired')`,
    attention: sql`o.attention is not null`,
  }[wanted.stands];
  const column = { number: sql`o.number`, buyer: sql`lower(p.name)`, total: sql`o.total_amount` }[
    wanted.sort
  ];
  const direction = wanted.descending ? sql`desc` : sql`asc`;
  const { rows } = await db.execute<{
    id: string;
    number: number;
    created_at: Date;
    buyer: string;
    state: "awaiting_payment" | "paid" | "cancelled" | "expired";
    makings: (
      | "to_print"
      | "printed"
      | "signed"
      | "packed"
      | "dispatched"
      | "delivered"
      | "spoiled"
      | "lost"
      | "returned"
      | "destroyed"
    )[];
    marks: string;
    total_amount: number;
    currency: string;
    attention: string | null;
    channel: "shop" | "studio";
    found: number;
  }>(sql`
    select o.id, o.number, o.created_at, p.name as buyer, o.state, o.total_amount, o.currency, o.attention, o.channel,
      count(*) over () as found,
      coalesce((select string_agg(c.number || '/' || e."limit" || ' ' || pr.title, '; ' order by l.position)
        from order_lines l join copies c on c.id = l.copy_id join editions e on e.id = l.edition_id
        join prints pr on pr.id = e.print_id where l.order_id = o.id), '') as marks,
      coalesce((select array_agg(s.making::text) from order_lines l join sheets s on s.copy_id = l.copy_id
        where l.order_id = o.id and l.state = 'sold'), '{}') as makings
    from orders o join parties p on p.id = o.buyer_party_id
    where ${searched} and ${filter}
    order by ${column} ${direction}, o.number desc
    limit ${ORDERS_A_PAGE} offset ${(wanted.page - 1) * ORDERS_A_PAGE}`);
  return {
    total: rows[0]?.found ?? 0,
    rows: rows.map((r) => ({
      id: r.id,
      number: r.number,
      createdAt: new Date(r.created_at),
      buyer: r.buyer,
      stands: standsAt(r.state, r.makings),
      marks: r.marks,
      total: r.total_amount,
      currency: r.currency,
      attention: r.attention,
      channel: r.channel,
    })),
  };
}
