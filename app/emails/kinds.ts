import { z } from "zod";

/**
 * Every kind of e-mail, with the ids its builder needs. Payloads lie in the database and hold ids only: never a
 * link, a secret or an address; those are looked up when the e-mail is made.
 *
 * To add one: a line here, a file `app/emails/<kind>.tsx` that exports its builder, a line in
 * `registry.server.ts` (the compiler asks for it), and its words in `app/languages/<language>/emails.ts`.
 */
export const EMAIL_PAYLOADS = {
  "verify-email": z.object({ tokenId: z.uuid() }),
  "reset-password": z.object({ tokenId: z.uuid() }),
  /** To somebody who signed up with an address that has an account already. */
  "account-exists": z.object({ accountId: z.uuid() }),
  /** To the former address of an account whose e-mail was changed. */
  "email-changed": z.object({ accountId: z.uuid() }),
  invitation: z.object({ invitationId: z.uuid() }),
};

export type EmailKind = keyof typeof EMAIL_PAYLOADS;
export type EmailPayload<K extends EmailKind> = z.output<(typeof EMAIL_PAYLOADS)[K]>;

/** Whether a text names a kind of e-mail. */
export function isEmailKind(text: string): text is EmailKind {
  return Object.hasOwn(EMAIL_PAYLOADS, text);
}
