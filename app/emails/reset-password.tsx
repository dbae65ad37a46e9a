import { href } from "react-router";
import { resetTokenFor } from "~/domain/people/reset-password.server";
import { segmentOf } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailLayout, EmailPress, EmailText } from "./layout";
import { emailStudio, pageAddress } from "./studio.server";

/** The link to a new password; nothing for an address that has no account. */
export const resetPassword: EmailBuilder<"reset-password"> = async ({ requestId }, language, recipient) => {
  const found = await resetTokenFor(requestId, recipient);
  if (found === null) return null;
  const { resetPassword: w, common } = messagesOf(language).emails;
  const token = linkToken(found.purpose, found.seed);
  const link = pageAddress(href("/:lang?/reset/:token", { lang: segmentOf(language), token }));
  return {
    subject: w.subject,
    body: (
      <EmailLayout
        language={language}
        title={w.title}
        preview={w.preview}
        studio={await emailStudio()}
        reason={w.reason}
      >
        <EmailText>{fill(common.greeting, { name: found.name })}</EmailText>
        <EmailText>{fill(w.text, { email: found.email })}</EmailText>
        <EmailPress to={link}>{w.press}</EmailPress>
        <EmailText quiet>{w.notYou}</EmailText>
      </EmailLayout>
    ),
  };
};
