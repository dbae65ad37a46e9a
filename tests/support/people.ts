import { db } from "db/client.server";
import { accountRoles, accounts, emails, parties } from "db/schema/schema";
import { desc, eq } from "drizzle-orm";
import type { Actor } from "~/domain/people/allowed";
import { hashPassword } from "~/domain/people/passwords.server";
import type { Role } from "~/domain/people/permissions";
import { newId } from "~/platform/ids.server";

export const PASSWORD = "reeds beside the lock";

/** Hashing is slow on purpose; one hash of `PASSWORD` serves all accounts of a test file. */
let hash: Promise<string> | undefined;

export type MadeAccount = Actor & { partyId: string; email: string };

/** A party with an account, as a test needs it. */
export async function makeAccount(
  email: string,
  roles: Role[],
  options: { verified?: boolean; passwordHash?: string; partyId?: string; createdAt?: Date } = {},
): Promise<MadeAccount> {
  hash ??= hashPassword(PASSWORD);
  const accountId = newId();
  const partyId = options.partyId ?? newId();
  const name = email.split("@")[0] ?? email;
  if (options.partyId === undefined) await db.insert(parties).values({ id: partyId, name, email });
  await db.insert(accounts).values({
    id: accountId,
    partyId,
    email,
    passwordHash: options.passwordHash ?? (await hash),
    emailVerifiedAt: options.verified === false ? null : new Date(),
    ...(options.createdAt === undefined ? {} : { createdAt: options.createdAt }),
  });
  if (roles.length > 0) await db.insert(accountRoles).values(roles.map((role) => ({ accountId, role })));
  return { accountId, partyId, email, roles };
}

/** The e-mails that are owed to somebody, newest first. */
export async function owedTo(recipient: string): Promise<(typeof emails.$inferSelect)[]> {
  return db.select().from(emails).where(eq(emails.recipient, recipient)).orderBy(desc(emails.id));
}

/** The middle one of an odd number of figures. */
export function median(figures: readonly number[]): number {
  const sorted = [...figures].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? Number.NaN;
}
