import { z } from "zod";
import { defineJob } from "./job";

/** Builds the proofs of a print's picture: its crop, for the shop. */
export const buildPrintProofsJob = defineJob("build-print-proofs", z.object({ printPictureId: z.uuid() }));
