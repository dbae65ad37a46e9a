import { db, inTransaction } from "db/client.server";
import { accounts, parties } from "db/schema/schema";
import { and, count, eq } from "drizzle-orm";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { verifyPassword } from "./passwords.server";
import { type StartedSession, startSession } from "./sessions.server";
import { oweVerification } from "./sign-up.server";
import { findToken, useToken } from "./tokens.server";

export type VerifyOutcome =
  | { code: "verified"; session: StartedSession | null }
  | { code: "wrong_password" }
  | { code: "gone" };

/**
 * Proves an account's e-mail address. The link alone is not enough: somebody may have signed up with an address that
 * is not theirs, and its holder must not hand them the account by opening the e-mail. So it takes the session of
 * the account, or its password, which also signs in.
 */
export async function verifyEmail(
  token: string,
  by: { accountId: string | null; password: string | undefined },
): Promise<VerifyOutcome> {
  const holder = await findToken("verify_email", token);
  if (holder === null) return { code: "gone" };
  const signedIn = by.accountId === holder.accountId;
  if (!signedIn && !(await verifyPassword(holder.passwordHash, by.password ?? ""))) {
    return { code: "wrong_password" };
  }
  return inTransaction(async (tx) => {
    const used = await useToken(tx, "verify_email", token);
    if (used === null) return { code: "gone" };
    await tx.db.update(accounts).set({ emailVerifiedAt: now() }).where(eq(accounts.id, used.accountId));
    const [others] = await tx.db
      .select({ n: count() })
      .from(accounts)
      .where(eq(accounts.partyId, used.partyId));
    // A gallery with several accounts keeps its own address; a person's follows the account.
    if (others?.n === 1) {
      await tx.db
        .update(parties)
        .set({ email: used.email })
        .where(and(eq(parties.id, used.partyId), eq(parties.kind, "person")));
    }
    return { code: "verified", session: signedIn ? null : await startSession(tx, used.accountId) };
  });
}

/** Sends the proving link again. Does nothing for an address that is proved already. */
export async function sendVerificationAgain(accountId: string, language: Language): Promise<void> {
  const [account] = await db.select().from(accounts).where(eq(accounts.id, accountId));
  if (account === undefined || account.emailVerifiedAt !== null) return;
  await inTransaction((tx) => oweVerification(tx, account.id, account.email, language));
}
