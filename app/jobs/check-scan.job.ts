import { z } from "zod";
import { defineJob } from "./job";

/** Looks at a file that has arrived and decides whether it counts as a scan. */
export const checkScanJob = defineJob("check-scan", z.object({ scanId: z.uuid() }));
