import { z } from "zod";
import { inviteForm, partyForm } from "./account-forms";
import { addressSchema } from "./address";
import { ROLES } from "./permissions";

/** The forms of the people page, told apart by `intent`. */
export const peopleForm = z.discriminatedUnion("intent", [
  inviteForm.extend({ intent: z.literal("invite") }),
  z.object({ intent: z.literal("withdraw"), invitationId: z.uuid() }),
  z.object({ intent: z.literal("resend"), invitationId: z.uuid() }),
]);

const accountId = z.uuid();
const role = z.enum(ROLES, "Please choose a role.");

/** An address, or nothing at all in any of its lines. */
const addressOrNone = z.preprocess((value) => {
  if (typeof value !== "object" || value === null) return null;
  return Object.values(value).every((part) => part === "") ? null : value;
}, addressSchema.nullable());

/** The forms of a party's page, told apart by `intent`. */
export const partyPageForm = z.discriminatedUnion("intent", [
  partyForm.extend({ intent: z.literal("party"), address: addressOrNone }),
  z.object({ intent: z.literal("grant"), accountId, role }),
  z.object({ intent: z.literal("revoke"), accountId, role }),
  z.object({ intent: z.literal("disable"), accountId }),
  z.object({ intent: z.literal("enable"), accountId }),
  z.object({ intent: z.literal("end-sessions"), accountId }),
]);
