import { db, type Tx } from "db/client.server";
import { accountRoles, accounts, parties, sessions } from "db/schema/schema";
import { and, desc, eq, gt, isNull, lt, ne, sql } from "drizzle-orm";
import { now } from "~/platform/clock";
import { newId, randomSecret, sha256 } from "~/platform/ids.server";
import type { Role } from "./permissions";

const DAY = 24 * 60 * 60 * 1000;
/** A session ends this long after it was last used (milliseconds). */
export const SESSION_LASTS = 30 * DAY;
/** Use is noted at most this often, so that reading pages does not write all the time. */
const NOTED_EVERY = 5 * 60 * 1000;

export type StartedSession = { sessionId: string; secret: string; expiresAt: Date };

/** Starts a session; the secret (256 random bits) goes into the browser's cookie and is not kept. */
export async function startSession(tx: Pick<Tx, "db">, accountId: string): Promise<StartedSession> {
  const secret = randomSecret();
  const at = now();
  const sessionId = newId(at.getTime());
  const expiresAt = new Date(at.getTime() + SESSION_LASTS);
  await tx.db.insert(sessions).values({
    id: sessionId,
    secretHash: sha256(secret),
    accountId,
    createdAt: at,
    lastSeenAt: at,
    expiresAt,
  });
  return { sessionId, secret, expiresAt };
}

export type FoundSession = {
  sessionId: string;
  accountId: string;
  partyId: string;
  email: string;
  name: string;
  roles: Role[];
  emailVerified: boolean;
  /** Set when its end was moved on, so that the cookie's can be too. */
  renewedUntil: Date | null;
};

/** The session of a cookie's secret; null when it has ended, or its account was disabled. Moves its end on. */
export async function findSession(secret: string): Promise<FoundSession | null> {
  const at = now();
  const [row] = await db
    .select({
      sessionId: sessions.id,
      lastSeenAt: sessions.lastSeenAt,
      accountId: accounts.id,
      partyId: accounts.partyId,
      email: accounts.email,
      name: parties.name,
      emailVerifiedAt: accounts.emailVerifiedAt,
      roles: sql<Role[]>`coalesce((select json_agg(${accountRoles.role} order by ${accountRoles.role})
        from ${accountRoles} where ${accountRoles.accountId} = ${accounts.id}), '[]'::json)`,
    })
    .from(sessions)
    .innerJoin(accounts, eq(accounts.id, sessions.accountId))
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(
      and(eq(sessions.secretHash, sha256(secret)), gt(sessions.expiresAt, at), isNull(accounts.disabledAt)),
    );
  if (row === undefined) return null;
  const { lastSeenAt, emailVerifiedAt, ...found } = row;
  let renewedUntil: Date | null = null;
  if (at.getTime() - lastSeenAt.getTime() >= NOTED_EVERY) {
    renewedUntil = new Date(at.getTime() + SESSION_LASTS);
    await db
      .update(sessions)
      .set({ lastSeenAt: at, expiresAt: renewedUntil })
      .where(eq(sessions.id, row.sessionId));
  }
  return { ...found, emailVerified: emailVerifiedAt !== null, renewedUntil };
}

/** Ends one session. */
export async function endSession(sessionId: string): Promise<void> {
  await db.delete(sessions).where(eq(sessions.id, sessionId));
}

/** Ends all sessions of an account but, if given, the one in use. Returns how many. */
export async function endSessions(tx: Pick<Tx, "db">, accountId: string, except?: string): Promise<number> {
  const ended = await tx.db
    .delete(sessions)
    .where(and(eq(sessions.accountId, accountId), except === undefined ? undefined : ne(sessions.id, except)))
    .returning({ id: sessions.id });
  return ended.length;
}

/** Removes sessions that have run out; they let nobody in, this only keeps the table small. */
export async function sweepSessions(): Promise<number> {
  const swept = await db.delete(sessions).where(lt(sessions.expiresAt, now())).returning({ id: sessions.id });
  return swept.length;
}

export type SessionLine = { id: string; createdAt: Date; lastSeenAt: Date; isThis: boolean };

/** An account's live sessions, last used first. */
export async function sessionsOf(accountId: string, thisSession?: string): Promise<SessionLine[]> {
  const rows = await db
    .select({ id: sessions.id, createdAt: sessions.createdAt, lastSeenAt: sessions.lastSeenAt })
    .from(sessions)
    .where(and(eq(sessions.accountId, accountId), gt(sessions.expiresAt, now())))
    .orderBy(desc(sessions.lastSeenAt));
  return rows.map((row) => ({ ...row, isThis: row.id === thisSession }));
}
