import { z } from "zod";
import { defineJob } from "./job";

/** Makes a print's proofs public, or takes them back, as the print and its editions say. */
export const publishProofsJob = defineJob(
  "publish-proofs",
  z.object({
    printId: z.uuid(),
    /** Names of objects that its pictures no longer use. */
    formerKeys: z.array(z.string()).default([]),
  }),
);
