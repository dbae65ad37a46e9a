import { useId, useState } from "react";
import { Field } from "~/components/form/field";
import type { FormState } from "~/components/form/form-state";
import { Select } from "~/components/form/select";
import { Block } from "~/components/studio/bench";
import { FormatFiguresList } from "~/components/studio/edition-figures-list";
import { StepRows } from "~/components/studio/edition-steps";
import { Press } from "~/components/ui/press";
import type { FormatFigures } from "~/domain/editions/edition-figures";
import { type FormatRow, PROCESSES } from "~/domain/editions/edition-rows";
import type { PaperChoice } from "~/domain/editions/plan-edition.server";
import { SHEET_GROUPS } from "~/domain/editions/sheet-options";

export type EditionFormatProps = {
  row: FormatRow;
  index: number;
  /** The run is shared by several formats. */
  many: boolean;
  form: FormState;
  papers: readonly PaperChoice[];
  currency: string;
  figures: FormatFigures | undefined;
  sheetsACopy: number;
  focus: string | null;
};

/** Paper, process, sizes and ladder of one format, and what they come to. */
export function EditionFormat({
  row,
  index,
  many,
  form,
  papers,
  currency,
  figures,
  sheetsACopy,
  focus,
}: EditionFormatProps) {
  const at = `formats[${index}]`;
  const processes = useId();
  const [sheet, setSheet] = useState(row.sheet);
  const field = (name: string, value: string) => ({
    name: `${at}.${name}`,
    defaultValue: value,
    error: form.error(`${at}.${name}`),
    autoFocus: focus === `${at}.${name}`,
  });
  const millimetres = { unit: "mm", width: "short", inputMode: "numeric" } as const;
  return (
    <Block
      title={many ? `Format ${index + 1}` : "The format"}
      aside={
        many ? (
          <button type="submit" name="intent" value={`remove-format:${index}`} className="plain">
            Remove format {index + 1}
          </button>
        ) : null
      }
    >
      <div className="fields fields-2 format-fields">
        <Select
          label="Paper"
          {...field("paperId", row.paperId)}
          blank="Choose a paper"
          options={papers
            .filter((paper) => !paper.retired || paper.id === row.paperId)
            .map((paper) => ({
              value: paper.id,
              label: `${paper.name}, ${paper.grammage} g/m²${paper.retired ? " (retired)" : ""}`,
            }))}
        />
        <div>
          <Field label="Process" list={processes} {...field("process", row.process)} />
          <datalist id={processes}>
            {PROCESSES.map((process) => (
              <option key={process} value={process} />
            ))}
          </datalist>
        </div>
        <Select
          label="Sheet"
          span
          {...field("sheet", row.sheet)}
          onChange={(event) => setSheet(event.currentTarget.value)}
          blank="Another size, written below"
          options={SHEET_GROUPS}
        />
        <div className="two-sizes span" data-out={sheet === "" ? undefined : ""}>
          <Field label="Sheet width" {...millimetres} {...field("sheetWidth", row.sheetWidth)} />
          <Field
            label="Sheet height"
            hint="Only where no sheet is chosen above."
            {...millimetres}
            {...field("sheetHeight", row.sheetHeight)}
          />
        </div>
        <div className="two-sizes span">
          <Field label="Image width" {...millimetres} {...field("imageWidth", row.imageWidth)} />
          <Field label="Image height" {...millimetres} {...field("imageHeight", row.imageHeight)} />
        </div>
        <div className="two-sizes span">
          <Field
            label="Smallest margin"
            hint="For fitting the picture into the sheet."
            {...millimetres}
            {...field("margin", row.margin)}
          />
          <Press variant="outlined" small name="intent" value={`fit:${index}`}>
            Fit the picture into the sheet
          </Press>
        </div>
      </div>
      <StepRows
        at={at}
        act={`:${index}`}
        steps={row.steps}
        error={form.error}
        currency={currency}
        focus={focus}
      />
      {figures ? (
        <div className="format-figures" aria-live="polite">
          <FormatFiguresList figures={figures} sheetsACopy={sheetsACopy} currency={currency} />
        </div>
      ) : null}
    </Block>
  );
}
