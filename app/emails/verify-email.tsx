import { href } from "react-router";
import { tokenForEmail } from "~/domain/people/tokens.server";
import { segmentOf } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailLayout, EmailPress, EmailText } from "./layout";
import { emailStudio, pageAddress } from "./studio.server";

/** Asks the holder of an address to confirm it. */
export const verifyEmail: EmailBuilder<"verify-email"> = async ({ tokenId }, language) => {
  const found = await tokenForEmail(tokenId);
  if (found === null) return null;
  const words = messagesOf(language).emails;
  const token = linkToken(found.purpose, found.seed);
  const link = pageAddress(href("/:lang?/verify/:token", { lang: segmentOf(language), token }));
  const { verifyEmail: w, common } = words;
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
