import { inTransaction } from "db/client.server";
import { accounts } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { owe } from "~/emails/owe.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { evenly } from "./even-time.server";
import { findAccountByEmail } from "./find-account.server";
import { hashPassword } from "./passwords.server";
import { endSessions, type StartedSession, startSession } from "./sessions.server";
import { endTokens, findToken, issueToken, useToken } from "./tokens.server";

/** Well above what the work takes for an address that has an account (milliseconds). */
const EVEN_TIME = 400;

/**
 * Owes a link to a new password, if the address has an account. The answer, and how long it takes, are the same
 * where it has none.
 */
export async function requestReset(email: string, language: Language): Promise<void> {
  await evenly(EVEN_TIME, () =>
    inTransaction(async (tx) => {
      const account = await findAccountByEmail(email, tx);
      if (account === null || account.disabledAt !== null) return;
      const tokenId = await issueToken(tx, account.id, "reset_password");
      await owe(tx, {
        kind: "reset-password",
        dedupeKey: `reset-password:${tokenId}`,
        recipient: account.email,
        language,
        payload: { tokenId },
      });
    }),
  );
}

export type ResetOutcome = { code: "reset"; session: StartedSession; accountId: string } | { code: "gone" };

/**
 * Sets a new password by a link from an e-mail, which is used up, ends every session of the account and starts one for
 * whoever holds the link. The link came by e-mail, so the address is proved as well.
 */
export async function resetPassword(token: string, newPassword: string): Promise<ResetOutcome> {
  if ((await findToken("reset_password", token)) === null) return { code: "gone" };
  const passwordHash = await hashPassword(newPassword);
  return inTransaction(async (tx) => {
    const holder = await useToken(tx, "reset_password", token);
    if (holder === null) return { code: "gone" };
    await tx.db
      .update(accounts)
      .set({ passwordHash, emailVerifiedAt: holder.emailVerifiedAt ?? now() })
      .where(eq(accounts.id, holder.accountId));
    await endTokens(tx, holder.accountId, "verify_email");
    await endSessions(tx, holder.accountId);
    const { accountId } = holder;
    return { code: "reset", session: await startSession(tx, accountId), accountId };
  });
}
