import { Field } from "~/components/form/field";
import type { FormState } from "~/components/form/form-state";
import { CountrySelect } from "~/components/form/select";
import { useMessages } from "~/languages/messages";

export type AddressFieldsProps = {
  form: FormState;
  /** Before each name: "address" makes `address.line1`. */
  prefix?: string;
  /** In the order they are to be shown (`countriesByName`). */
  countries: readonly { code: string; name: string }[];
  /** For `autocomplete`: "shipping", "billing". */
  section?: string;
  required?: boolean;
};

/** The fields of a postal address, as `addressSchema` reads them. Put them into a `Fieldset` of two columns. */
export function AddressFields({
  form,
  prefix = "address",
  countries,
  section,
  required = true,
}: AddressFieldsProps) {
  const words = useMessages().account.address;
  const name = (part: string) => (prefix === "" ? part : `${prefix}.${part}`);
  const complete = (token: string) => (section === undefined ? token : `${section} ${token}`);
  const country = form.field(name("country"));
  return (
    <>
      <Field
        {...form.field(name("name"))}
        label={words.name}
        autoComplete={complete("name")}
        required={required}
        span
      />
      <Field
        {...form.field(name("line1"))}
        label={words.line1}
        autoComplete={complete("address-line1")}
        required={required}
        span
      />
      <Field
        {...form.field(name("line2"))}
        label={words.line2}
        autoComplete={complete("address-line2")}
        span
      />
      <Field
        {...form.field(name("postcode"))}
        label={words.postcode}
        autoComplete={complete("postal-code")}
      />
      <Field
        {...form.field(name("city"))}
        label={words.city}
        autoComplete={complete("address-level2")}
        required={required}
      />
      <Field
        {...form.field(name("region"))}
        label={words.region}
        hint={words.regionHint}
        autoComplete={complete("address-level1")}
      />
      <CountrySelect
        name={country.name}
        value={country.defaultValue}
        error={country.error}
        label={words.country}
        blank={words.chooseCountry}
        autoComplete={complete("country")}
        countries={countries}
        required={required}
      />
    </>
  );
}
