import { z } from "zod";

/** Money that is to go back to a card. */
export const sendRefundJob = z.object({ refundId: z.string() });
