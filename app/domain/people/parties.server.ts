import { db } from "db/client.server";
import { copies, editions, orders, parties, prints } from "db/schema/schema";
import { and, asc, desc, eq, ilike, or, type SQL, sql } from "drizzle-orm";
import { runTotal } from "~/domain/editions/ledger.server";
import { numberMark } from "~/domain/editions/numbering";
import type { Address } from "./address";
import { type Actor, mustBeAllowed } from "./allowed";
import type { Role } from "./permissions";

export const PARTIES_A_PAGE = 50;

export type PartyLine = {
  id: string;
  kind: "person" | "firm";
  name: string;
  email: string | null;
  country: string | null;
  roles: Role[];
  orders: number;
  copies: number;
};

export type PartySearch = { q: string; page: number };
export type PartyPage = { rows: PartyLine[]; total: number; page: number; pages: number };

/** A text as a part of LIKE patterns, its own wildcards taken literally. */
function containing(text: string): string {
  return `%${text.replace(/[\\%_]/g, (character) => `\\${character}`)}%`;
}

// Written out, because Drizzle leaves table names away in a select from one table, and "id" would be the wrong one.
const orderCount = sql<number>`(select count(*) from orders o
  where o.buyer_party_id = parties.id and o.state <> 'expired')`;
const copyCount = sql<number>`(select count(*) from copies c where c.owner_party_id = parties.id)`;
const roles = sql<Role[]>`coalesce((select json_agg(distinct r.role) from account_roles r
  join accounts a on a.id = r.account_id where a.party_id = parties.id), '[]'::json)`;

/** The parties of the book by name, fifty a page; `q` is looked for in names, addresses of e-mail and post, and notes. */
export async function findParties({ q, page }: PartySearch): Promise<PartyPage> {
  const pattern = containing(q);
  const condition: SQL | undefined =
    q === ""
      ? undefined
      : or(
          ilike(parties.name, pattern),
          ilike(parties.email, pattern),
          ilike(parties.notes, pattern),
          sql`${parties.address}->>'city' ilike ${pattern}`,
          sql`${parties.address}->>'postcode' ilike ${pattern}`,
        );
  const total = await db.$count(parties, condition);
  const pages = Math.max(1, Math.ceil(total / PARTIES_A_PAGE));
  const at = Math.min(Math.max(1, page), pages);
  const rows = await db
    .select({
      id: parties.id,
      kind: parties.kind,
      name: parties.name,
      email: parties.email,
      country: sql<string | null>`${parties.address}->>'country'`,
      roles,
      orders: orderCount,
      copies: copyCount,
    })
    .from(parties)
    .where(condition)
    .orderBy(asc(sql`lower(${parties.name})`), asc(parties.id))
    .limit(PARTIES_A_PAGE)
    .offset((at - 1) * PARTIES_A_PAGE);
  return { rows, total, page: at, pages };
}

export type PartyOrder = {
  id: string;
  number: number;
  state: (typeof orders.$inferSelect)["state"];
  createdAt: Date;
  totalAmount: number;
  currency: string;
};

export type PartyCopy = {
  copyId: string;
  editionId: string;
  mark: string;
  title: string;
  placement: (typeof copies.$inferSelect)["placement"];
};

export type Party = {
  id: string;
  kind: "person" | "firm";
  name: string;
  email: string | null;
  telephone: string | null;
  address: Address | null;
  notes: string;
  createdAt: Date;
  orders: PartyOrder[];
  copies: PartyCopy[];
};

/** A party with its orders (newest first) and the copies it owns; null for an id that is none. */
export async function findParty(partyId: string): Promise<Party | null> {
  const [party] = await db.select().from(parties).where(eq(parties.id, partyId));
  if (party === undefined) return null;
  const bought = await db
    .select({
      id: orders.id,
      number: orders.number,
      state: orders.state,
      createdAt: orders.createdAt,
      totalAmount: orders.totalAmount,
      currency: orders.currency,
    })
    .from(orders)
    .where(eq(orders.buyerPartyId, partyId))
    .orderBy(desc(orders.number))
    .limit(200);
  const owned = await db
    .select({ copy: copies, edition: editions, title: prints.title })
    .from(copies)
    .innerJoin(editions, eq(editions.id, copies.editionId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(eq(copies.ownerPartyId, partyId))
    .orderBy(asc(prints.title), asc(copies.run), asc(copies.number))
    .limit(200);
  return {
    ...party,
    orders: bought,
    copies: owned.map(({ copy, edition, title }) => ({
      copyId: copy.id,
      editionId: edition.id,
      mark: numberMark({ run: copy.run, number: copy.number, total: runTotal(edition, copy.run) }),
      title,
      placement: copy.placement,
    })),
  };
}

export type PartyForm = {
  kind: "person" | "firm";
  name: string;
  email: string;
  telephone: string;
  notes: string;
  /** null leaves the party without one. */
  address: Address | null;
};

/** Changes what the book says of a party. Returns whether there is one. */
export async function changeParty(actor: Actor, partyId: string, form: PartyForm): Promise<boolean> {
  mustBeAllowed(actor, "people.change");
  const rows = await db
    .update(parties)
    .set({
      kind: form.kind,
      name: form.name,
      email: form.email === "" ? null : form.email,
      telephone: form.telephone === "" ? null : form.telephone,
      notes: form.notes,
      address: form.address,
    })
    .where(and(eq(parties.id, partyId)))
    .returning({ id: parties.id });
  return rows.length === 1;
}
