import { db, pool } from "db/client.server";
import { accountRoles, accounts, invitations } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { afterAll, afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import {
  accountsOfParty,
  disableAccount,
  grantRole,
  revokeRole,
  studioAccounts,
} from "~/domain/people/accounts.server";
import {
  acceptInvitation,
  findInvitation,
  invite,
  openInvitations,
  resendInvitation,
  withdrawInvitation,
} from "~/domain/people/invitations.server";
import { findParties } from "~/domain/people/parties.server";
import { findSession, startSession } from "~/domain/people/sessions.server";
import { signIn } from "~/domain/people/sign-in.server";
import { makeEmail } from "~/emails/render.server";
import { holdClock } from "~/platform/clock";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { type MadeAccount, makeAccount, owedTo, PASSWORD } from "../support/people";
import { makeStudio } from "../support/shop";

vi.setConfig({ testTimeout: 60_000 });

const NO_PASSWORD = { passwordHash: "no password can be right" };
const EMAIL = "odalric@harcastle.example";
const FORM = { name: "Odalric Fenn", email: EMAIL, role: "assistant" as const };
let photographer: MadeAccount;

beforeEach(async () => {
  await (await testDatabase()).reset();
  await makeStudio();
  photographer = await makeAccount("sunniva@harcastle.example", ["photographer"], NO_PASSWORD);
});
afterEach(() => holdClock(undefined));
afterAll(async () => {
  await stopQueue();
  await pool.end();
});

/** The token in the newest letter, as its reader finds it. */
async function tokenOf(email: string): Promise<string> {
  const [owed] = await owedTo(email);
  const made = owed === undefined ? null : await makeEmail(owed);
  const token = made?.text.match(/\/invitation\/([\w-]+)/)?.[1];
  if (token === undefined) throw new Error("no letter with a link");
  return token;
}

async function invited(): Promise<string> {
  const outcome = await invite(photographer, FORM);
  if (outcome.code !== "invited") throw new Error(outcome.code);
  return outcome.invitationId;
}

describe("an invitation", () => {
  test("names inviter and role, and makes a proved account with that role, once", async () => {
    await invited();
    const [owed] = await owedTo(EMAIL);
    const made = owed === undefined ? null : await makeEmail(owed);
    expect(made?.subject).toBe("sunniva invites you to work with Harcastle Test Photographs");
    expect(made?.text).toContain("as assistant");
    const token = await tokenOf(EMAIL);
    expect(await findInvitation(token)).toMatchObject({
      name: "Odalric Fenn",
      email: EMAIL,
      role: "assistant",
    });
    const outcome = await acceptInvitation(token, { name: "Odalric F. Fenn", newPassword: PASSWORD });
    if (outcome.code !== "accepted") throw new Error(outcome.code);
    expect(await findSession(outcome.session.secret)).toMatchObject({
      name: "Odalric F. Fenn",
      emailVerified: true,
      roles: ["assistant"],
    });
    expect((await signIn(EMAIL, PASSWORD)).code).toBe("signed_in");
    expect(await acceptInvitation(token, { name: "x", newPassword: "another long one" })).toEqual({
      code: "gone",
    });
    expect(await findInvitation(token)).toBeNull();
    expect(await openInvitations()).toEqual([]);
  });

  test("of two presses at once, one accepts", async () => {
    await invited();
    const token = await tokenOf(EMAIL);
    const accept = () => acceptInvitation(token, { name: "Odalric", newPassword: PASSWORD });
    const outcomes = await Promise.all([accept(), accept()]);
    expect(outcomes.map((outcome) => outcome.code).sort()).toEqual(["accepted", "gone"]);
    expect(await db.select().from(accounts).where(eq(accounts.email, EMAIL))).toHaveLength(1);
  });

  test("is made once for an address, however often the form is sent", async () => {
    const outcomes = await Promise.all([
      invite(photographer, FORM),
      invite(photographer, { ...FORM, email: EMAIL.toUpperCase() }),
    ]);
    expect(outcomes.map((outcome) => outcome.code).sort()).toEqual(["already_invited", "invited"]);
    expect(await db.select().from(invitations)).toHaveLength(1);
  });

  test("ends when withdrawn, when sent again with a new link, and after fourteen days", async () => {
    const id = await invited();
    const first = await tokenOf(EMAIL);
    expect(await resendInvitation(photographer, id)).toBe(true);
    const second = await tokenOf(EMAIL);
    expect(second).not.toBe(first);
    expect(await findInvitation(first)).toBeNull();
    expect(await findInvitation(second)).not.toBeNull();
    holdClock(new Date(Date.now() + 15 * 86_400_000));
    expect(await findInvitation(second)).toBeNull();
    expect(await openInvitations()).toMatchObject([{ id, expired: true }]);
    holdClock(undefined);
    expect(await withdrawInvitation(photographer, id)).toBe(true);
    expect(await withdrawInvitation(photographer, id)).toBe(false);
    expect(await resendInvitation(photographer, id)).toBe(false);
    expect(await acceptInvitation(second, { name: "x", newPassword: PASSWORD })).toEqual({ code: "gone" });
    // The letter that was still owed is not made any more.
    const [owed] = await owedTo(EMAIL);
    expect(owed === undefined ? null : await makeEmail(owed)).toBeNull();
  });

  test("for an address that has an account leads to that account instead", async () => {
    const merrin = await makeAccount("merrin@oakshade.example", ["collector"], NO_PASSWORD);
    expect(await invite(photographer, { ...FORM, email: "MERRIN@oakshade.example" })).toEqual({
      code: "has_account",
      partyId: merrin.partyId,
    });
    expect(await owedTo("MERRIN@oakshade.example")).toEqual([]);
  });

  test("gives nothing to somebody who has signed up with the address meanwhile, but all to its holder", async () => {
    await invited();
    const token = await tokenOf(EMAIL);
    const squatter = await makeAccount(EMAIL, ["collector"], { ...NO_PASSWORD, verified: false });
    const session = await startSession({ db }, squatter.accountId);
    const outcome = await acceptInvitation(token, { name: "Odalric", newPassword: PASSWORD });
    if (outcome.code !== "accepted") throw new Error(outcome.code);
    expect(await findSession(session.secret)).toBeNull();
    expect(await findSession(outcome.session.secret)).toMatchObject({
      accountId: squatter.accountId,
      roles: ["assistant", "collector"],
    });
  });

  test("is made by nobody but the photographer", async () => {
    for (const role of ["assistant", "bookkeeper", "collector"] as const) {
      const actor = { accountId: photographer.accountId, roles: [role] };
      await expect(invite(actor, FORM)).rejects.toMatchObject({ code: "not_allowed" });
      await expect(grantRole(actor, photographer.accountId, "photographer")).rejects.toMatchObject({
        status: 403,
      });
    }
    expect(await db.select().from(invitations)).toEqual([]);
  });
});

describe("accounts", () => {
  test("are given and lose roles, and a second photographer makes the first dispensable", async () => {
    const odalric = await makeAccount(EMAIL, ["assistant"], NO_PASSWORD);
    const { accountId } = photographer;
    expect(await revokeRole(photographer, accountId, "photographer")).toEqual({ code: "last_photographer" });
    expect(await grantRole(photographer, odalric.accountId, "photographer")).toEqual({ code: "changed" });
    expect(await grantRole(photographer, odalric.accountId, "photographer")).toEqual({ code: "changed" });
    expect(await revokeRole(photographer, accountId, "photographer")).toEqual({ code: "changed" });
    expect(await accountsOfParty(odalric.partyId)).toMatchObject([{ roles: ["photographer", "assistant"] }]);
  });

  test("two photographers who take the role from each other at once do not leave the studio without one", async () => {
    const other = await makeAccount(EMAIL, ["photographer"], NO_PASSWORD);
    const outcomes = await Promise.all([
      revokeRole(photographer, other.accountId, "photographer"),
      disableAccount(other, photographer.accountId),
    ]);
    expect(outcomes.map((outcome) => outcome.code).sort()).toEqual(["changed", "last_photographer"]);
  });

  test("a disabled photographer does not count as one", async () => {
    const other = await makeAccount(EMAIL, ["photographer"], NO_PASSWORD);
    expect(await disableAccount(photographer, other.accountId)).toEqual({ code: "changed" });
    expect(await revokeRole(photographer, photographer.accountId, "photographer")).toEqual({
      code: "last_photographer",
    });
    expect(await disableAccount(photographer, photographer.accountId)).toEqual({ code: "yourself" });
    const rows = await db
      .select()
      .from(accountRoles)
      .where(and(eq(accountRoles.accountId, photographer.accountId), eq(accountRoles.role, "photographer")));
    expect(rows).toHaveLength(1);
  });
});

describe("the list of people", () => {
  test("shows those who work here, and finds parties by what is known of them", async () => {
    await makeAccount(EMAIL, ["assistant"], NO_PASSWORD);
    const merrin = await makeAccount("merrin@oakshade.example", ["collector"], NO_PASSWORD);
    expect((await studioAccounts()).map((account) => account.email)).toEqual([
      EMAIL,
      "sunniva@harcastle.example",
    ]);
    expect((await findParties({ q: "", page: 1 })).rows).toHaveLength(3);
    const found = await findParties({ q: "OAKSHADE", page: 7 });
    expect(found).toMatchObject({ total: 1, page: 1, pages: 1 });
    expect(found.rows).toMatchObject([{ id: merrin.partyId, roles: ["collector"], orders: 0, copies: 0 }]);
    expect((await findParties({ q: "%", page: 1 })).total).toBe(0);
  });
});
