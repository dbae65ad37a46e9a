import { db, pool } from "db/client.server";
import { accountTokens, emails } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { afterAll, afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { disableAccount } from "~/domain/people/accounts.server";
import { requestReset, resetPassword } from "~/domain/people/reset-password.server";
import { findSession } from "~/domain/people/sessions.server";
import { signIn } from "~/domain/people/sign-in.server";
import { findToken } from "~/domain/people/tokens.server";
import { makeEmail } from "~/emails/render.server";
import { failedEmails, NO_LONGER_NEEDED, sendOwedEmail } from "~/emails/send.server";
import { holdClock } from "~/platform/clock";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { makeAccount, owedTo, PASSWORD } from "../support/people";
import { makeStudio } from "../support/shop";

const NEW = "wind over the chalk";
const EMAIL = "merrin@oakshade.example";

// Hashing is slow on purpose, and slower where several tests do it at once.
vi.setConfig({ testTimeout: 60_000 });

beforeEach(async () => {
  await (await testDatabase()).reset();
  await makeStudio();
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
  const token = made?.text.match(/\/reset\/([\w-]+)/)?.[1];
  if (token === undefined) throw new Error("no letter with a link");
  expect(made?.html).toContain(token);
  return token;
}

describe("a forgotten password", () => {
  test("is set anew by the link, once; every session of the account ends and one begins", async () => {
    await makeAccount(EMAIL, ["collector"], { verified: false });
    const before = await signIn(EMAIL, PASSWORD);
    await requestReset(EMAIL.toUpperCase(), "en");
    const token = await tokenOf(EMAIL.toUpperCase());
    // Mail programs open links by themselves: looking uses nothing up.
    expect(await findToken("reset_password", token)).not.toBeNull();
    expect(await findToken("reset_password", token)).not.toBeNull();
    const outcome = await resetPassword(token, NEW);
    if (outcome.code !== "reset") throw new Error(outcome.code);
    expect(before.code === "signed_in" && (await findSession(before.session.secret))).toBeNull();
    expect(await findSession(outcome.session.secret)).toMatchObject({ email: EMAIL, emailVerified: true });
    expect(await signIn(EMAIL, PASSWORD)).toEqual({ code: "wrong" });
    expect((await signIn(EMAIL, NEW)).code).toBe("signed_in");
    expect(await resetPassword(token, "yet another sentence")).toEqual({ code: "gone" });
    expect((await signIn(EMAIL, NEW)).code).toBe("signed_in");
  });

  test("of two presses at once, one sets it", async () => {
    await makeAccount(EMAIL, ["collector"]);
    await requestReset(EMAIL, "en");
    const token = await tokenOf(EMAIL);
    const outcomes = await Promise.all([
      resetPassword(token, NEW),
      resetPassword(token, "the other sentence"),
    ]);
    expect(outcomes.map((outcome) => outcome.code).sort()).toEqual(["gone", "reset"]);
  });

  test("the link runs out after an hour, and a newer one ends it", async () => {
    await makeAccount(EMAIL, ["collector"]);
    await requestReset(EMAIL, "en");
    const first = await tokenOf(EMAIL);
    await requestReset(EMAIL, "en");
    const second = await tokenOf(EMAIL);
    expect(second).not.toBe(first);
    expect(await resetPassword(first, NEW)).toEqual({ code: "gone" });
    holdClock(new Date(Date.now() + 61 * 60_000));
    expect(await resetPassword(second, NEW)).toEqual({ code: "gone" });
  });

  test("a link for another purpose does not serve", async () => {
    await makeAccount(EMAIL, ["collector"]);
    await requestReset(EMAIL, "en");
    expect(await findToken("verify_email", await tokenOf(EMAIL))).toBeNull();
  });

  test("nothing is sent to an address without an account, or with a disabled one", async () => {
    const photographer = await makeAccount("sunniva@harcastle.example", ["photographer"]);
    const closed = await makeAccount("closed@oakshade.example", ["collector"]);
    await disableAccount(photographer, closed.accountId);
    for (const address of ["nobody@oakshade.example", closed.email]) {
      await requestReset(address, "en");
      const [owed] = await owedTo(address);
      await sendOwedEmail(owed?.id ?? "", { last: false });
      const [row] = await db
        .select()
        .from(emails)
        .where(eq(emails.id, owed?.id ?? ""));
      expect(row).toMatchObject({ state: "failed", failure: NO_LONGER_NEEDED, recipient: "" });
    }
    expect(await failedEmails()).toEqual([]);
    expect(await db.select().from(accountTokens)).toEqual([]);
  });

  test("a letter that is made twice has the same link", async () => {
    await makeAccount(EMAIL, ["collector"]);
    await requestReset(EMAIL, "en");
    expect(await tokenOf(EMAIL)).toBe(await tokenOf(EMAIL));
  });

  test("no link, secret or address lies in the token's row or the e-mail's payload", async () => {
    await makeAccount(EMAIL, ["collector"]);
    await requestReset(EMAIL, "en");
    const token = await tokenOf(EMAIL);
    const rows = JSON.stringify([await db.select().from(accountTokens), await db.select().from(emails)]);
    expect(rows).not.toContain(token);
  });
});
