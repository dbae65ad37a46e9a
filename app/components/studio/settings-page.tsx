import { Form } from "react-router";
import { AddressFields } from "~/components/form/address-fields";
import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import { type FormState, formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { CountrySelect, Select } from "~/components/form/select";
import { BenchHead, Block } from "~/components/studio/bench";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import type { FormProblem } from "~/platform/form-fields";

type Country = { code: string; name: string };

export type SettingsPageProps = {
  studio: {
    name: string;
    photographer: string;
    signature: string;
    email: string;
    telephone: string;
    zone: string;
    zoneName: string;
    currency: string;
    country: string;
    statement: string;
    holdMinutes: number;
    pixelLimitMegapixels: number;
    address: Record<string, string | undefined>;
  };
  registrations: readonly {
    id: string;
    name: string;
    number: string;
    validFrom: string;
    validTo: string | null;
  }[];
  rates: readonly {
    id: string;
    name: string;
    kind: "standard" | "reduced_art";
    percent: string;
    validFrom: string;
    validTo: string | null;
    source: string;
  }[];
  delivery: readonly {
    id: string;
    zone: string;
    countries: string[];
    upToGrams: number;
    sum: string;
    currency: string;
    daysFrom: number;
    daysTo: number;
    validFrom: string;
    example: boolean;
  }[];
  zones: readonly string[];
  countries: readonly Country[];
  today: string;
  done: string | null;
  problem?: FormProblem | undefined;
};

const DONE: Record<string, string> = {
  studio: "The studio's details have been kept.",
  register: "The registration has been added.",
  "end-registration": "The registration has its last day.",
  rate: "The rate has been added.",
  delivery: "The new price holds from its day on.",
};

/** The studio's own details, its VAT registration, and the dated tables behind tax and delivery. */
export function SettingsPage(props: SettingsPageProps) {
  const { studio, problem } = props;
  const intent = typeof problem?.answers.intent === "string" ? problem.answers.intent : "";
  const of = (which: string, known: Record<string, string | undefined> = {}) =>
    formState(intent === which ? problem : undefined, known);
  const said = DONE[props.done ?? ""];
  const details = of("studio", {
    ...Object.fromEntries(Object.entries(studio.address).map(([part, value]) => [`address.${part}`, value])),
    name: studio.name,
    photographer: studio.photographer,
    signature: studio.signature,
    email: studio.email,
    telephone: studio.telephone,
    zone: studio.zone,
    zoneName: studio.zoneName,
    statement: studio.statement,
    holdMinutes: String(studio.holdMinutes),
    pixelLimitMegapixels: String(studio.pixelLimitMegapixels),
  });
  return (
    <>
      <title>Settings</title>
      <BenchHead
        title="Settings"
        says={`Prices are in ${studio.currency}; the selling currency of a studio does not change.`}
      />
      <Problems form={formState(problem)} />
      {said ? <Notice kind="done" title={said} role="status" /> : null}
      <Block title="The studio">
        <Form method="post" className="steps" preventScrollReset>
          <input type="hidden" name="intent" value="studio" />
          <Fieldset legend="Names" columns={2}>
            <Field label="Name of the studio" {...details.field("name")} required />
            <Field label="Photographer" {...details.field("photographer")} required />
            <Field
              label="Signature"
              hint="As it stands in the margin line"
              {...details.field("signature")}
              required
            />
            <Field label="E-mail" type="email" {...details.field("email")} required />
            <Field label="Telephone" type="tel" {...details.field("telephone")} />
            <TextArea label="What the shop's first page says" span rows={3} {...details.field("statement")} />
          </Fieldset>
          <Fieldset legend="Address" columns={2}>
            <AddressFields form={details} countries={props.countries} />
          </Fieldset>
          <Fieldset legend="Time and limits" columns={2}>
            <Select
              label="Time zone"
              options={props.zones.map((z) => ({ value: z, label: z.replaceAll("_", " ") }))}
              {...details.field("zone")}
            />
            <Field
              label="What the studio calls its time"
              hint="Beside times in the studio"
              {...details.field("zoneName")}
            />
            <Field
              label="Numbers are held at checkout for"
              unit="minutes"
              width="short"
              inputMode="numeric"
              {...details.field("holdMinutes")}
            />
            <Field
              label="Largest scan taken"
              unit="megapixels"
              width="short"
              inputMode="numeric"
              {...details.field("pixelLimitMegapixels")}
            />
          </Fieldset>
          <Press>Keep these details</Press>
        </Form>
      </Block>
      <Registrations {...props} form={of("register", { country: studio.country, validFrom: props.today })} />
      <Rates
        {...props}
        form={of("rate", { country: studio.country, validFrom: props.today, kind: "standard" })}
      />
      <Delivery {...props} problemOf={of("delivery")} />
    </>
  );
}

function Registrations(props: SettingsPageProps & { form: FormState }) {
  const { form } = props;
  return (
    <Block title="VAT registration">
      <p className="note">
        Without a registration on the day of an order, no VAT is charged and none is mentioned. These figures
        are a guide: ask your accountant before you rely on a rate or a scheme.
      </p>
      <Table
        caption="VAT registrations"
        rows={props.registrations}
        rowKey={(r) => r.id}
        empty={<p className="quiet">The studio is not registered.</p>}
        columns={[
          { key: "country", head: "Country", names: true, cell: (r) => r.name },
          { key: "number", head: "Number", cell: (r) => r.number },
          { key: "from", head: "From", cell: (r) => r.validFrom },
          {
            key: "to",
            head: "To",
            cell: (r) =>
              r.validTo ?? (
                <Form method="post" className="acts" preventScrollReset>
                  <input type="hidden" name="intent" value="end-registration" />
                  <input type="hidden" name="registrationId" value={r.id} />
                  <Field
                    id={`to-${r.id}`}
                    label="Last day"
                    name="validTo"
                    type="date"
                    width="middle"
                    defaultValue=""
                  />
                  <Press variant="outlined" small>
                    End it
                  </Press>
                </Form>
              ),
          },
        ]}
      />
      <Form method="post" className="flow" preventScrollReset>
        <input type="hidden" name="intent" value="register" />
        <Fieldset legend="A new registration" columns={2}>
          <CountrySelect
            id="register-country"
            label="Country"
            name="country"
            value={form.value("country") ?? ""}
            error={form.error("country")}
            countries={props.countries}
          />
          <Field id="register-number" label="Number" {...form.field("number")} />
          <Field id="register-from" label="First day" type="date" {...form.field("validFrom")} />
        </Fieldset>
        <Press variant="outlined">Add the registration</Press>
      </Form>
    </Block>
  );
}

function Rates(props: SettingsPageProps & { form: FormState }) {
  const { form } = props;
  return (
    <Block title="Tax rates">
      <details>
        <summary>{props.rates.length} rates, by country and day</summary>
        <Table
          caption="Tax rates"
          rows={props.rates}
          rowKey={(r) => r.id}
          columns={[
            { key: "country", head: "Country", names: true, cell: (r) => r.name },
            {
              key: "kind",
              head: "For",
              cell: (r) => (r.kind === "standard" ? "goods in general" : "works of art"),
            },
            { key: "percent", head: "Rate", numeric: true, cell: (r) => r.percent },
            { key: "from", head: "From", cell: (r) => r.validFrom },
            { key: "to", head: "To", cell: (r) => r.validTo ?? "until further notice" },
            { key: "source", head: "Laid down in", cell: (r) => r.source },
          ]}
        />
      </details>
      <Form method="post" className="flow" preventScrollReset>
        <input type="hidden" name="intent" value="rate" />
        <Fieldset legend="A new rate" columns={2}>
          <CountrySelect
            id="rate-country"
            label="Country"
            name="country"
            value={form.value("country") ?? ""}
            error={form.error("country")}
            countries={props.countries}
          />
          <Select
            label="For"
            options={[
              { value: "standard", label: "Goods in general" },
              { value: "reduced_art", label: "Works of art, reduced" },
            ]}
            {...form.field("kind")}
          />
          <Field label="Rate" unit="%" width="short" inputMode="decimal" {...form.field("percent")} />
          <Field id="rate-from" label="First day" type="date" {...form.field("validFrom")} />
          <Field label="Laid down in" span {...form.field("source")} />
        </Fieldset>
        <Press variant="outlined">Add the rate</Press>
      </Form>
    </Block>
  );
}

function Delivery(props: SettingsPageProps & { problemOf: FormState }) {
  return (
    <Block title="Delivery prices">
      <p className="note">
        By zone and weight of the parcel, home tax included. Rows marked as examples came with the product:
        replace them by what your carriers ask.
      </p>
      <Table
        caption="Delivery prices"
        rows={props.delivery}
        rowKey={(d) => d.id}
        columns={[
          {
            key: "zone",
            head: "Zone",
            names: true,
            cell: (d) => `${d.zone}${d.example ? " (example)" : ""}`,
          },
          { key: "weight", head: "Up to", numeric: true, cell: (d) => `${d.upToGrams / 1000} kg` },
          { key: "days", head: "Working days", numeric: true, cell: (d) => `${d.daysFrom} to ${d.daysTo}` },
          { key: "from", head: "Since", cell: (d) => d.validFrom },
          { key: "sum", head: "Price", numeric: true, cell: (d) => `${d.sum} ${d.currency}` },
          {
            key: "act",
            head: "New price",
            headHidden: true,
            cell: (d) => {
              const here = props.problemOf.value("rateId") === d.id;
              return (
                <details open={here || undefined}>
                  <summary>
                    New price
                    <span className="vh">
                      {" "}
                      for {d.zone} up to {d.upToGrams / 1000} kg
                    </span>
                  </summary>
                  <Form method="post" className="flow" preventScrollReset>
                    <input type="hidden" name="intent" value="delivery" />
                    <input type="hidden" name="rateId" value={d.id} />
                    <Field
                      id={`amount-${d.id}`}
                      label="Price"
                      name="amount"
                      unit={d.currency}
                      width="short"
                      inputMode="decimal"
                      defaultValue={here ? props.problemOf.value("amount") : d.sum}
                      error={here ? props.problemOf.error("amount") : undefined}
                    />
                    <Field
                      id={`from-${d.id}`}
                      label="From"
                      name="validFrom"
                      type="date"
                      width="middle"
                      defaultValue={here ? props.problemOf.value("validFrom") : props.today}
                      error={here ? props.problemOf.error("validFrom") : undefined}
                    />
                    <Press variant="outlined" small>
                      Let it hold from then
                    </Press>
                  </Form>
                </details>
              );
            },
          },
        ]}
      />
    </Block>
  );
}
