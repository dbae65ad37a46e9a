import { z } from "zod";
import { defineJob } from "./job";

/** The time of an order's hold has come to its end. */
export const endHoldJob = defineJob("end-hold", z.object({ orderId: z.uuid() }));
