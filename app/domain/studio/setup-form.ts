import { z } from "zod";
import { isIsoDay, isZoneName } from "~/domain/dates";
import { newPassword } from "~/domain/people/account-forms";
import { addressSchema } from "~/domain/people/address";
import { isCountryCode } from "~/domain/people/countries";
import { emailAddress, line, ticked } from "~/platform/form-fields";
import { currencyCode, isCurrencyCode } from "~/platform/money";

const text = z.string().default("");

/** What the first visitor of a new studio fills in. English sentences, and keys of `account.problems` for a password. */
export const setupForm = z
  .object({
    code: line("Please enter the code that the start command printed.", 100),
    photographer: line("Please write the photographer's name.", 120),
    email: emailAddress("Please write an e-mail address like name@place.example."),
    newPassword,
    studioName: line("Please write the studio's name.", 120),
    signature: line("Please write the name as it is signed under a print.", 80),
    zone: z.string().refine(isZoneName, "Please choose the zone of the studio's clock."),
    currency: z
      .string()
      .refine(isCurrencyCode, "Please choose the currency you sell in.")
      .transform(currencyCode),
    address: addressSchema,
    vatRegistered: ticked(),
    vatCountry: text,
    vatNumber: text,
    vatFrom: text,
    vatRate: text,
  })
  .check(({ value, issues }) => {
    if (!value.vatRegistered) return;
    const complain = (path: "vatCountry" | "vatNumber" | "vatFrom" | "vatRate", message: string) =>
      issues.push({ code: "custom", input: value[path], path: [path], message });
    if (value.vatCountry !== "" && !isCountryCode(value.vatCountry)) {
      complain("vatCountry", "Please choose the country of the registration.");
    }
    if (!/^[A-Za-z0-9 .-]{4,24}$/.test(value.vatNumber))
      complain("vatNumber", "Please write the VAT number.");
    if (!isIsoDay(value.vatFrom)) complain("vatFrom", "Please give the first day of the registration.");
    if (value.vatRate !== "" && basisPointsOf(value.vatRate) === null) {
      complain("vatRate", "Please write the rate in per cent, like 20 or 5.5.");
    }
  })
  .transform(({ vatRegistered, vatCountry, vatNumber, vatFrom, vatRate, ...rest }) => ({
    ...rest,
    vat: vatRegistered
      ? {
          country: vatCountry === "" ? rest.address.country : vatCountry,
          number: vatNumber,
          from: vatFrom,
          basisPoints: basisPointsOf(vatRate),
        }
      : null,
  }));

export type SetupForm = z.output<typeof setupForm>;

/** "20", "5.5" or "5,5" per cent in basis points; null for anything else. */
export function basisPointsOf(percent: string): number | null {
  const match = /^(\d{1,2})(?:[.,](\d{1,2}))?$/.exec(percent);
  if (match === null) return null;
  return Number(match[1]) * 100 + Number((match[2] ?? "").padEnd(2, "0"));
}
