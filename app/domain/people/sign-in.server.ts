import { db, inTransaction } from "db/client.server";
import { accountRoles, accounts } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { findAccountByEmail } from "./find-account.server";
import { hashPassword, isOutdated, verifyPassword } from "./passwords.server";
import type { Role } from "./permissions";
import { type StartedSession, startSession } from "./sessions.server";

export type SignInOutcome =
  | { code: "signed_in"; session: StartedSession; accountId: string; roles: Role[] }
  /** Address or password: it is not said which. */
  | { code: "wrong" }
  /** Said only to whoever knows the password. */
  | { code: "disabled" };

/** Signs somebody in. An address without an account takes as long as a wrong password, and gets the same answer. */
export async function signIn(email: string, password: string): Promise<SignInOutcome> {
  const account = await findAccountByEmail(email);
  const right = await verifyPassword(account?.passwordHash ?? null, password);
  if (account === null || !right) return { code: "wrong" };
  if (account.disabledAt !== null) return { code: "disabled" };
  // Made with former parameters: this is the only moment at which the password is known.
  const renewed =
    account.passwordHash !== null && isOutdated(account.passwordHash) ? await hashPassword(password) : null;
  const session = await inTransaction(async (tx) => {
    if (renewed !== null) {
      await tx.db.update(accounts).set({ passwordHash: renewed }).where(eq(accounts.id, account.id));
    }
    return startSession(tx, account.id);
  });
  return { code: "signed_in", session, accountId: account.id, roles: await rolesOf(account.id) };
}

/** The roles of an account. */
export async function rolesOf(accountId: string): Promise<Role[]> {
  const rows = await db
    .select({ role: accountRoles.role })
    .from(accountRoles)
    .where(eq(accountRoles.accountId, accountId));
  return rows.map((row) => row.role);
}
