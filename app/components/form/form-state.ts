import type { Answers, FieldErrors, FormProblem } from "~/platform/form-fields";
import { type SummaryError, summaryErrors } from "./field-errors";

export type FormState = {
  /** Name, first value and mistake of a field: `<Field label="…" {...form.field("email")} />`. */
  field: (name: string) => { name: string; defaultValue: string | undefined; error: string[] | undefined };
  /** The same for a box that is ticked or not. */
  box: (name: string) => { name: string; defaultChecked: boolean; error: string[] | undefined };
  /** What to show in a field at first. */
  value: (name: string) => string | undefined;
  error: (name: string) => string[] | undefined;
  /** For `FormErrorSummary`. */
  summary: SummaryError[];
  errors: FieldErrors;
};

/**
 * What a form shows: the answers and mistakes of an attempt that was not taken (`actionData?.problem`), else what is
 * known already.
 * @param known values by field name, as strings; a ticked box is "on"
 * @param ids where a control's id is not its field's name
 */
export function formState(
  problem: FormProblem | undefined,
  known: Record<string, string | null | undefined> = {},
  ids?: Record<string, string>,
): FormState {
  const answers: Answers | undefined = problem?.answers;
  const errors = problem?.errors ?? {};
  const value = (name: string) => {
    if (answers === undefined) return known[name] ?? undefined;
    const answer = answers[name];
    return Array.isArray(answer) ? answer[0] : answer;
  };
  return {
    field: (name) => ({ name, defaultValue: value(name), error: errors[name] }),
    box: (name) => ({ name, defaultChecked: (value(name) ?? "") !== "", error: errors[name] }),
    value,
    error: (name) => errors[name],
    summary: summaryErrors(errors, ids),
    errors,
  };
}
