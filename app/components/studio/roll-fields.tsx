import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import type { FormState } from "~/components/form/form-state";
import { Select } from "~/components/form/select";

export type RollFieldsProps = { form: FormState; formats: readonly { value: string; label: string }[] };

/** What is written of a roll. */
export function RollFields({ form, formats }: RollFieldsProps) {
  return (
    <Fieldset legend="The film" columns={2}>
      <Field
        label="Number"
        hint="As on its sleeve."
        inputMode="numeric"
        width="short"
        required
        {...form.field("number")}
      />
      <Select label="Format" options={formats} required {...form.field("filmFormat")} />
      <Field label="Camera" hint="Body and lens, in the studio's own words." {...form.field("camera")} />
      <Field label="Film" hint="And how it was developed, if that matters." {...form.field("film")} />
      <Field
        label="Exposed on"
        hint="2026-11-29, or 2026-11 or 2026 where no more is known. Leave it empty if nothing is."
        width="middle"
        {...form.field("exposed")}
      />
      <TextArea label="Notes" span rows={4} {...form.field("notes")} />
    </Fieldset>
  );
}
