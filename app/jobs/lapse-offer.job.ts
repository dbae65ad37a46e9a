import { z } from "zod";

/** An offered number has waited long enough. */
export const lapseOffer = z.object({ offerId: z.string() });
