import { z } from "zod";
import { isIsoDay, isZoneName } from "~/domain/dates";
import { addressSchema } from "~/domain/people/address";
import { isCountryCode } from "~/domain/people/countries";
import { emailAddress, line, optionalText, wholeNumber } from "~/platform/form-fields";

const day = z.string().refine(isIsoDay, "Write the day as year-month-day, for example 2027-01-31.");
const sum = line("Write the sum in figures, for example 14.50.", 20);

/** The forms of the settings page, told apart by `intent`. */
export const settingsForm = z.discriminatedUnion("intent", [
  z.object({
    intent: z.literal("studio"),
    name: line("Give the studio a name.", 120),
    photographer: line("Give the photographer's name.", 120),
    signature: line("Say how the photographer signs.", 60),
    email: emailAddress("Write the studio's e-mail address like name@place.example."),
    telephone: optionalText(40),
    zone: z.string().refine(isZoneName, "Choose a time zone."),
    zoneName: optionalText(60),
    statement: optionalText(600),
    holdMinutes: wholeNumber("Hold numbers for 5 to 60 minutes.", 5, 60),
    pixelLimitMegapixels: wholeNumber("Give a limit of 1 to 1000 megapixels.", 1, 1000),
    address: addressSchema,
  }),
  z.object({
    intent: z.literal("register"),
    country: z.string().refine(isCountryCode, "Choose a country."),
    number: line("Give the registration number.", 40),
    validFrom: day,
  }),
  z.object({ intent: z.literal("end-registration"), registrationId: z.uuid(), validTo: day }),
  z.object({
    intent: z.literal("rate"),
    country: z.string().refine(isCountryCode, "Choose a country."),
    kind: z.enum(["standard", "reduced_art"], "Choose the kind of rate."),
    percent: z
      .string()
      .regex(/^\d{1,2}([.,]\d{1,2})?$/, "Write the rate in per cent, for example 20 or 5.5."),
    validFrom: day,
    source: line("Say where the rate is laid down.", 300),
  }),
  z.object({ intent: z.literal("delivery"), rateId: z.uuid(), amount: sum, validFrom: day }),
]);

export type SettingsForm = z.output<typeof settingsForm>;
