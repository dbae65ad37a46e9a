import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { db, inTransaction, pool } from "db/client.server";
import { emails } from "db/schema/schema";
import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, beforeEach, describe, expect, test } from "vitest";
import { EMAIL_PAYLOADS } from "~/emails/kinds";
import { owe } from "~/emails/owe.server";
import { BUILDERS } from "~/emails/registry.server";
import { failedEmails, resendWaiting, sendAgain, sendOwedEmail } from "~/emails/send.server";
import { handler } from "~/jobs/send-email.handler.server";
import { env } from "~/platform/env.server";
import { newId } from "~/platform/ids.server";
import { stopQueue } from "~/platform/queue.server";
import { createMailFake, type MailFake } from "../../scripts/mail-fake/server";
import { testDatabase } from "../support/database";
import { makeAccount } from "../support/people";
import { makeStudio } from "../support/shop";

const MERRIN = "merrin@oakshade.example";
let fake: MailFake;
let folder: string;
let mailPage: string;
let accountId: string;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "numberleaf-emails-"));
  fake = createMailFake({ smtpPort: Number(new URL(env.SMTP_URL).port), mailPort: 0, dataDir: folder });
  ({ url: mailPage } = await fake.listen());
});
afterAll(async () => {
  await stopQueue();
  await fake.close();
  await pool.end();
  await rm(folder, { recursive: true, force: true });
});
beforeEach(async () => {
  await (await testDatabase()).reset();
  await fetch(new URL("/messages", mailPage), { method: "DELETE" });
  await switches({ reset: true });
  await makeStudio();
  ({ accountId } = await makeAccount(MERRIN, ["collector"], { passwordHash: "no password can be right" }));
});

async function switches(change: Record<string, unknown>): Promise<void> {
  await fetch(new URL("/-/switches", mailPage), {
    method: "POST",
    headers: { "Content-Type": "application/json" },
    body: JSON.stringify(change),
  });
}

type Caught = { subject: string; text: string; html: string; headers: Record<string, string> };
async function caught(): Promise<Caught[]> {
  const answer = await fetch(new URL(`/messages?to=${encodeURIComponent(MERRIN)}`, mailPage));
  return answer.json();
}

async function oweOne(dedupeKey = newId()): Promise<string | null> {
  return inTransaction((tx) =>
    owe(tx, { kind: "account-exists", dedupeKey, recipient: MERRIN, language: "de", payload: { accountId } }),
  );
}

async function owed(): Promise<string> {
  const id = await oweOne();
  if (id === null) throw new Error("not owed");
  return id;
}

async function rowOf(id: string) {
  const [row] = await db.select().from(emails).where(eq(emails.id, id));
  if (row === undefined) throw new Error("no row");
  return row;
}

async function jobsFor(id: string): Promise<number> {
  const { rows } = await db.execute<{ n: number }>(
    sql`select count(*) as n from pgboss.job where name = 'send-email' and data->>'emailId' = ${id}`,
  );
  return rows[0]?.n ?? 0;
}

describe("owing an e-mail", () => {
  test("is one with the change that is the reason for it, and happens once", async () => {
    const id = await oweOne("a reason");
    expect(await jobsFor(id ?? "")).toBe(1);
    expect(await oweOne("a reason")).toBeNull();
    let lost: string | null = null;
    const change = inTransaction(async (tx) => {
      const email = {
        kind: "account-exists",
        dedupeKey: "undone",
        recipient: MERRIN,
        language: "en",
      } as const;
      lost = await owe(tx, { ...email, payload: { accountId } });
      throw new Error("the change is undone");
    });
    await expect(change).rejects.toThrow("undone");
    expect(await jobsFor(lost ?? "")).toBe(0);
    expect(await db.select().from(emails)).toHaveLength(1);
  });

  test("every kind has a builder", () => {
    expect(Object.keys(BUILDERS).sort()).toEqual(Object.keys(EMAIL_PAYLOADS).sort());
  });
});

describe("sending", () => {
  test("hands HTML and text from one source over, under the Message-ID of the row, once", async () => {
    const id = await owed();
    await handler.run({ emailId: id }, { attempt: 1, last: false, signal: new AbortController().signal });
    await sendOwedEmail(id, { last: false });
    const [message, ...more] = await caught();
    expect(more).toEqual([]);
    const row = await rowOf(id);
    expect(row).toMatchObject({ state: "sent", attempts: 1 });
    expect(message?.headers["message-id"]).toBe(row.messageId);
    expect(message?.headers["auto-submitted"]).toBe("auto-generated");
    expect(message?.subject).toBe("Sie haben schon ein Konto bei uns");
    for (const body of [message?.text, message?.html]) {
      expect(body).toContain(MERRIN);
      expect(body).toContain(`${env.BASE_URL}/de/sign-in`);
      expect(body).toContain("Harcastle Test Photographs");
    }
    expect(message?.html).toContain('lang="de-DE"');
  });

  test("two workers with one e-mail send it once", async () => {
    const id = await owed();
    await switches({ delayMs: 300 });
    const results = await Promise.allSettled([
      sendOwedEmail(id, { last: false }),
      sendOwedEmail(id, { last: false }),
    ]);
    expect(results.some((result) => result.status === "fulfilled")).toBe(true);
    expect(await caught()).toHaveLength(1);
    expect((await rowOf(id)).state).toBe("sent");
  });

  test("after a crash between acceptance and commit it is sent once more, with the same Message-ID", async () => {
    const id = await owed();
    await switches({ loseReplyNext: 1 });
    await expect(sendOwedEmail(id, { last: false })).rejects.toThrow();
    // What a killed worker leaves behind.
    await db.update(emails).set({ state: "sending" }).where(eq(emails.id, id));
    await sendOwedEmail(id, { last: false });
    const ids = (await caught()).map((message) => message.headers["message-id"]);
    expect(ids).toEqual([(await rowOf(id)).messageId, (await rowOf(id)).messageId]);
  });

  test("is tried again while the server is not answering, and fails in sight when the queue gives up", async () => {
    const id = await owed();
    await switches({ failNext: 2, failCode: 451 });
    await expect(sendOwedEmail(id, { last: false })).rejects.toThrow();
    expect(await rowOf(id)).toMatchObject({ state: "waiting", attempts: 1 });
    expect(await failedEmails()).toEqual([]);
    await sendOwedEmail(id, { last: true });
    expect(await failedEmails()).toMatchObject([{ id, kind: "account-exists", recipient: MERRIN }]);
    expect((await failedEmails())[0]?.failure).toMatch(/451/);
    expect(await caught()).toEqual([]);
    expect(await sendAgain(id)).toBe(true);
    expect(await sendAgain(id)).toBe(false);
    await sendOwedEmail(id, { last: false });
    expect(await caught()).toHaveLength(1);
    expect(await failedEmails()).toEqual([]);
  });

  test("fails in sight when it cannot be made", async () => {
    const id = await owed();
    await db.update(emails).set({ kind: "of-another-time" }).where(eq(emails.id, id));
    await expect(sendOwedEmail(id, { last: false })).rejects.toThrow("of-another-time");
    await sendOwedEmail(id, { last: true });
    expect(await failedEmails()).toMatchObject([{ id, kind: "of-another-time" }]);
  });
});

describe("the sweep", () => {
  test("gives a new job to an e-mail whose job is lost, and to no other", async () => {
    const lost = await owed();
    const waiting = await owed();
    const fresh = await owed();
    await db.update(emails).set({ createdAt: sql`now() - interval '10 minutes'` }).where(eq(emails.id, lost));
    await db
      .update(emails)
      .set({ createdAt: sql`now() - interval '10 minutes'` })
      .where(eq(emails.id, waiting));
    await db.execute(sql`delete from pgboss.job where data->>'emailId' in (${lost}, ${fresh})`);
    expect(await resendWaiting()).toBe(1);
    expect([await jobsFor(lost), await jobsFor(waiting), await jobsFor(fresh)]).toEqual([1, 1, 0]);
    expect(await resendWaiting()).toBe(0);
  });
});
