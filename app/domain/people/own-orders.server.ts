import { db } from "db/client.server";
import { accounts, copies, editions, orderLines, orders, prints } from "db/schema/schema";
import { and, asc, desc, eq, inArray, ne, or, sql } from "drizzle-orm";
import { runTotal } from "~/domain/editions/ledger.server";
import { numberMark } from "~/domain/editions/numbering";
import { linkToken } from "~/platform/ids.server";

export type OwnOrder = {
  number: number;
  state: (typeof orders.$inferSelect)["state"];
  createdAt: Date;
  totalAmount: number;
  currency: string;
  /** For the order's page, made again from its seed. */
  token: string;
  lines: { title: string; mark: string }[];
};

/**
 * The orders of an account: those made while signed in, and, once its e-mail address is proved, those made with that
 * address as a guest or by the studio for its party. Newest first; orders that ran out unpaid are left away.
 */
export async function ownOrders(own: { accountId: string; partyId: string }): Promise<OwnOrder[]> {
  const [account] = await db.select().from(accounts).where(eq(accounts.id, own.accountId));
  if (account === undefined) return [];
  const mine = [eq(orders.accountId, own.accountId)];
  if (account.emailVerifiedAt !== null) {
    mine.push(sql`lower(${orders.email}) = lower(${account.email})`, eq(orders.buyerPartyId, own.partyId));
  }
  const rows = await db
    .select()
    .from(orders)
    .where(and(or(...mine), ne(orders.state, "expired")))
    .orderBy(desc(orders.number))
    .limit(500);
  if (rows.length === 0) return [];
  const lines = await db
    .select({ orderId: orderLines.orderId, copy: copies, edition: editions, title: prints.title })
    .from(orderLines)
    .innerJoin(copies, eq(copies.id, orderLines.copyId))
    .innerJoin(editions, eq(editions.id, copies.editionId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(
      inArray(
        orderLines.orderId,
        rows.map((row) => row.id),
      ),
    )
    .orderBy(asc(orderLines.position));
  return rows.map((order) => ({
    number: order.number,
    state: order.state,
    createdAt: order.createdAt,
    totalAmount: order.totalAmount,
    currency: order.currency,
    token: linkToken("order", order.tokenSeed),
    lines: lines
      .filter((line) => line.orderId === order.id)
      .map(({ copy, edition, title }) => ({
        title,
        mark: numberMark({ run: copy.run, number: copy.number, total: runTotal(edition, copy.run) }),
      })),
  }));
}
