import { db, type Tx } from "db/client.server";
import { accounts, accountTokens, parties } from "db/schema/schema";
import { and, eq, isNull } from "drizzle-orm";
import { now } from "~/platform/clock";
import { newId, newLinkToken, sha256 } from "~/platform/ids.server";

export type TokenPurpose = (typeof accountTokens.$inferSelect)["purpose"];

const HOUR = 60 * 60 * 1000;
/** How long a link may be used (milliseconds). */
export const TOKEN_LASTS: Record<TokenPurpose, number> = {
  verify_email: 7 * 24 * HOUR,
  reset_password: HOUR,
};

/**
 * Makes a single-use link for an account; earlier ones for the same purpose end. Returns the row's id, from which
 * the e-mail makes the link again: only its hash can be looked up.
 */
export async function issueToken(
  tx: Tx,
  accountId: string,
  purpose: TokenPurpose,
  id: string = newId(),
): Promise<string> {
  const at = now();
  await endTokens(tx, accountId, purpose);
  const { seed, hash } = newLinkToken(purpose);
  await tx.db.insert(accountTokens).values({
    id,
    accountId,
    purpose,
    tokenSeed: seed,
    tokenHash: hash,
    createdAt: at,
    expiresAt: new Date(at.getTime() + TOKEN_LASTS[purpose]),
  });
  return id;
}

/** Whether a link was ever made under an id. */
export async function tokenExists(tx: Pick<Tx, "db">, tokenId: string): Promise<boolean> {
  return (await tx.db.$count(accountTokens, eq(accountTokens.id, tokenId))) > 0;
}

/** Ends an account's unused links for a purpose. */
export async function endTokens(tx: Pick<Tx, "db">, accountId: string, purpose: TokenPurpose): Promise<void> {
  await tx.db
    .update(accountTokens)
    .set({ usedAt: now() })
    .where(
      and(
        eq(accountTokens.accountId, accountId),
        eq(accountTokens.purpose, purpose),
        isNull(accountTokens.usedAt),
      ),
    );
}

export type TokenHolder = {
  tokenId: string;
  accountId: string;
  partyId: string;
  email: string;
  name: string;
  passwordHash: string | null;
  emailVerifiedAt: Date | null;
};

const holder = {
  tokenId: accountTokens.id,
  accountId: accounts.id,
  partyId: accounts.partyId,
  email: accounts.email,
  name: parties.name,
  passwordHash: accounts.passwordHash,
  emailVerifiedAt: accounts.emailVerifiedAt,
  expiresAt: accountTokens.expiresAt,
  usedAt: accountTokens.usedAt,
  disabledAt: accounts.disabledAt,
};

type Row = TokenHolder & { expiresAt: Date; usedAt: Date | null; disabledAt: Date | null };

function ifGood(row: Row | undefined): TokenHolder | null {
  if (row === undefined || row.usedAt !== null || row.disabledAt !== null || row.expiresAt <= now())
    return null;
  const { expiresAt: _, usedAt: __, disabledAt: ___, ...rest } = row;
  return rest;
}

/** Whose link it is, if it can still be used. Looking does not use it: mail programs open links by themselves. */
export async function findToken(purpose: TokenPurpose, token: string): Promise<TokenHolder | null> {
  const [row] = await db
    .select(holder)
    .from(accountTokens)
    .innerJoin(accounts, eq(accounts.id, accountTokens.accountId))
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(and(eq(accountTokens.purpose, purpose), eq(accountTokens.tokenHash, sha256(token))));
  return ifGood(row);
}

/** Uses a link up: of two that come at once, one gets null. */
export async function useToken(tx: Tx, purpose: TokenPurpose, token: string): Promise<TokenHolder | null> {
  const [row] = await tx.db
    .select(holder)
    .from(accountTokens)
    .innerJoin(accounts, eq(accounts.id, accountTokens.accountId))
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(and(eq(accountTokens.purpose, purpose), eq(accountTokens.tokenHash, sha256(token))))
    .for("update", { of: [accountTokens, accounts] });
  const good = ifGood(row);
  if (good !== null) {
    await tx.db.update(accountTokens).set({ usedAt: now() }).where(eq(accountTokens.id, good.tokenId));
  }
  return good;
}

export type TokenForEmail = { purpose: TokenPurpose; seed: string; email: string; name: string };

/** What the e-mail of a link needs; null once it cannot be used any more. */
export async function tokenForEmail(tokenId: string): Promise<TokenForEmail | null> {
  const [row] = await db
    .select({ ...holder, purpose: accountTokens.purpose, seed: accountTokens.tokenSeed })
    .from(accountTokens)
    .innerJoin(accounts, eq(accounts.id, accountTokens.accountId))
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(eq(accountTokens.id, tokenId));
  if (row === undefined || ifGood(row) === null) return null;
  return { purpose: row.purpose, seed: row.seed, email: row.email, name: row.name };
}
