import { db, inTransaction, type Tx } from "db/client.server";
import { accountRoles, accounts, invitations, parties } from "db/schema/schema";
import { and, desc, eq, gt, isNull, sql } from "drizzle-orm";
import { owe } from "~/emails/owe.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId, newLinkToken, sha256 } from "~/platform/ids.server";
import { type Actor, mustBeAllowed } from "./allowed";
import { findAccountByEmail } from "./find-account.server";
import { hashPassword } from "./passwords.server";
import type { Role } from "./permissions";
import { endSessions, type StartedSession, startSession } from "./sessions.server";
import { endTokens } from "./tokens.server";

/** Purpose of the link token (`linkToken` in `ids.server.ts`). */
export const INVITATION = "invitation";

/** How long an invitation may be accepted (milliseconds). */
export const INVITATION_LASTS = 14 * 24 * 60 * 60 * 1000;

type InvitationRow = typeof invitations.$inferSelect;

/** Can still be accepted. */
const pending = () =>
  and(isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt), gt(invitations.expiresAt, now()));

export type InviteOutcome =
  | { code: "invited"; invitationId: string }
  /** Somebody with an account is given the role there. */
  | { code: "has_account"; partyId: string }
  | { code: "already_invited" };

/** Invites somebody by e-mail to an account with a role; for a party of the book if given (a gallery's second account). */
export async function invite(
  actor: Actor,
  form: { name: string; email: string; role: Role; partyId?: string },
): Promise<InviteOutcome> {
  mustBeAllowed(actor, "people.change");
  return inTransaction(async (tx) => {
    // Two invitations to one address at once are made one after the other.
    await tx.db.execute(sql`select pg_advisory_xact_lock(7025010, hashtext(lower(${form.email})))`);
    const account = await findAccountByEmail(form.email, tx);
    if (account !== null) return { code: "has_account", partyId: account.partyId };
    const [waiting] = await tx.db
      .select({ id: invitations.id })
      .from(invitations)
      .where(and(sql`lower(${invitations.email}) = lower(${form.email})`, pending()));
    if (waiting !== undefined) return { code: "already_invited" };
    const at = now();
    const { seed, hash } = newLinkToken(INVITATION);
    const id = newId(at.getTime());
    await tx.db.insert(invitations).values({
      id,
      email: form.email,
      name: form.name,
      role: form.role,
      partyId: form.partyId ?? null,
      invitedBy: actor.accountId,
      tokenSeed: seed,
      tokenHash: hash,
      createdAt: at,
      expiresAt: new Date(at.getTime() + INVITATION_LASTS),
    });
    await oweInvitation(tx, { id, email: form.email, tokenHash: hash });
    return { code: "invited", invitationId: id };
  });
}

async function oweInvitation(tx: Tx, row: Pick<InvitationRow, "id" | "email" | "tokenHash">): Promise<void> {
  await owe(tx, {
    kind: "invitation",
    dedupeKey: `invitation:${row.id}:${row.tokenHash.slice(0, 16)}`,
    recipient: row.email,
    language: "en",
    payload: { invitationId: row.id },
  });
}

/** Withdraws an invitation; its link ends. Returns whether it was still open. */
export async function withdrawInvitation(actor: Actor, invitationId: string): Promise<boolean> {
  mustBeAllowed(actor, "people.change");
  const rows = await db
    .update(invitations)
    .set({ withdrawnAt: now() })
    .where(
      and(eq(invitations.id, invitationId), isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt)),
    )
    .returning({ id: invitations.id });
  return rows.length === 1;
}

/** Sends an invitation again with a new link; the former one ends. Returns whether there was one to send. */
export async function resendInvitation(actor: Actor, invitationId: string): Promise<boolean> {
  mustBeAllowed(actor, "people.change");
  return inTransaction(async (tx) => {
    const { seed, hash } = newLinkToken(INVITATION);
    const [row] = await tx.db
      .update(invitations)
      .set({
        tokenSeed: seed,
        tokenHash: hash,
        expiresAt: new Date(now().getTime() + INVITATION_LASTS),
      })
      .where(
        and(
          eq(invitations.id, invitationId),
          isNull(invitations.acceptedAt),
          isNull(invitations.withdrawnAt),
        ),
      )
      .returning();
    if (row === undefined) return false;
    await oweInvitation(tx, row);
    return true;
  });
}

export type OpenInvitation = {
  id: string;
  name: string;
  email: string;
  role: Role;
  createdAt: Date;
  expiresAt: Date;
  expired: boolean;
};

/** Invitations neither accepted nor withdrawn, newest first; those that have run out may be sent again. */
export async function openInvitations(): Promise<OpenInvitation[]> {
  const rows = await db
    .select()
    .from(invitations)
    .where(and(isNull(invitations.acceptedAt), isNull(invitations.withdrawnAt)))
    .orderBy(desc(invitations.createdAt));
  return rows.map(({ id, name, email, role, createdAt, expiresAt }) => ({
    id,
    name,
    email,
    role,
    createdAt,
    expiresAt,
    expired: expiresAt <= now(),
  }));
}

export type Invited = { id: string; name: string; email: string; role: Role; invitedBy: string };

/** Whom a link invites, if it can still be accepted. Looking does not use it. */
export async function findInvitation(token: string): Promise<Invited | null> {
  return invitationWhere(and(eq(invitations.tokenHash, sha256(token)), pending()));
}

/** What the e-mail of an invitation needs; null once it cannot be accepted any more. */
export async function invitationForEmail(
  invitationId: string,
): Promise<(Invited & { seed: string; expiresAt: Date }) | null> {
  return invitationWhere(and(eq(invitations.id, invitationId), pending()));
}

async function invitationWhere(
  condition: ReturnType<typeof and>,
): Promise<(Invited & { seed: string; expiresAt: Date }) | null> {
  const [row] = await db
    .select({
      id: invitations.id,
      name: invitations.name,
      email: invitations.email,
      role: invitations.role,
      invitedBy: parties.name,
      seed: invitations.tokenSeed,
      expiresAt: invitations.expiresAt,
    })
    .from(invitations)
    .innerJoin(accounts, eq(accounts.id, invitations.invitedBy))
    .innerJoin(parties, eq(parties.id, accounts.partyId))
    .where(condition);
  return row ?? null;
}

export type AcceptOutcome = { code: "accepted"; session: StartedSession; role: Role } | { code: "gone" };

/**
 * Accepts an invitation: makes the account with its role and signs in. The link came by e-mail, so the address is
 * proved. If somebody has signed up with the address meanwhile, that account is taken over by the holder of the
 * link: new password, former sessions ended.
 */
export async function acceptInvitation(
  token: string,
  form: { name: string; newPassword: string },
): Promise<AcceptOutcome> {
  if ((await findInvitation(token)) === null) return { code: "gone" };
  const passwordHash = await hashPassword(form.newPassword);
  return inTransaction(async (tx) => {
    const at = now();
    const [row] = await tx.db
      .update(invitations)
      .set({ acceptedAt: at })
      .where(and(eq(invitations.tokenHash, sha256(token)), pending()))
      .returning();
    if (row === undefined) return { code: "gone" };
    const existing = await findAccountByEmail(row.email, tx);
    const accountId = existing?.id ?? newId(at.getTime());
    if (existing !== null) {
      if (existing.disabledAt !== null) throw new AppError("not_allowed", "the account is disabled");
      await tx.db
        .update(accounts)
        .set({ passwordHash, emailVerifiedAt: existing.emailVerifiedAt ?? at })
        .where(eq(accounts.id, accountId));
      await endTokens(tx, accountId, "verify_email");
      await endTokens(tx, accountId, "reset_password");
      await endSessions(tx, accountId);
    } else {
      const partyId = row.partyId ?? newId(at.getTime());
      if (row.partyId === null) {
        await tx.db.insert(parties).values({ id: partyId, name: form.name, email: row.email, createdAt: at });
      }
      await tx.db.insert(accounts).values({
        id: accountId,
        partyId,
        email: row.email,
        passwordHash,
        emailVerifiedAt: at,
        createdAt: at,
      });
    }
    await tx.db
      .insert(accountRoles)
      .values({ accountId, role: row.role, grantedBy: row.invitedBy })
      .onConflictDoNothing();
    return { code: "accepted", session: await startSession(tx, accountId), role: row.role };
  });
}
