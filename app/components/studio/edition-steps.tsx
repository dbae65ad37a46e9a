import { ariaFor, firstError, Wrong } from "~/components/form/field-frame";
import { Press } from "~/components/ui/press";
import type { StepRow } from "~/domain/editions/edition-rows";

export type StepRowsProps = {
  /** What the fields' names begin with: "formats[0]"; "" for a ladder of its own. */
  at: string;
  /** What follows the intents of adding and taking away: ":0". */
  act: string;
  /** What ids begin with, where several ladders stand on one page. */
  prefix?: string;
  steps: readonly StepRow[];
  error: (name: string) => string[] | undefined;
  currency: string;
  focus: string | null;
};

/** The ladder as rows: from which number to which, at what price. */
export function StepRows({ at, act, prefix = "", steps, error, currency, focus }: StepRowsProps) {
  const before = at === "" ? "" : `${at}.`;
  return (
    <fieldset className="fieldset rungs">
      <legend>Price of each number</legend>
      <p className="hint">In {currency}, home tax included. The price belongs to the number.</p>
      <ol>
        {steps.map((step, s) => {
          const name = `${before}steps[${s}]`;
          const box = (field: keyof StepRow, label: string) => (
            <Box
              id={`${prefix}${name}.${field}`}
              name={`${name}.${field}`}
              label={label}
              value={step[field]}
              error={error(`${name}.${field}`)}
              autoFocus={focus === `${name}.${field}`}
              money={field === "price"}
            />
          );
          return (
            // biome-ignore lint/suspicious/noArrayIndexKey: rows have no other name; the form is made anew when they change
            <li key={s}>
              {box("from", s === 0 ? "From" : `From, step ${s + 1}`)}
              {box("to", s === 0 ? "To" : `To, step ${s + 1}`)}
              {box("price", s === 0 ? "Price" : `Price, step ${s + 1}`)}
              <button type="submit" name="intent" value={`remove-step${act}:${s}`} className="plain">
                <span aria-hidden="true">Remove</span>
                <span className="vh">Remove step {s + 1}</span>
              </button>
            </li>
          );
        })}
      </ol>
      <Press variant="outlined" small name="intent" value={`add-step${act}`}>
        Add a step
      </Press>
    </fieldset>
  );
}

type BoxProps = {
  id: string;
  name: string;
  label: string;
  value: string;
  error: string[] | undefined;
  autoFocus: boolean;
  money: boolean;
};

/** A small box of a row; its label is seen over the first row and heard in the others. */
function Box({ id, name, label, value, error, autoFocus, money }: BoxProps) {
  const wrong = firstError(error);
  const seen = !label.includes(",");
  return (
    <div className="field" data-wrong={wrong ? "" : undefined}>
      <label htmlFor={id} className={seen ? undefined : "vh"}>
        {label}
      </label>
      {wrong ? <Wrong id={`${id}-wrong`}>{wrong}</Wrong> : null}
      <input
        {...ariaFor(id, { error })}
        type="text"
        inputMode={money ? "decimal" : "numeric"}
        className="input"
        id={id}
        name={name}
        defaultValue={value}
        // biome-ignore lint/a11y/noAutofocus: the row was just asked for
        autoFocus={autoFocus}
      />
    </div>
  );
}
