import type { Tx } from "db/client.server";
import { emails } from "db/schema/schema";
import type { Language } from "~/languages/language";
import { env } from "~/platform/env.server";
import { newId } from "~/platform/ids.server";
import { enqueue } from "~/platform/queue.server";
import type { EmailKind, EmailPayload } from "./kinds";

export type OwedEmail<K extends EmailKind> = {
  kind: K;
  /** Makes the debt single: a second e-mail with the same key is never sent ("order-confirmation:<order id>"). */
  dedupeKey: string;
  recipient: string;
  language: Language;
  payload: EmailPayload<K>;
  /** The order it belongs to, for that order's history. */
  orderId?: string;
};

/**
 * Owes somebody an e-mail, as part of the change that is the reason for it: row and job exist exactly if the
 * transaction commits. The Message-ID is fixed here, so that a repeat after a crash is recognised as one.
 *
 * @returns the e-mail's id, or null when it was owed already.
 */
export async function owe<K extends EmailKind>(tx: Tx, email: OwedEmail<K>): Promise<string | null> {
  const id = newId();
  const [row] = await tx.db
    .insert(emails)
    .values({
      id,
      kind: email.kind,
      dedupeKey: email.dedupeKey,
      recipient: email.recipient,
      language: email.language,
      payload: { ...email.payload },
      messageId: `<${newId()}@${new URL(env.BASE_URL).hostname}>`,
      orderId: email.orderId ?? null,
    })
    .onConflictDoNothing({ target: emails.dedupeKey })
    .returning({ id: emails.id });
  if (row === undefined) return null;
  await enqueue("send-email", { emailId: id }, { client: tx.client });
  return id;
}
