import { expect } from "@playwright/test";
import { mailUrl, shopUrl } from "./instance";

/** One message as the mail server that catches everything shows it. */
export type Mail = {
  id: string;
  from: string;
  to: string[];
  subject: string;
  text: string;
  html: string | null;
  headers: Record<string, string | string[]>;
};

/** Every message an address has been sent, newest first. */
export async function mailsTo(address: string): Promise<Mail[]> {
  const answer = await fetch(`${mailUrl}/messages?to=${encodeURIComponent(address)}`);
  return await answer.json();
}

/** The newest message to an address whose subject fits; waits for it to arrive. */
export async function readMail(address: string, subject: RegExp): Promise<Mail> {
  let found: Mail | undefined;
  await expect
    .poll(
      async () => {
        const mails = await mailsTo(address);
        found = mails.find((mail) => subject.test(mail.subject));
        return found === undefined ? mails.map((mail) => mail.subject) : "arrived";
      },
      { message: `an e-mail to ${address} about ${subject}`, timeout: 45_000 },
    )
    .toBe("arrived");
  if (found === undefined) throw new Error("unreachable");
  return found;
}

/** The first address of the shop that a message's text carries and that fits. */
export function linkIn(mail: Mail, path: RegExp): string {
  const links = mail.text.match(/https?:\/\/[^\s<>")]+/g) ?? [];
  const link = links.find((text) => text.startsWith(shopUrl) && path.test(new URL(text).pathname));
  if (link === undefined) throw new Error(`no link ${path} in "${mail.subject}":\n${mail.text}`);
  return link;
}
