import { Choices } from "~/components/form/choices";
import { Field } from "~/components/form/field";
import type { FormState } from "~/components/form/form-state";
import { TWICE } from "~/domain/editions/edition-rows";

export type ReleaseFieldsProps = { form: FormState; zoneLabel: string; nowWords: string };

/** Now, or at a day and time in the studio's zone. A time that comes twice is asked about. */
export function ReleaseFields({ form, zoneLabel, nowWords }: ReleaseFieldsProps) {
  const twice = form.error("releaseTime")?.includes(TWICE) || (form.value("releaseWhich") ?? "") !== "";
  return (
    <div className="fields">
      <Choices
        legend="It can be bought"
        legendHidden
        name="release"
        defaultValue={form.value("release")}
        error={form.error("release")}
        options={[
          { value: "now", name: nowWords },
          { value: "at", name: "From the day and time below" },
        ]}
      />
      <div className="fields fields-2">
        <Field label="Day" type="date" width="middle" {...form.field("releaseDay")} />
        <Field
          label="Time"
          hint={`${zoneLabel}.`}
          type="time"
          width="middle"
          {...form.field("releaseTime")}
        />
      </div>
      {twice ? (
        <Choices
          legend="Which of the two"
          name="releaseWhich"
          defaultValue={form.value("releaseWhich")}
          options={[
            { value: "first", name: "The first, before the clocks go back" },
            { value: "second", name: "The second, after they have gone back" },
          ]}
        />
      ) : null}
    </div>
  );
}
