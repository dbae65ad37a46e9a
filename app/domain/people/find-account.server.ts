import { db, type Tx } from "db/client.server";
import { accounts, parties } from "db/schema/schema";
import { and, eq, isNull, sql } from "drizzle-orm";

export type AccountRow = typeof accounts.$inferSelect;

/** The account with an e-mail address, capitals or not. */
export async function findAccountByEmail(email: string, tx?: Pick<Tx, "db">): Promise<AccountRow | null> {
  const [row] = await (tx?.db ?? db)
    .select()
    .from(accounts)
    .where(sql`lower(${accounts.email}) = lower(${email})`);
  return row ?? null;
}

/** Name and address of an account, for an e-mail to its holder; null once it is disabled. */
export async function accountForEmail(accountId: string): Promise<{ name: string; email: string } | null> {
  const [row] = await db
    .select({ name: parties.name, email: accounts.email })
    .from(accounts)
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(and(eq(accounts.id, accountId), isNull(accounts.disabledAt)));
  return row ?? null;
}
