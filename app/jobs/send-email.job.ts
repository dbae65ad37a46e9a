import { z } from "zod";
import { defineJob } from "./job";

/** Sends one e-mail that is owed. */
export const sendEmailJob = defineJob("send-email", z.object({ emailId: z.uuid() }));
