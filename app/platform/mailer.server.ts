import nodemailer from "nodemailer";
import { env } from "./env.server";

const transport = nodemailer.createTransport(env.SMTP_URL, {
  from: env.MAIL_FROM,
  disableFileAccess: true,
  disableUrlAccess: true,
});

export type OutgoingMail = {
  to: string;
  subject: string;
  html: string;
  text: string;
  messageId: string;
  replyTo?: string;
};

/** Hands one e-mail to the SMTP service; throws when it is not accepted. */
export async function sendMail(mail: OutgoingMail): Promise<void> {
  await transport.sendMail({ ...mail, headers: { "Auto-Submitted": "auto-generated" } });
}
