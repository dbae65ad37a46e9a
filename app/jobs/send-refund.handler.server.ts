import { sendRefund } from "~/domain/orders/refunds.server";
import { sendRefundJob } from "./send-refund.job";

export async function handle(data: unknown): Promise<void> {
  await sendRefund(sendRefundJob.parse(data).refundId);
}
