import { accountForEmail } from "~/domain/people/find-account.server";
import { fill, messagesOf } from "~/languages/messages";
import type { EmailBuilder } from "./built-email";
import { EmailLayout, EmailText } from "./layout";
import { emailStudio } from "./studio.server";

/** To the former address of an account. It does not say what the new one is. */
export const emailChanged: EmailBuilder<"email-changed"> = async ({ accountId }, language) => {
  const account = await accountForEmail(accountId);
  if (account === null) return null;
  const { emailChanged: w, common } = messagesOf(language).emails;
  const studio = await emailStudio();
  return {
    subject: w.subject,
    replyTo: studio.email,
    body: (
      <EmailLayout language={language} title={w.title} preview={w.preview} studio={studio} reason={w.reason}>
        <EmailText>{fill(common.greeting, { name: account.name })}</EmailText>
        <EmailText>{w.text}</EmailText>
        <EmailText>{w.notYou}</EmailText>
      </EmailLayout>
    ),
  };
};
