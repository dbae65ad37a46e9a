/** What is wrong with a form, by field name, as the domain's parse helpers give it. */
export type FieldErrors = Record<string, string[] | undefined>;

export type SummaryError = {
  field: string;
  /** Id of the control the line leads to. */
  id: string;
  message: string;
};

/**
 * The lines of an error summary, in the order of the fields.
 * @param ids where a control's id is not its field's name (the first of a group of choices)
 */
export function summaryErrors(errors: FieldErrors, ids: Record<string, string> = {}): SummaryError[] {
  return Object.entries(errors).flatMap(([field, messages]) =>
    (messages ?? []).map((message) => ({ field, id: ids[field] ?? field, message })),
  );
}
