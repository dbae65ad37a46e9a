import { z } from "zod";
import { defineJob } from "./job";

/** Builds the proofs of a whole frame, for the contact sheet. */
export const buildProofsJob = defineJob("build-proofs", z.object({ scanId: z.uuid() }));
