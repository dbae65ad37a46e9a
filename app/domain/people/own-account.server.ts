import { db, inTransaction, sqlState } from "db/client.server";
import { accounts, parties } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { owe } from "~/emails/owe.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { hashPassword, verifyPassword } from "./passwords.server";
import { endSession, endSessions, type SessionLine, sessionsOf } from "./sessions.server";
import { oweVerification } from "./sign-up.server";
import { endTokens } from "./tokens.server";

/** The account somebody is signed in with, and the session they use. */
export type Own = { accountId: string; partyId: string; sessionId: string };

export type OwnAccount = { name: string; email: string; emailVerified: boolean; sessions: SessionLine[] };

/** What the account page shows. */
export async function ownAccount(own: Own): Promise<OwnAccount> {
  const [row] = await db
    .select({ name: parties.name, email: accounts.email, verifiedAt: accounts.emailVerifiedAt })
    .from(accounts)
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(eq(accounts.id, own.accountId));
  if (row === undefined) throw new Error("a session without its account");
  return {
    name: row.name,
    email: row.email,
    emailVerified: row.verifiedAt !== null,
    sessions: await sessionsOf(own.accountId, own.sessionId),
  };
}

/** Changes the name of the account's party. */
export async function changeName(own: Own, name: string): Promise<void> {
  await db.update(parties).set({ name }).where(eq(parties.id, own.partyId));
}

async function passwordIsRight(accountId: string, password: string): Promise<boolean> {
  const [row] = await db.select().from(accounts).where(eq(accounts.id, accountId));
  return verifyPassword(row?.passwordHash ?? null, password);
}

/** Changes the password; every other session ends. */
export async function changePassword(
  own: Own,
  form: { password: string; newPassword: string },
): Promise<{ code: "changed" | "wrong_password" }> {
  if (!(await passwordIsRight(own.accountId, form.password))) return { code: "wrong_password" };
  const passwordHash = await hashPassword(form.newPassword);
  return inTransaction(async (tx) => {
    await tx.db.update(accounts).set({ passwordHash }).where(eq(accounts.id, own.accountId));
    await endTokens(tx, own.accountId, "reset_password");
    await endSessions(tx, own.accountId, own.sessionId);
    return { code: "changed" };
  });
}

/** Changes the e-mail address, which has to be proved again; the former address is told. */
export async function changeEmail(
  own: Own,
  form: { password: string; email: string },
  language: Language,
): Promise<{ code: "changed" | "wrong_password" | "taken" }> {
  if (!(await passwordIsRight(own.accountId, form.password))) return { code: "wrong_password" };
  try {
    return await inTransaction(async (tx) => {
      const [account] = await tx.db
        .select()
        .from(accounts)
        .where(eq(accounts.id, own.accountId))
        .for("update");
      if (account === undefined || account.email === form.email) return { code: "changed" };
      const onlyCapitals = account.email.toLowerCase() === form.email.toLowerCase();
      await tx.db
        .update(accounts)
        .set({ email: form.email, ...(onlyCapitals ? {} : { emailVerifiedAt: null }) })
        .where(eq(accounts.id, own.accountId));
      if (onlyCapitals) return { code: "changed" };
      await endTokens(tx, own.accountId, "reset_password");
      await oweVerification(tx, own.accountId, form.email, language);
      await owe(tx, {
        kind: "email-changed",
        dedupeKey: `email-changed:${own.accountId}:${now().toISOString()}`,
        recipient: account.email,
        language,
        payload: { accountId: own.accountId },
      });
      return { code: "changed" };
    });
  } catch (error) {
    if (sqlState(error) === "23505") return { code: "taken" };
    throw error;
  }
}

/** Ends one of the account's sessions. Does nothing for a session of somebody else. */
export async function endOwnSession(own: Own, sessionId: string): Promise<void> {
  const mine = await sessionsOf(own.accountId);
  if (mine.some((session) => session.id === sessionId)) await endSession(sessionId);
}

/** Signs out everywhere, this browser included. */
export async function signOutEverywhere(own: Own): Promise<void> {
  await endSessions({ db }, own.accountId);
}
