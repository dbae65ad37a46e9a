import { Form, href, Link, useNavigation } from "react-router";
import { AddressFields } from "~/components/form/address-fields";
import { Choices } from "~/components/form/choices";
import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { Select } from "~/components/form/select";
import { price } from "~/components/shop/edition-view";
import { BenchHead } from "~/components/studio/bench";
import { EmptyState } from "~/components/ui/empty-state";
import { Press } from "~/components/ui/press";
import type { HandChoice } from "~/domain/orders/hand-order-choices.server";
import type { FormProblem } from "~/platform/form-fields";

export type OrderByHandPageProps = {
  submissionKey: string;
  currency: string;
  home: string;
  choices: readonly HandChoice[];
  parties: readonly { id: string; name: string; email: string | null }[];
  countries: readonly { code: string; name: string }[];
  mayReduce: boolean;
  problem?: FormProblem | undefined;
};

/** Lines the form offers; what is left empty is no line. */
const LINES = [0, 1, 2];

/** An order made at a fair, in the studio or by letter. */
export function OrderByHandPage(props: OrderByHandPageProps) {
  const form = formState(props.problem, {
    "address.country": props.home,
    method: "handed_over",
    payment: "cash",
    days: "7",
  });
  const busy = useNavigation().state === "submitting";
  const options = props.choices.map((c) => ({
    value: c.formatId,
    label: `${c.title}, ${c.words}: ${c.nextNumber}/${c.limit}, ${price(c.nextAmount, { currency: props.currency, language: "en" })}`,
  }));
  return (
    <>
      <title>Make an order by hand</title>
      <BenchHead
        title="Make an order by hand"
        says="For what is sold across a table, by letter or by telephone. The book's prices hold; a reduction is recorded with its reason."
        acts={<Link to={href("/studio/orders")}>All orders</Link>}
      />
      <Problems form={form} />
      {options.length === 0 ? (
        <EmptyState>No open edition has a number in hand.</EmptyState>
      ) : (
        <Form method="post" className="steps">
          <input
            type="hidden"
            name="submissionKey"
            value={form.value("submissionKey") ?? props.submissionKey}
          />
          {LINES.map((i) => (
            <Fieldset key={i} legend={i === 0 ? "The copy" : `Copy ${i + 1}, if there is one`} columns={2}>
              <Select
                label="Edition and format"
                blank="Choose"
                span
                options={options}
                {...form.field(`lines[${i}].formatId`)}
              />
              <Field
                label="Number"
                hint="Empty for the lowest free one"
                width="short"
                inputMode="numeric"
                {...form.field(`lines[${i}].number`)}
              />
              {props.mayReduce ? (
                <>
                  <Field
                    label="Reduction"
                    hint="Off the book's price"
                    unit={props.currency}
                    width="short"
                    inputMode="decimal"
                    {...form.field(`lines[${i}].reduction`)}
                  />
                  <Field label="Reason of the reduction" span {...form.field(`lines[${i}].reason`)} />
                </>
              ) : null}
            </Fieldset>
          ))}
          <Fieldset legend="The buyer" columns={2}>
            <Select
              label="Somebody from the book"
              blank="Somebody new"
              span
              options={props.parties.map((p) => ({
                value: p.id,
                label: p.email === null ? p.name : `${p.name}, ${p.email}`,
              }))}
              {...form.field("partyId")}
            />
            <Field label="Name, for somebody new" autoComplete="off" {...form.field("name")} />
            <Field label="E-mail" type="email" autoComplete="off" {...form.field("email")} />
            <Field label="Telephone" type="tel" autoComplete="off" {...form.field("telephone")} />
          </Fieldset>
          <Fieldset legend="How it reaches them">
            <Choices
              name="method"
              legend="How it reaches them"
              legendHidden
              defaultValue={form.value("method") ?? "handed_over"}
              options={[
                { value: "handed_over", name: "Handed over", more: "now, or when it is ready" },
                { value: "collection", name: "Collected at the studio" },
                { value: "delivery", name: "Sent to the address below" },
              ]}
            />
          </Fieldset>
          <Fieldset
            legend="The buyer's address"
            hint="The country decides the tax; the rest is needed when it is sent."
            columns={2}
          >
            <AddressFields form={form} countries={props.countries} required={false} />
          </Fieldset>
          <Fieldset legend="How it is paid">
            <Choices
              name="payment"
              legend="How it is paid"
              legendHidden
              defaultValue={form.value("payment") ?? "cash"}
              options={[
                { value: "cash", name: "In cash, now" },
                { value: "transfer", name: "By transfer", more: "the numbers are held until it comes" },
                {
                  value: "pay_link",
                  name: "By card, at a link",
                  more: "sent by e-mail; the numbers are held until then",
                },
              ]}
            />
            <Field label="Number of the receipt, for cash" {...form.field("receipt")} />
            <Field
              label="Hold the numbers for"
              unit="days"
              width="short"
              inputMode="numeric"
              {...form.field("days")}
            />
          </Fieldset>
          <Fieldset legend="Note of the studio">
            <TextArea label="Seen by the studio only" rows={3} {...form.field("studioNote")} />
          </Fieldset>
          <Press busy={busy}>Make the order</Press>
        </Form>
      )}
    </>
  );
}
