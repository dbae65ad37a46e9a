import { db, inTransaction, type Tx } from "db/client.server";
import {
  accountRoles,
  accounts,
  parties,
  setupCodes,
  studio,
  taxRates,
  vatRegistrations,
} from "db/schema/schema";
import { insertReference, knowsStandardRate } from "db/seed/reference";
import { and, eq, isNull, sql } from "drizzle-orm";
import { isoDayInZone } from "~/domain/dates";
import { hashPassword } from "~/domain/people/passwords.server";
import { type StartedSession, startSession } from "~/domain/people/sessions.server";
import { now } from "~/platform/clock";
import { env } from "~/platform/env.server";
import { newId, sha256 } from "~/platform/ids.server";
import type { SetupForm } from "./setup-form";
import { forgetStudio } from "./studio.server";

/** Case, spaces and hyphens of a code that is typed off a screen do not matter. */
function hashOfCode(code: string): string {
  return sha256(code.toLowerCase().replace(/[^a-z0-9]/g, ""));
}

/** Lets a one-time code set the studio up. Only its hash is kept; a code that was used stays used. */
export async function offerSetupCode(code: string): Promise<void> {
  await db
    .insert(setupCodes)
    .values({ codeHash: hashOfCode(code) })
    .onConflictDoNothing();
}

async function isOpen(from: Pick<Tx, "db">): Promise<boolean> {
  if (env.NUMBERLEAF_MODE === "demo") return false;
  const [photographer] = await from.db
    .select({ accountId: accountRoles.accountId })
    .from(accountRoles)
    .where(eq(accountRoles.role, "photographer"))
    .limit(1);
  return photographer === undefined;
}

/**
 * Whether a visitor with the code may set the studio up: it has no photographer, and is not the demo. The code that
 * the environment names (`SETUP_CODE`) is offered with it.
 */
export async function setupIsOpen(): Promise<boolean> {
  const open = await isOpen({ db });
  if (open && env.SETUP_CODE !== "") await offerSetupCode(env.SETUP_CODE);
  return open;
}

export type SetupOutcome =
  | { code: "set_up"; session: StartedSession }
  | { code: "wrong_code" }
  /** Somebody has set it up meanwhile, perhaps the same person pressing twice. */
  | { code: "closed" }
  /** Registered for VAT in a country whose rate the tables do not know. */
  | { code: "rate_needed" };

/**
 * Makes the studio, its photographer's party and account, their role, the VAT registration and the tables a new studio
 * begins with, in one transaction, and signs the photographer in. The code is used up.
 */
export async function setUp(form: SetupForm): Promise<SetupOutcome> {
  const today = isoDayInZone(now(), form.zone);
  if (form.vat !== null && form.vat.basisPoints === null && !knowsStandardRate(form.vat.country, today)) {
    return { code: "rate_needed" };
  }
  // The code is looked at before the password is hashed: strangers must not make the server work.
  if (!(await codeIsGood(form.code))) return { code: (await isOpen({ db })) ? "wrong_code" : "closed" };
  const passwordHash = await hashPassword(form.newPassword);
  const outcome = await inTransaction<SetupOutcome>(async (tx) => {
    await tx.db.execute(sql`select pg_advisory_xact_lock(7025011)`);
    if (!(await isOpen(tx))) return { code: "closed" };
    const used = await tx.db
      .update(setupCodes)
      .set({ usedAt: now() })
      .where(and(eq(setupCodes.codeHash, hashOfCode(form.code)), isNull(setupCodes.usedAt)))
      .returning({ codeHash: setupCodes.codeHash });
    if (used.length === 0) return { code: "wrong_code" };
    const accountId = await insertPhotographer(tx, form, passwordHash);
    await insertStudio(tx, form, today);
    return { code: "set_up", session: await startSession(tx, accountId) };
  });
  forgetStudio();
  return outcome;
}

async function codeIsGood(code: string): Promise<boolean> {
  const [row] = await db
    .select({ codeHash: setupCodes.codeHash })
    .from(setupCodes)
    .where(and(eq(setupCodes.codeHash, hashOfCode(code)), isNull(setupCodes.usedAt)));
  return row !== undefined;
}

async function insertPhotographer(tx: Tx, form: SetupForm, passwordHash: string): Promise<string> {
  const at = now();
  const partyId = newId(at.getTime());
  const accountId = newId(at.getTime());
  await tx.db.insert(parties).values({
    id: partyId,
    name: form.photographer,
    email: form.email,
    address: form.address,
    createdAt: at,
  });
  // Whoever holds the code runs the machine: there is nobody else who could vouch for the address.
  await tx.db.insert(accounts).values({
    id: accountId,
    partyId,
    email: form.email,
    passwordHash,
    emailVerifiedAt: at,
    createdAt: at,
  });
  await tx.db.insert(accountRoles).values({ accountId, role: "photographer" });
  return accountId;
}

async function insertStudio(tx: Tx, form: SetupForm, today: string): Promise<void> {
  const { country } = form.address;
  await tx.db.insert(studio).values({
    name: form.studioName,
    photographer: form.photographer,
    signature: form.signature,
    email: form.email,
    address: form.address,
    country,
    zone: form.zone,
    currency: form.currency,
  });
  await insertReference(tx, { country, currency: form.currency, from: today });
  if (form.vat === null) return;
  const { country: vatCountry, number, from, basisPoints } = form.vat;
  await tx.db
    .insert(vatRegistrations)
    .values({ id: newId(), country: vatCountry, number, validFrom: from, validTo: null });
  if (basisPoints !== null && !knowsStandardRate(vatCountry, today)) {
    await tx.db.insert(taxRates).values({
      id: newId(),
      country: vatCountry,
      kind: "standard",
      basisPoints,
      validFrom: from,
      validTo: null,
      source: "entered by the studio at set-up",
    });
  }
}
