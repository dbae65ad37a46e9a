import { z } from "zod";
import { defineJob } from "./job";

/** Money that is to go back to a card. */
export const sendRefundJob = defineJob("send-refund", z.object({ refundId: z.uuid() }));
