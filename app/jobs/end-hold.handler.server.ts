import { endHold } from "~/domain/orders/end-hold.server";
import { endHoldJob } from "./end-hold.job";
import { handle } from "./job";

export const handler = handle(endHoldJob, async ({ orderId }) => {
  await endHold(orderId, "expired");
});
