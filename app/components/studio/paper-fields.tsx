import { Check } from "~/components/form/check";
import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import type { FormState } from "~/components/form/form-state";

export type PaperFieldsProps = {
  form: FormState;
  /** An opened edition names the paper: name and weight stay. */
  fixed?: boolean;
};

/** What a paper is, and what was measured of it. */
export function PaperFields({ form, fixed }: PaperFieldsProps) {
  return (
    <>
      <Fieldset legend="The sheet" columns={2}>
        <Field
          label="Name"
          hint={fixed ? "Fixed: an opened edition names it." : "A description in the studio's own words."}
          {...form.field("name")}
          readOnly={fixed}
          required
        />
        <Field
          label="Weight"
          hint={fixed ? "Fixed: an opened edition names it." : "As its maker gives it (ISO 536)."}
          unit="g/m²"
          width="short"
          inputMode="numeric"
          {...form.field("grammage")}
          readOnly={fixed}
          required
        />
        <Field label="Base" hint="Cotton rag, alpha cellulose, fibre" {...form.field("base")} />
        <Field label="Surface" hint="Smooth matt, air-dried gloss" {...form.field("surface")} />
        <TextArea label="Description" hint="Shown to buyers." span {...form.field("description")} rows={3} />
      </Fieldset>
      <Fieldset
        legend="Measured"
        hint="What the studio read from its own sheet. Soft proofs rest on it; until it is measured, an example stands in."
      >
        <div className="fields fields-2">
          <Field
            label="White L*"
            hint="CIELAB, D50"
            width="short"
            inputMode="decimal"
            {...form.field("whiteL")}
          />
          <Field
            label="Maximum density"
            hint="Of the densest black, above the paper"
            width="short"
            inputMode="decimal"
            {...form.field("maximumDensity")}
          />
          <Field label="White a*" width="short" {...form.field("whiteA")} />
          <Field label="White b*" width="short" {...form.field("whiteB")} />
        </div>
        <Check
          label="Measured by the studio"
          hint="Leave it open while the figures are an example."
          {...form.box("measured")}
        />
      </Fieldset>
    </>
  );
}

type Known = {
  name: string;
  base: string;
  surface: string;
  grammage: number;
  description: string;
  whiteL: number | null;
  whiteA: number | null;
  whiteB: number | null;
  maximumDensity: number | null;
  measured: boolean;
};

/** A paper as its form shows it at first. */
export function paperAnswers(paper: Known): Record<string, string> {
  const text = (value: number | null) => (value === null ? "" : String(value));
  return {
    name: paper.name,
    base: paper.base,
    surface: paper.surface,
    grammage: String(paper.grammage),
    description: paper.description,
    whiteL: text(paper.whiteL),
    whiteA: text(paper.whiteA),
    whiteB: text(paper.whiteB),
    maximumDensity: text(paper.maximumDensity),
    measured: paper.measured ? "on" : "",
  };
}

/** "White 96.5, 0.2, 1.8; density 1.65", or that nothing was measured. */
export function measuredWords(
  paper: Pick<Known, "whiteL" | "whiteA" | "whiteB" | "maximumDensity" | "measured">,
): string {
  const parts = [
    paper.whiteL === null ? null : `white ${paper.whiteL}, ${paper.whiteA}, ${paper.whiteB}`,
    paper.maximumDensity === null ? null : `density ${paper.maximumDensity}`,
  ].filter((part) => part !== null);
  if (parts.length === 0) return "not measured";
  return `${parts.join("; ")}${paper.measured ? "" : " (example)"}`;
}
