import { sendRefund } from "~/domain/orders/refunds.server";
import { handle } from "./job";
import { sendRefundJob } from "./send-refund.job";

export const handler = handle(sendRefundJob, async ({ refundId }) => {
  await sendRefund(refundId);
});
