import { db, inTransaction } from "db/client.server";
import { emails } from "db/schema/schema";
import { and, desc, eq, ne, sql } from "drizzle-orm";
import { logger } from "~/platform/logger.server";
import { sendMail } from "~/platform/mailer.server";
import { enqueue } from "~/platform/queue.server";
import { makeEmail } from "./render.server";

/** After so many tries an e-mail has failed, whatever its job says. The queue itself allows thirteen. */
const MOST_TRIES = 20;
/** A waiting e-mail this old (minutes) whose job cannot be found gets a new one. */
const LOST_AFTER = 5;

/** Written as the failure of an e-mail whose reason went away before it was sent (an invitation withdrawn). */
export const NO_LONGER_NEEDED = "no longer needed";

/**
 * Sends one e-mail that is owed; does nothing when it was sent or has failed for good. The row is locked while the SMTP
 * server is spoken to, so that no second worker sends it too. A worker that dies between the server's acceptance and
 * the commit leaves the row as `sending`: it is sent once more, with the same Message-ID.
 *
 * @param last whether the queue will not try again: the e-mail is then marked as failed, for the studio to see.
 * Throws when it could not be sent now and the queue is to try again.
 */
export async function sendOwedEmail(emailId: string, { last }: { last: boolean }): Promise<void> {
  const [begun] = await db
    .update(emails)
    .set({ state: "sending", attempts: sql`${emails.attempts} + 1` })
    .where(and(eq(emails.id, emailId), sql`${emails.state} in ('waiting', 'sending')`))
    .returning({ attempts: emails.attempts });
  if (begun === undefined) return;

  const refusal = await inTransaction(async (tx) => {
    const [email] = await tx.db
      .select()
      .from(emails)
      .where(and(eq(emails.id, emailId), eq(emails.state, "sending")))
      .for("update", { skipLocked: true });
    if (email === undefined) throw new Error("another worker is sending this e-mail");
    try {
      const made = await makeEmail(email);
      if (made === null) {
        await tx.db
          .update(emails)
          // Whose address it was is nobody's business any more: perhaps only somebody's mistake.
          .set({ state: "failed", failure: NO_LONGER_NEEDED, recipient: "" })
          .where(eq(emails.id, emailId));
        return null;
      }
      await sendMail({ to: email.recipient, messageId: email.messageId, ...made });
    } catch (error) {
      const failed = last || isFinal(error) || email.attempts >= MOST_TRIES;
      await tx.db
        .update(emails)
        .set({ state: failed ? "failed" : "waiting", failure: reasonOf(error) })
        .where(eq(emails.id, emailId));
      if (failed) logger.error({ emailId, kind: email.kind, err: error }, "e-mail failed for good");
      return failed ? null : error;
    }
    await tx.db
      .update(emails)
      .set({ state: "sent", sentAt: sql`now()`, failure: null })
      .where(eq(emails.id, emailId));
    return null;
  });
  if (refusal !== null) throw refusal;
}

/** A permanent refusal of the recipient (RFC 5321, section 4.2.1: a reply 5yz) does not become better by trying again. */
function isFinal(error: unknown): boolean {
  if (!(error instanceof Error)) return false;
  const code = "responseCode" in error ? error.responseCode : undefined;
  const command = "command" in error ? error.command : undefined;
  return typeof code === "number" && code >= 550 && code < 560 && command === "RCPT TO";
}

/** The SMTP server's own words, or what went wrong here; never longer than a line. */
function reasonOf(error: unknown): string {
  const text = error instanceof Error ? error.message : String(error);
  return text.replace(/\s+/g, " ").slice(0, 300);
}

/**
 * Gives a new job to e-mails that wait without one: a job may be lost with a restored backup or be removed by hand; the
 * debt stands in the table. Returns how many.
 */
export async function resendWaiting(): Promise<number> {
  const { rows } = await db.execute<{ id: string }>(sql`
    select e.id from emails e
     where e.state in ('waiting', 'sending') and e.created_at < now() - make_interval(mins => ${LOST_AFTER})
       and not exists (
         select from pgboss.job j
          where j.name = 'send-email' and j.data->>'emailId' = e.id::text and j.state in ('created', 'retry', 'active'))
     order by e.created_at limit 500`);
  for (const { id } of rows) await enqueue("send-email", { emailId: id }, { singletonKey: id });
  return rows.length;
}

export type FailedEmail = {
  id: string;
  kind: string;
  recipient: string;
  failure: string;
  orderId: string | null;
  createdAt: Date;
};

/** E-mails that have failed for good and are still wanted, newest first: the studio has to know. */
export async function failedEmails(limit = 50): Promise<FailedEmail[]> {
  const rows = await db
    .select()
    .from(emails)
    .where(and(eq(emails.state, "failed"), ne(emails.failure, NO_LONGER_NEEDED)))
    .orderBy(desc(emails.createdAt))
    .limit(limit);
  return rows.map(({ id, kind, recipient, failure, orderId, createdAt }) => ({
    id,
    kind,
    recipient,
    failure: failure ?? "",
    orderId,
    createdAt,
  }));
}

/** Tries a failed e-mail again, by a person's wish. Returns whether there was one. */
export async function sendAgain(emailId: string): Promise<boolean> {
  return inTransaction(async (tx) => {
    const [row] = await tx.db
      .update(emails)
      .set({ state: "waiting", attempts: 0 })
      .where(and(eq(emails.id, emailId), eq(emails.state, "failed")))
      .returning({ id: emails.id });
    if (row === undefined) return false;
    await enqueue("send-email", { emailId }, { client: tx.client });
    return true;
  });
}
