import { Check } from "~/components/form/check";
import { Field, TextArea } from "~/components/form/field";
import type { FormState } from "~/components/form/form-state";
import { Select } from "~/components/form/select";

export type PrintWordsProps = {
  form: FormState;
  series: readonly { id: string; title: string }[];
  /** Why the address stays as it is; null while it may change. */
  slugFixed: string | null;
  /** "The roll was exposed in 2025." */
  yearHint: string;
};

/** Title, year, series, address, statement: the words of a print. */
export function PrintWords({ form, series, slugFixed, yearHint }: PrintWordsProps) {
  return (
    <div className="fields fields-2">
      <Field label="Title" span {...form.field("title")} required />
      <Field
        label="Year of exposure"
        hint={yearHint}
        width="short"
        inputMode="numeric"
        {...form.field("year")}
      />
      <Field
        label="Readable address"
        hint={
          slugFixed ?? "Left empty, it is made from the title. It can change until the print is published."
        }
        {...form.field("slug")}
        disabled={slugFixed !== null}
      />
      <Select
        label="Series"
        {...form.field("seriesId")}
        options={[
          { value: "", label: "In no series" },
          ...series.map((one) => ({ value: one.id, label: one.title })),
          { value: "new", label: "A new one, named beside" },
        ]}
      />
      <Field label="New series" hint="Only where a new one is chosen." {...form.field("newSeries")} />
      <TextArea
        label="Statement"
        hint="What the photographer says of it; shown on the print's page."
        span
        {...form.field("statement")}
      />
      <Check
        label="Show it in the shop before its first edition is released"
        hint="Otherwise its pictures are kept back until then."
        span
        {...form.box("shownBeforeRelease")}
      />
    </div>
  );
}
