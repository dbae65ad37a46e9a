import { endHold } from "~/domain/orders/end-hold.server";
import { endHoldJob } from "./end-hold.job";

export async function handle(data: unknown): Promise<void> {
  await endHold(endHoldJob.parse(data).orderId, "expired");
}
