import { z } from "zod";
import { line, many, optionalText, ticked } from "~/platform/form-fields";
import { cropProblem, parsePerCent } from "./crop";
import { isSlug } from "./slug";

const TITLE = "Give the print a title of at most 200 characters.";
const YEAR = "Write the year of exposure in four figures, from 1826 on.";
const SLUG = "An address has small letters, figures and single hyphens: pell-wood-first-snow.";
const PER_CENT = "Write per cent of the scan from 0 to 100, with at most four decimals: 12.5.";

const year = z
  .string()
  .max(10)
  .default("")
  .transform((text, context): number | null => {
    if (text === "") return null;
    const value = /^\d{4}$/.test(text) ? Number(text) : 0;
    if (value >= 1826 && value <= 2200) return value;
    context.addIssue({ code: "custom", message: YEAR });
    return z.NEVER;
  });

const words = {
  title: line(TITLE),
  year,
  /** Id of a series, "" for none, "new" for the one named in `newSeries`. */
  seriesId: z.string().default(""),
  newSeries: optionalText(200, "A series has a title of at most 200 characters."),
  slug: z
    .string()
    .default("")
    .refine((text) => text === "" || isSlug(text), SLUG),
  statement: optionalText(5000, "The statement is at most 5,000 characters long."),
  shownBeforeRelease: ticked(),
};

function namesNewSeries(form: { seriesId: string; newSeries: string }): boolean {
  return form.seriesId !== "new" || form.newSeries !== "";
}
const SERIES_NAMED = { message: "Give the new series a title.", path: ["newSeries"] };

const description = optionalText(1000, "The description is at most 1,000 characters long.");

/** A new print of one or more frames. `id` came with the form, so that sending it twice makes one print. */
export const newPrintForm = z
  .object({
    id: z.uuid(),
    frames: many(z.uuid(), 100).refine((ids) => ids.length > 0, "Choose at least one frame."),
    ...words,
    description,
  })
  .refine(namesNewSeries, SERIES_NAMED);

/** Words of a print: everything but its pictures. */
const wordsForm = z.object({ intent: z.literal("words"), ...words }).refine(namesNewSeries, SERIES_NAMED);

const side = z.string(PER_CENT).transform((text, context): number => {
  const value = parsePerCent(text);
  if (value !== null) return value;
  context.addIssue({ code: "custom", message: PER_CENT });
  return z.NEVER;
});

/** Crop, scan version and description of one picture. Disabled fields are not sent: then only the description is. */
const pictureForm = z
  .object({
    intent: z.literal("picture"),
    pictureId: z.uuid(),
    scanId: z.uuid().optional(),
    cropX: side.optional(),
    cropY: side.optional(),
    cropWidth: side.optional(),
    cropHeight: side.optional(),
    description,
  })
  .transform((form, context) => {
    const { pictureId, scanId, description: said, cropX, cropY, cropWidth, cropHeight } = form;
    if (cropX === undefined || cropY === undefined || cropWidth === undefined || cropHeight === undefined) {
      return { intent: form.intent, pictureId, scanId, crop: undefined, description: said };
    }
    const crop = { x: cropX, y: cropY, width: cropWidth, height: cropHeight };
    const problem = cropProblem(crop);
    if (problem !== null) {
      context.addIssue({
        code: "custom",
        message: problem,
        path: [crop.x + crop.width > 1_000_000 ? "cropWidth" : "cropHeight"],
      });
      return z.NEVER;
    }
    return { intent: form.intent, pictureId, scanId, crop, description: said };
  });

/** Everything that can be done to a print from its page. */
export const printForm = z.discriminatedUnion("intent", [
  wordsForm,
  pictureForm,
  z.object({ intent: z.literal("add-pictures"), frames: many(z.uuid(), 100) }),
  z.object({ intent: z.literal("move-picture:earlier"), pictureId: z.uuid() }),
  z.object({ intent: z.literal("move-picture:later"), pictureId: z.uuid() }),
  z.object({ intent: z.literal("remove-picture"), pictureId: z.uuid() }),
  z.object({ intent: z.literal("publish") }),
  z.object({ intent: z.literal("withdraw") }),
  z.object({ intent: z.literal("delete") }),
]);
export type PrintAct = z.output<typeof printForm>;

/** Moves a print or a series up or down in the studio's own order. */
export const moveForm = z.object({
  intent: z.literal("move"),
  id: z.uuid(),
  to: z.enum(["earlier", "later"]),
});

const seriesFields = {
  title: line("Give the series a title of at most 200 characters."),
  slug: z
    .string()
    .default("")
    .refine((text) => text === "" || isSlug(text), SLUG),
  statement: optionalText(5000, "The statement is at most 5,000 characters long."),
};

/** Everything that can be done on the page of the series. */
export const seriesForm = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("make"), id: z.uuid(), ...seriesFields }),
  z.object({ intent: z.literal("edit"), id: z.uuid(), ...seriesFields }),
  moveForm,
]);
export type SeriesFields = { title: string; slug: string; statement: string };
