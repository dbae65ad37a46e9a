import { z } from "zod";

/** A payment page's state has changed at Stripe, or may have. */
export const settlePayment = z.object({ stripeSessionId: z.string() });
