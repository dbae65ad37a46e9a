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
  /** To whatever address was typed: whether it has an account is found out when the e-mail is made, and only then. */
  "reset-password": z.object({ requestId: z.uuid() }),
  /** To somebody who signed up with an address that has an account already. */
  "account-exists": z.object({ accountId: z.uuid() }),
  /** To the former address of an account whose e-mail was changed. */
  "email-changed": z.object({ accountId: z.uuid() }),
  invitation: z.object({ invitationId: z.uuid() }),
  /** To the buyer: what was bought, with its numbers. */
  "order-confirmation": z.object({ orderId: z.uuid() }),
  /** To the studio. */
  "new-order": z.object({ orderId: z.uuid() }),
  refund: z.object({ orderId: z.uuid(), refundId: z.uuid() }),
  dispatch: z.object({ orderId: z.uuid(), dispatchId: z.uuid() }),
  /** To a buyer whose payment came for a number that had gone. */
  "number-offer": z.object({ orderId: z.uuid(), offerId: z.uuid() }),
  /** To a buyer for whom the studio has made an order: where to pay it. */
  "pay-link": z.object({ orderId: z.uuid() }),
};

export type EmailKind = keyof typeof EMAIL_PAYLOADS;
export type EmailPayload<K extends EmailKind> = z.output<(typeof EMAIL_PAYLOADS)[K]>;

/** Whether a text names a kind of e-mail. */
export function isEmailKind(text: string): text is EmailKind {
  return Object.hasOwn(EMAIL_PAYLOADS, text);
}
