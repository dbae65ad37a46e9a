import { z } from "zod";
import { emailForm, nameForm, passwordForm } from "./account-forms";

/** The forms of the account page, told apart by `intent`. */
export const accountPageForm = z.discriminatedUnion("intent", [
  nameForm.extend({ intent: z.literal("name") }),
  emailForm.extend({ intent: z.literal("email") }),
  passwordForm.extend({ intent: z.literal("password") }),
  z.object({ intent: z.literal("end-session"), sessionId: z.uuid() }),
  z.object({ intent: z.literal("everywhere") }),
  z.object({ intent: z.literal("send-again") }),
]);

export type AccountIntent = z.output<typeof accountPageForm>["intent"];
