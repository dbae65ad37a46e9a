import { settleSession } from "~/domain/orders/settle.server";
import { handle } from "./job";
import { settlePaymentJob } from "./settle-payment.job";

export const handler = handle(settlePaymentJob, async ({ stripeSessionId }) => {
  await settleSession(stripeSessionId);
});
