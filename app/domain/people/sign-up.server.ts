import { inTransaction, sqlState, type Tx } from "db/client.server";
import { accountRoles, accounts, parties } from "db/schema/schema";
import { owe } from "~/emails/owe.server";
import type { Language } from "~/languages/language";
import { now } from "~/platform/clock";
import { newId } from "~/platform/ids.server";
import { evenly } from "./even-time.server";
import { findAccountByEmail } from "./find-account.server";
import { hashPassword } from "./passwords.server";
import { issueToken } from "./tokens.server";

/** Well above what either branch takes after the password has been hashed, which both do (milliseconds). */
const EVEN_TIME = 300;
const MINUTE = 60 * 1000;
const UNIQUE_VIOLATION = "23505";

export type SignUp = { name: string; email: string; newPassword: string; language: Language };

/**
 * Makes a collector's party and account, and owes the e-mail that proves the address. Where the address has an account
 * already, its holder is told so by e-mail; whoever filled in the form sees no difference.
 */
export async function signUp(form: SignUp): Promise<void> {
  const passwordHash = await hashPassword(form.newPassword);
  const attempt = () =>
    inTransaction(async (tx) => {
      const existing = await findAccountByEmail(form.email, tx);
      if (existing === null) await makeCollector(tx, form, passwordHash);
      // A form sent twice is no second visitor: the first one's e-mail is on its way.
      else if (now().getTime() - existing.createdAt.getTime() > 10 * MINUTE)
        await tellHolder(tx, existing, form);
    });
  await evenly(EVEN_TIME, async () => {
    try {
      await attempt();
    } catch (error) {
      // Two at once with one address: the second finds the first one's account.
      if (sqlState(error) !== UNIQUE_VIOLATION) throw error;
      await attempt();
    }
  });
}

async function makeCollector(tx: Tx, form: SignUp, passwordHash: string): Promise<void> {
  const at = now();
  const partyId = newId(at.getTime());
  const accountId = newId(at.getTime());
  await tx.db.insert(parties).values({ id: partyId, name: form.name, email: form.email, createdAt: at });
  await tx.db
    .insert(accounts)
    .values({ id: accountId, partyId, email: form.email, passwordHash, createdAt: at });
  await tx.db.insert(accountRoles).values({ accountId, role: "collector" });
  await oweVerification(tx, accountId, form.email, form.language);
}

async function tellHolder(tx: Tx, account: { id: string; email: string }, form: SignUp): Promise<void> {
  const hour = now().toISOString().slice(0, 13);
  await owe(tx, {
    kind: "account-exists",
    dedupeKey: `account-exists:${account.id}:${hour}`,
    recipient: account.email,
    language: form.language,
    payload: { accountId: account.id },
  });
}

/** Owes an e-mail with a new link that proves an address. */
export async function oweVerification(
  tx: Tx,
  accountId: string,
  recipient: string,
  language: Language,
): Promise<void> {
  const tokenId = await issueToken(tx, accountId, "verify_email");
  await owe(tx, {
    kind: "verify-email",
    dedupeKey: `verify-email:${tokenId}`,
    recipient,
    language,
    payload: { tokenId },
  });
}
