import { inTransaction } from "db/client.server";
import { accounts } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { owe } from "~/emails/owe.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { evenly } from "./even-time.server";
import { findAccountByEmail } from "./find-account.server";
import { hashPassword } from "./passwords.server";
import { endSessions, type StartedSession, startSession } from "./sessions.server";
import {
  endTokens,
  findToken,
  issueToken,
  type TokenForEmail,
  tokenExists,
  tokenForEmail,
  useToken,
} from "./tokens.server";

/** Well above what the work takes (milliseconds). */
const EVEN_TIME = 150;

/**
 * Takes a wish for a new password. Exactly the same is done for every address, and the answer never comes sooner than a
 * set time: an e-mail is owed, and whether there is an account is looked up when that is made, by the worker.
 */
export async function requestReset(email: string, language: Language): Promise<void> {
  const requestId = newId();
  await evenly(EVEN_TIME, () =>
    inTransaction((tx) =>
      owe(tx, {
        kind: "reset-password",
        dedupeKey: `reset-password:${requestId}`,
        recipient: email,
        language,
        payload: { requestId },
      }),
    ),
  );
}

/**
 * The link of a wish for a new password, for its e-mail: made at the first try, the same at any further one. Null where
 * the address has no account, or the link has been used or replaced meanwhile.
 */
export async function resetTokenFor(requestId: string, email: string): Promise<TokenForEmail | null> {
  const account = await findAccountByEmail(email);
  if (account === null || account.disabledAt !== null) return null;
  await inTransaction(async (tx) => {
    if (!(await tokenExists(tx, requestId))) await issueToken(tx, account.id, "reset_password", requestId);
  });
  return tokenForEmail(requestId);
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
