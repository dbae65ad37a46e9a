import { z } from "zod";
import { defineJob } from "./job";

/** A payment page's state has changed at Stripe, or may have. */
export const settlePaymentJob = defineJob("settle-payment", z.object({ stripeSessionId: z.string() }));
