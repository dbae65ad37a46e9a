import { href } from "react-router";
import { accountForEmail } from "~/domain/people/find-account.server";
import { segmentOf } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import type { EmailBuilder } from "./built-email";
import { EmailLayout, EmailPress, EmailText } from "./layout";
import { emailStudio, pageAddress } from "./studio.server";

/** To somebody whose address was given for a second account. */
export const accountExists: EmailBuilder<"account-exists"> = async ({ accountId }, language) => {
  const account = await accountForEmail(accountId);
  if (account === null) return null;
  const { accountExists: w, common } = messagesOf(language).emails;
  const lang = segmentOf(language);
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
        <EmailText>{fill(common.greeting, { name: account.name })}</EmailText>
        <EmailText>{fill(w.text, { email: account.email })}</EmailText>
        <EmailPress to={pageAddress(href("/:lang?/sign-in", { lang }))}>{w.press}</EmailPress>
        <EmailText quiet>
          {fill(w.forgotten, { link: pageAddress(href("/:lang?/forgotten", { lang })) })}
        </EmailText>
      </EmailLayout>
    ),
  };
};
