import { sendOwedEmail } from "~/emails/send.server";
import { handle } from "./job";
import { sendEmailJob } from "./send-email.job";

export const handler = handle(sendEmailJob, ({ emailId }, { last }) => sendOwedEmail(emailId, { last }));
