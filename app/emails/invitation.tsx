import { href } from "react-router";
import { formatInstant } from "~/domain/dates";
import { INVITATION, invitationForEmail } from "~/domain/people/invitations.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailLayout, EmailPress, EmailText } from "./layout";
import { emailStudio, pageAddress } from "./studio.server";

/** Invites somebody to an account with a role. */
export const invitation: EmailBuilder<"invitation"> = async ({ invitationId }, language) => {
  const found = await invitationForEmail(invitationId);
  if (found === null) return null;
  const { invitation: w, common } = messagesOf(language).emails;
  const { zone } = await theStudio();
  const studio = await emailStudio();
  const token = linkToken(INVITATION, found.seed);
  const values = { inviter: found.invitedBy, studio: studio.name, role: w.roles[found.role] };
  return {
    subject: fill(w.subject, values),
    body: (
      <EmailLayout
        language={language}
        title={w.title}
        preview={w.preview}
        studio={studio}
        reason={fill(w.reason, values)}
      >
        <EmailText>{fill(common.greeting, { name: found.name })}</EmailText>
        <EmailText>{fill(w.text, values)}</EmailText>
        <EmailText>
          {fill(w.until, { time: formatInstant(found.expiresAt, zone, LANGUAGE_TAG[language]) })}
        </EmailText>
        <EmailPress to={pageAddress(href("/:lang?/invitation/:token", { lang: segmentOf(language), token }))}>
          {w.press}
        </EmailPress>
        <EmailText quiet>{w.notYou}</EmailText>
      </EmailLayout>
    ),
  };
};
