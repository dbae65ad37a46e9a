import { db, inTransaction, type Tx } from "db/client.server";
import { accountRoles, accounts, parties, sessions } from "db/schema/schema";
import { and, asc, eq, gt, inArray, isNull, ne, sql } from "drizzle-orm";
import { now } from "~/platform/clock";
import { type Actor, mustBeAllowed } from "./allowed";
import type { Role } from "./permissions";
import { endSessions } from "./sessions.server";

export type AccountLine = {
  id: string;
  partyId: string;
  name: string;
  email: string;
  emailVerified: boolean;
  disabled: boolean;
  roles: Role[];
  liveSessions: number;
  lastSeenAt: Date | null;
};

const collectorOnly = sql<boolean>`not exists (
  select from ${accountRoles} where ${accountRoles.accountId} = ${accounts.id} and ${accountRoles.role} <> 'collector')`;

async function accountLines(condition: ReturnType<typeof and>): Promise<AccountLine[]> {
  const rows = await db
    .select({
      id: accounts.id,
      partyId: accounts.partyId,
      name: parties.name,
      email: accounts.email,
      emailVerifiedAt: accounts.emailVerifiedAt,
      disabledAt: accounts.disabledAt,
      roles: sql<Role[]>`coalesce((select json_agg(${accountRoles.role} order by ${accountRoles.role})
        from ${accountRoles} where ${accountRoles.accountId} = ${accounts.id}), '[]'::json)`,
    })
    .from(accounts)
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(condition)
    .orderBy(asc(sql`lower(${parties.name})`), asc(accounts.id));
  if (rows.length === 0) return [];
  const live = await db
    .select({
      accountId: sessions.accountId,
      n: sql<number>`count(*)`,
      lastSeenAt: sql`max(${sessions.lastSeenAt})`.mapWith(sessions.lastSeenAt),
    })
    .from(sessions)
    .where(
      and(
        gt(sessions.expiresAt, now()),
        inArray(
          sessions.accountId,
          rows.map((row) => row.id),
        ),
      ),
    )
    .groupBy(sessions.accountId);
  const bySession = new Map(live.map((row) => [row.accountId, row]));
  return rows.map(({ emailVerifiedAt, disabledAt, ...row }) => ({
    ...row,
    emailVerified: emailVerifiedAt !== null,
    disabled: disabledAt !== null,
    liveSessions: bySession.get(row.id)?.n ?? 0,
    lastSeenAt: bySession.get(row.id)?.lastSeenAt ?? null,
  }));
}

/** Accounts of everybody who works with the studio: those with another role than collector. */
export async function studioAccounts(): Promise<AccountLine[]> {
  return accountLines(sql`not ${collectorOnly}`);
}

/** The accounts of a party: none, one, or several. */
export async function accountsOfParty(partyId: string): Promise<AccountLine[]> {
  return accountLines(eq(accounts.partyId, partyId));
}

export type AccountChange =
  | { code: "changed" }
  /** A studio without a photographer could not be opened again by anyone. */
  | { code: "last_photographer" }
  | { code: "yourself" }
  | { code: "unknown" };

/** Locks every photographer's role, so that two changes at once cannot each leave the other as the last. */
async function wouldLeaveNone(tx: Tx, accountId: string): Promise<boolean> {
  const rows = await tx.db
    .select({ accountId: accountRoles.accountId })
    .from(accountRoles)
    .innerJoin(accounts, eq(accounts.id, accountRoles.accountId))
    .where(and(eq(accountRoles.role, "photographer"), isNull(accounts.disabledAt)))
    .orderBy(asc(accountRoles.accountId))
    .for("update");
  return rows.length > 0 && rows.every((row) => row.accountId === accountId);
}

/** Gives an account a further role. */
export async function grantRole(actor: Actor, accountId: string, role: Role): Promise<AccountChange> {
  mustBeAllowed(actor, "people.change");
  const [account] = await db.select({ id: accounts.id }).from(accounts).where(eq(accounts.id, accountId));
  if (account === undefined) return { code: "unknown" };
  await db.insert(accountRoles).values({ accountId, role, grantedBy: actor.accountId }).onConflictDoNothing();
  return { code: "changed" };
}

/** Takes a role from an account; it holds from its next request on. */
export async function revokeRole(actor: Actor, accountId: string, role: Role): Promise<AccountChange> {
  mustBeAllowed(actor, "people.change");
  return inTransaction(async (tx) => {
    if (role === "photographer" && (await wouldLeaveNone(tx, accountId)))
      return { code: "last_photographer" };
    await tx.db
      .delete(accountRoles)
      .where(and(eq(accountRoles.accountId, accountId), eq(accountRoles.role, role)));
    return { code: "changed" };
  });
}

/** Disables an account: nobody can sign in with it, and its sessions end. Nothing of it is removed. */
export async function disableAccount(actor: Actor, accountId: string): Promise<AccountChange> {
  mustBeAllowed(actor, "people.change");
  if (actor.accountId === accountId) return { code: "yourself" };
  return inTransaction(async (tx) => {
    if (await wouldLeaveNone(tx, accountId)) return { code: "last_photographer" };
    const rows = await tx.db
      .update(accounts)
      .set({ disabledAt: now() })
      .where(and(eq(accounts.id, accountId), isNull(accounts.disabledAt)))
      .returning({ id: accounts.id });
    await endSessions(tx, accountId);
    return { code: rows.length === 1 ? "changed" : "unknown" };
  });
}

/** Lets an account be used again. */
export async function enableAccount(actor: Actor, accountId: string): Promise<AccountChange> {
  mustBeAllowed(actor, "people.change");
  const rows = await db
    .update(accounts)
    .set({ disabledAt: null })
    .where(eq(accounts.id, accountId))
    .returning({ id: accounts.id });
  return { code: rows.length === 1 ? "changed" : "unknown" };
}

/** Signs an account out everywhere; the actor's own session stays. */
export async function endAccountSessions(
  actor: Actor & { sessionId: string },
  accountId: string,
): Promise<void> {
  mustBeAllowed(actor, "people.change");
  await db.delete(sessions).where(and(eq(sessions.accountId, accountId), ne(sessions.id, actor.sessionId)));
}
