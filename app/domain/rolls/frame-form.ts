import type { ExposureJson } from "db/schema/pictures";
import { z } from "zod";
import { optionalText } from "~/platform/form-fields";
import { formatAperture, formatSeconds, parseAperture, parseSeconds } from "./exposure";

const APERTURE = "Write the aperture as an f-number: 22, f/22 or 5.6.";
const TIME = "Write the time as 1/125, 6, 1:30 or 4 min.";
const words = (what: string) => optionalText(200, `${what} is at most 200 characters long.`);

function parsed<T>(parse: (text: string) => T | null, message: string) {
  return z
    .string()
    .max(40)
    .default("")
    .transform((text, context): T | undefined => {
      if (text === "") return undefined;
      const value = parse(text);
      if (value !== null) return value;
      context.addIssue({ code: "custom", message });
      return z.NEVER;
    });
}

const notes = z.object({
  intent: z.literal("notes"),
  label: z
    .string("A frame needs its number as on the film's edge.")
    .min(1, "A frame needs its number as on the film's edge.")
    .max(12, "The number on the film's edge is at most 12 characters long."),
  aperture: parsed(parseAperture, APERTURE),
  time: parsed(parseSeconds, TIME),
  metered: parsed(parseSeconds, TIME),
  lens: words("The lens"),
  filter: words("The filter"),
  light: words("The light"),
  place: words("The place"),
  note: optionalText(1000, "The note is at most 1,000 characters long."),
});

/** Everything that can be done to a frame from its page. */
export const frameForm = z.discriminatedUnion("intent", [
  notes,
  z.object({ intent: z.literal("choose"), chosen: z.enum(["yes", "no"]) }),
  z.object({ intent: z.literal("move"), to: z.enum(["earlier", "later"]) }),
  z.object({ intent: z.literal("retry") }),
  z.object({ intent: z.literal("remove"), sure: z.string().optional() }),
]);

export type FrameNotes = z.output<typeof notes>;

/** The exposure as it is kept: what was left empty is left out. */
export function exposureOf(form: FrameNotes): ExposureJson {
  return {
    ...(form.aperture === undefined ? {} : { aperture: form.aperture }),
    ...(form.time === undefined ? {} : { timeSeconds: form.time }),
    ...(form.metered === undefined ? {} : { meteredSeconds: form.metered }),
    ...(form.lens === "" ? {} : { lens: form.lens }),
    ...(form.filter === "" ? {} : { filter: form.filter }),
    ...(form.light === "" ? {} : { light: form.light }),
    ...(form.place === "" ? {} : { place: form.place }),
  };
}

/** "f/22, 6 s"; "" where neither is noted. */
export function exposureLine(exposure: ExposureJson): string {
  return [
    exposure.aperture === undefined ? "" : formatAperture(exposure.aperture),
    exposure.timeSeconds === undefined ? "" : formatSeconds(exposure.timeSeconds),
  ]
    .filter((part) => part !== "")
    .join(", ");
}
