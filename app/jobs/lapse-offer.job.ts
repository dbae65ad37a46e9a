import { z } from "zod";
import { defineJob } from "./job";

/** An offered number has waited long enough. */
export const lapseOfferJob = defineJob("lapse-offer", z.object({ offerId: z.uuid() }));
