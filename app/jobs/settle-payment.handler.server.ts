import { settleSession } from "~/domain/orders/settle.server";
import { settlePayment } from "./settle-payment.job";

export async function handle(data: unknown): Promise<void> {
  await settleSession(settlePayment.parse(data).stripeSessionId);
}
