import argon2 from "argon2";
import { db, pool } from "db/client.server";
import { accounts, sessions } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { afterAll, afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { disableAccount } from "~/domain/people/accounts.server";
import { hashPassword, isOutdated, passwordQueue } from "~/domain/people/passwords.server";
import { findSession } from "~/domain/people/sessions.server";
import { signIn } from "~/domain/people/sign-in.server";
import { signUp } from "~/domain/people/sign-up.server";
import { tokenForEmail } from "~/domain/people/tokens.server";
import { verifyEmail } from "~/domain/people/verify-email.server";
import { authenticator } from "~/middleware/authenticator.server";
import { holdClock } from "~/platform/clock";
import { linkToken } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { makeAccount, median, owedTo, PASSWORD } from "../support/people";

// Hashing is slow on purpose, and slower where several tests do it at once.
vi.setConfig({ testTimeout: 60_000 });

beforeEach(async () => {
  await (await testDatabase()).reset();
});
afterEach(() => holdClock(undefined));
afterAll(async () => {
  await stopQueue();
  await pool.end();
});

describe("signing in", () => {
  test("with the right password starts a session, whatever the capitals of the address", async () => {
    const made = await makeAccount("Merrin@oakshade.example", ["collector"]);
    const outcome = await signIn("merrin@OAKSHADE.example", PASSWORD);
    expect(outcome).toMatchObject({ code: "signed_in", accountId: made.accountId, roles: ["collector"] });
    if (outcome.code !== "signed_in") return;
    const found = await findSession(outcome.session.secret);
    expect(found).toMatchObject({ accountId: made.accountId, emailVerified: true, roles: ["collector"] });
    const [row] = await db.select().from(sessions);
    expect(JSON.stringify(row)).not.toContain(outcome.session.secret);
  });

  test("says the same of a wrong password and an unknown address", async () => {
    await makeAccount("merrin@oakshade.example", ["collector"]);
    expect(await signIn("merrin@oakshade.example", "not the password")).toEqual({ code: "wrong" });
    expect(await signIn("nobody@oakshade.example", PASSWORD)).toEqual({ code: "wrong" });
    expect(await db.select().from(sessions)).toEqual([]);
  });

  test("takes as long for an unknown address, because a hash is made there too", async () => {
    await makeAccount("merrin@oakshade.example", ["collector"]);
    const took = { known: [] as number[], unknown: [] as number[] };
    for (let i = 0; i < 5; i++) {
      for (const [kind, email] of [
        ["known", "merrin@oakshade.example"],
        ["unknown", "nobody@oakshade.example"],
      ] as const) {
        const started = performance.now();
        await signIn(email, "not the password");
        took[kind].push(performance.now() - started);
      }
    }
    // Without the hash the unknown address would be tens of times faster; noise of a busy machine is not that large.
    const ratio = median(took.unknown) / median(took.known);
    expect(ratio).toBeGreaterThan(0.5);
    expect(ratio).toBeLessThan(2);
  });

  test("is refused with a disabled account, and its sessions have ended", async () => {
    const photographer = await makeAccount("sunniva@harcastle.example", ["photographer"]);
    const made = await makeAccount("odalric@harcastle.example", ["assistant"]);
    const before = await signIn(made.email, PASSWORD);
    await disableAccount(photographer, made.accountId);
    expect(await signIn(made.email, PASSWORD)).toEqual({ code: "disabled" });
    expect(await signIn(made.email, "not the password")).toEqual({ code: "wrong" });
    expect(before.code === "signed_in" && (await findSession(before.session.secret))).toBeNull();
  });

  test("goes through remix-auth's form strategy", async () => {
    await makeAccount("merrin@oakshade.example", ["collector"]);
    const send = (password: string) =>
      authenticator.authenticate(
        "form",
        new Request("http://shop.example/sign-in", {
          method: "POST",
          body: new URLSearchParams({ email: "merrin@oakshade.example", password }),
        }),
      );
    expect(await send(PASSWORD)).toMatchObject({ code: "signed_in" });
    expect(await send("")).toEqual({ code: "wrong" });
  });
});

describe("passwords", () => {
  test("are hashed with RFC 9106's second recommended parameters", async () => {
    // Source: RFC 9106, section 4: argon2id, t=3, p=4, m=2^16 KiB, 128-bit salt, 256-bit tag.
    const hash = await hashPassword(PASSWORD);
    const [, algorithm, version, parameters, salt = "", tag = ""] = hash.split("$");
    expect([algorithm, version, parameters]).toEqual(["argon2id", "v=19", "m=65536,t=3,p=4"]);
    expect(Buffer.from(salt, "base64")).toHaveLength(16);
    expect(Buffer.from(tag, "base64")).toHaveLength(32);
    expect(isOutdated(hash)).toBe(false);
  });

  test("are hashed two at a time", async () => {
    const all = Array.from({ length: 4 }, () => hashPassword(PASSWORD));
    expect(passwordQueue()).toEqual({ running: 2, waiting: 2 });
    await Promise.all(all);
    expect(passwordQueue()).toEqual({ running: 0, waiting: 0 });
  });

  test("hashed with former parameters are hashed anew at the next sign-in", async () => {
    const passwordHash = await argon2.hash(PASSWORD, {
      type: argon2.argon2id,
      memoryCost: 19_456,
      timeCost: 2,
      parallelism: 1,
    });
    const made = await makeAccount("merrin@oakshade.example", ["collector"], { passwordHash });
    expect((await signIn(made.email, PASSWORD)).code).toBe("signed_in");
    const [row] = await db.select().from(accounts).where(eq(accounts.id, made.accountId));
    expect(row?.passwordHash).toContain("m=65536,t=3,p=4");
    expect((await signIn(made.email, PASSWORD)).code).toBe("signed_in");
  });
});

describe("signing up", () => {
  const form = {
    name: "Merrin Oakshade",
    email: "merrin@oakshade.example",
    newPassword: PASSWORD,
    language: "de" as const,
  };

  async function verificationToken(email: string): Promise<string> {
    const owed = (await owedTo(email)).find((row) => row.kind === "verify-email");
    const found = await tokenForEmail(String(owed?.payload.tokenId));
    if (found === null) throw new Error("no token");
    return linkToken(found.purpose, found.seed);
  }

  test("makes an unproved collector and owes the letter, in the language of the page", async () => {
    await signUp(form);
    const outcome = await signIn(form.email, PASSWORD);
    expect(outcome).toMatchObject({ code: "signed_in", roles: ["collector"] });
    expect(outcome.code === "signed_in" && (await findSession(outcome.session.secret))).toMatchObject({
      emailVerified: false,
      name: "Merrin Oakshade",
    });
    expect(await owedTo(form.email)).toMatchObject([
      { kind: "verify-email", language: "de", state: "waiting" },
    ]);
  });

  test("twice at once makes one account and one letter", async () => {
    await Promise.all([signUp(form), signUp({ ...form, email: "MERRIN@oakshade.example" })]);
    expect(await db.select().from(accounts)).toHaveLength(1);
    expect([...(await owedTo(form.email)), ...(await owedTo("MERRIN@oakshade.example"))]).toHaveLength(1);
  });

  test("with an address that has an account changes nothing and tells its holder", async () => {
    const made = await makeAccount(form.email, ["collector"], {
      createdAt: new Date(Date.now() - 86_400_000),
    });
    await signUp({ ...form, newPassword: "somebody else entirely" });
    expect((await signIn(form.email, PASSWORD)).code).toBe("signed_in");
    expect(await signIn(form.email, "somebody else entirely")).toEqual({ code: "wrong" });
    expect(await owedTo(form.email)).toMatchObject([
      { kind: "account-exists", payload: { accountId: made.accountId } },
    ]);
  });

  test("the letter's link proves the address only together with the password or the account's own session", async () => {
    await signUp(form);
    const token = await verificationToken(form.email);
    const stranger = { accountId: null, password: undefined };
    expect(await verifyEmail(token, stranger)).toEqual({ code: "wrong_password" });
    expect(await verifyEmail(token, { accountId: null, password: "a guess at it" })).toEqual({
      code: "wrong_password",
    });
    const verified = await verifyEmail(token, { accountId: null, password: PASSWORD });
    expect(verified).toMatchObject({ code: "verified" });
    expect(verified.code === "verified" && verified.session !== null).toBe(true);
    expect(await verifyEmail(token, { accountId: null, password: PASSWORD })).toEqual({ code: "gone" });
    const [row] = await db.select().from(accounts);
    expect(row?.emailVerifiedAt).not.toBeNull();
  });

  test("the link runs out after seven days", async () => {
    await signUp(form);
    const token = await verificationToken(form.email);
    holdClock(new Date(Date.now() + 7 * 86_400_000 + 60_000));
    expect(await verifyEmail(token, { accountId: null, password: PASSWORD })).toEqual({ code: "gone" });
  });
});
