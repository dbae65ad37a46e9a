import { z } from "zod";

/** The time of an order's hold has come to its end. */
export const endHoldJob = z.object({ orderId: z.string() });
