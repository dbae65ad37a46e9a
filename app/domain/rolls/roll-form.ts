import { z } from "zod";
import { type PartialDate, parsePartialDate } from "~/domain/dates";
import { FILM_FORMATS, filmFormat } from "~/domain/imaging/film";
import { optionalText, wholeNumber } from "~/platform/form-fields";

/** A day, month or year of exposure as typed; an instant is finer than a roll is known by. */
const exposed = z
  .string()
  .max(40)
  .default("")
  .transform((text, context): PartialDate => {
    const date = parsePartialDate(text);
    if (date !== null && date.precision !== "instant") return date;
    context.addIssue({
      code: "custom",
      message: "Write the date as 2026-11-29, or only 2026-11 or 2026 where no more is known.",
    });
    return z.NEVER;
  });

const rollFields = {
  number: wholeNumber("The number of a roll is a whole number from 1 to 999,999.", 1, 999_999),
  filmFormat: z
    .string("Choose the format of the film.")
    .refine((key) => filmFormat(key) !== null, "Choose the format of the film."),
  camera: optionalText(200, "The camera's description is at most 200 characters long."),
  film: optionalText(200, "The film's description is at most 200 characters long."),
  exposed,
  notes: optionalText(4000, "The notes are at most 4,000 characters long."),
};

/** A new roll. `id` came with the form, so that sending it twice makes one roll. */
export const newRollForm = z.object({ ...rollFields, id: z.uuid() });

export const editRollForm = z.object({ ...rollFields, intent: z.literal("edit") });

/** Everything that can be done to a roll from its page. */
export const rollForm = z.discriminatedUnion("intent", [
  editRollForm,
  z.object({ intent: z.literal("retry") }),
]);

export function numberTaken(number: number): string {
  return `There is a roll ${number} already: give this one another number.`;
}

export type RollFields = z.output<typeof editRollForm>;

/** Formats offered by the form. */
export const FILM_FORMAT_OPTIONS: readonly { value: string; label: string }[] = FILM_FORMATS.map(
  (format) => ({
    value: format.key,
    label: format.name,
  }),
);

/** The row's two columns from a partial date: the first day it can mean, and how much of it is known. */
export function exposedColumns(date: PartialDate): {
  exposedOn: string | null;
  exposedPrecision: PartialDate["precision"];
} {
  const firstDay: Record<PartialDate["precision"], string | null> = {
    unknown: null,
    year: `${date.value}-01-01`,
    month: `${date.value}-01`,
    day: date.value,
    instant: date.value.slice(0, 10),
  };
  return { exposedOn: firstDay[date.precision], exposedPrecision: date.precision };
}

/** The partial date of a row's two columns. */
export function exposedDate(row: {
  exposedOn: string | null;
  exposedPrecision: PartialDate["precision"];
}): PartialDate {
  if (row.exposedOn === null || row.exposedPrecision === "unknown")
    return { value: "", precision: "unknown" };
  const length = { year: 4, month: 7, day: 10, instant: 10 }[row.exposedPrecision];
  const precision = row.exposedPrecision === "instant" ? "day" : row.exposedPrecision;
  return { value: row.exposedOn.slice(0, length), precision };
}
