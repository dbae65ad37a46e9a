import type { ReactElement } from "react";
import type { Language } from "~/languages/language";
import type { EmailKind, EmailPayload } from "./kinds";

/** An e-mail ready to be rendered. */
export type BuiltEmail = {
  subject: string;
  /** An `<EmailLayout>`; the text version is made from it too. */
  body: ReactElement;
  replyTo?: string;
};

/**
 * Looks up what a payload's ids stand for and makes the e-mail; null when the reason for it has gone (a link that was
 * used or withdrawn), which is then noted and not sent. Links are made here: they are in no row and no job.
 */
export type EmailBuilder<K extends EmailKind> = (
  payload: EmailPayload<K>,
  language: Language,
  recipient: string,
) => Promise<BuiltEmail | null>;
