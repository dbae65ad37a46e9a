import { Form } from "react-router";
import { AddressFields } from "~/components/form/address-fields";
import { Check } from "~/components/form/check";
import { Field } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { CountrySelect, Select } from "~/components/form/select";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import type { FormProblem } from "~/platform/form-fields";

export type SetupPageProps = {
  title: string;
  lists: {
    zones: readonly string[];
    /** Named by the server: browsers do not all have the same names. */
    currencies: readonly { code: string; name: string }[];
    countries: readonly { code: string; name: string }[];
  };
  problem?: FormProblem;
};

/** What a new studio is asked once. */
export function SetupPage({ title, lists, problem }: SetupPageProps) {
  const form = formState(problem, {}, { form: "code" });
  const busy = useBusy();
  const country = form.field("vatCountry");
  return (
    <div className="flow">
      <h1>{title}</h1>
      <p className="lead">Six things, and the shop is yours. All but the currency can be changed later.</p>
      <Problems form={form} />
      <Form method="post" className="form-parts">
        <Fieldset legend="The code" hint="The start command has printed it. It works once.">
          <Field
            {...form.field("code")}
            label="One-time code"
            autoComplete="off"
            spellCheck={false}
            required
          />
        </Fieldset>
        <Fieldset legend="You">
          <Field {...form.field("photographer")} label="Photographer’s name" autoComplete="name" required />
          <Field
            {...form.field("email")}
            label="E-mail address"
            hint="You sign in with it, and buyers write to it."
            type="email"
            autoComplete="username"
            required
          />
          <Field
            {...form.field("newPassword")}
            label="Password"
            hint="At least 12 characters. A sentence is easy to keep and hard to guess. It is not shown again if something else has to be put right."
            type="password"
            autoComplete="new-password"
            required
          />
        </Fieldset>
        <Fieldset legend="The studio">
          <Field
            {...form.field("studioName")}
            label="Name of the studio"
            hint="As it stands at the head of the shop."
            autoComplete="organization"
            required
          />
          <Field
            {...form.field("signature")}
            label="Signature"
            hint="As you sign under a print; it stands at the right of every margin line."
            required
          />
        </Fieldset>
        <Fieldset legend="Its address" columns={2} hint="On invoices, certificates and parcels.">
          <AddressFields form={form} countries={lists.countries} />
        </Fieldset>
        <Fieldset legend="Its clock and its money">
          <Select
            {...form.field("zone")}
            label="Time zone"
            hint="Releases, legal days and tax days are told by it."
            blank="Choose a zone"
            options={lists.zones.map((zone) => ({ value: zone, label: zone.replaceAll("_", " ") }))}
            required
          />
          <Select
            {...form.field("currency")}
            label="Currency"
            hint="All prices are in it. It cannot be changed once something has been sold."
            blank="Choose a currency"
            options={lists.currencies.map(({ code, name }) => ({ value: code, label: `${code}, ${name}` }))}
            required
          />
        </Fieldset>
        <Fieldset
          legend="Value added tax"
          columns={2}
          hint="Leave this empty if you are not registered: then nothing in the shop mentions VAT. These figures are a guide; ask your accountant before you rely on a rate or a scheme."
        >
          <Check {...form.box("vatRegistered")} label="The studio is registered for VAT" span />
          <CountrySelect
            name="vatCountry"
            value={country.defaultValue}
            error={country.error}
            label="Registered in"
            hint="The studio’s own country if left open."
            blank="The studio’s country"
            autoComplete="off"
            countries={lists.countries}
          />
          <Field {...form.field("vatNumber")} label="VAT number" autoComplete="off" />
          <Field {...form.field("vatFrom")} label="Registered since" hint="The first day." type="date" />
          <Field
            {...form.field("vatRate")}
            label="Standard rate"
            hint="Only where it is not known here."
            unit="%"
            width="short"
            inputMode="decimal"
          />
        </Fieldset>
        <p className="form-acts">
          <Press busy={busy}>Set up the studio</Press>
        </p>
      </Form>
    </div>
  );
}
