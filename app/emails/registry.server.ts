import type { z } from "zod";
import type { Language } from "~/languages/language";
import { accountExists } from "./account-exists";
import type { BuiltEmail } from "./built-email";
import { dispatch } from "./dispatch";
import { emailChanged } from "./email-changed";
import { invitation } from "./invitation";
import { type EmailKind, EMAIL_PAYLOADS as payloads } from "./kinds";
import { newOrder } from "./new-order";
import { numberOffer } from "./number-offer";
import { orderConfirmation } from "./order-confirmation";
import { payLink } from "./pay-link";
import { refund } from "./refund";
import { resetPassword } from "./reset-password";
import { verifyEmail } from "./verify-email";

/** Checks a row's payload, then builds. */
type Build = (payload: unknown, language: Language, recipient: string) => Promise<BuiltEmail | null>;

function from<S extends z.ZodType>(
  schema: S,
  build: (payload: z.output<S>, language: Language, recipient: string) => Promise<BuiltEmail | null>,
): Build {
  return (payload, language, recipient) => build(schema.parse(payload), language, recipient);
}

/** One builder (see `built-email.ts`) for every kind in `kinds.ts`. */
export const BUILDERS: Record<EmailKind, Build> = {
  "verify-email": from(payloads["verify-email"], verifyEmail),
  "reset-password": from(payloads["reset-password"], resetPassword),
  "account-exists": from(payloads["account-exists"], accountExists),
  "email-changed": from(payloads["email-changed"], emailChanged),
  invitation: from(payloads.invitation, invitation),
  "order-confirmation": from(payloads["order-confirmation"], orderConfirmation),
  "new-order": from(payloads["new-order"], newOrder),
  refund: from(payloads.refund, refund),
  dispatch: from(payloads.dispatch, dispatch),
  "number-offer": from(payloads["number-offer"], numberOffer),
  "pay-link": from(payloads["pay-link"], payLink),
};
