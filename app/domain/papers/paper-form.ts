import { z } from "zod";
import { line, optionalText, ticked, wholeNumber } from "~/platform/form-fields";

/** CIELAB of the bare sheet under D50, and the densest black it takes: as measured by the studio, or left empty. */

const decimal = (message: string, least: number, most: number) =>
  z
    .string()
    .max(20, message)
    .default("")
    .transform((text, context): number | null => {
      if (text === "") return null;
      const plain = text.replace(",", ".").replace("\u2212", "-");
      const value = /^-?\d{1,3}(\.\d{1,3})?$/.test(plain) ? Number(plain) : Number.NaN;
      if (value >= least && value <= most) return value;
      context.addIssue({ code: "custom", message });
      return z.NEVER;
    });

const fields = {
  name: line("Give the paper a name of at most 100 characters.", 100),
  base: optionalText(100, "The base is at most 100 characters long."),
  surface: optionalText(100, "The surface is at most 100 characters long."),
  grammage: wholeNumber("The weight is a whole number of g/m² from 20 to 2,000.", 20, 2_000),
  description: optionalText(2000, "The description is at most 2,000 characters long."),
  whiteL: decimal("L* is a number from 0 to 100.", 0, 100),
  whiteA: decimal("a* is a number from −128 to 127.", -128, 127),
  whiteB: decimal("b* is a number from −128 to 127.", -128, 127),
  maximumDensity: decimal("The maximum density is a number from 0 to 4.", 0, 4),
  measured: ticked(),
};

type Measured = {
  whiteL: number | null;
  whiteA: number | null;
  whiteB: number | null;
  maximumDensity: number | null;
  measured: boolean;
};

function whitePointIsWhole(form: Measured): boolean {
  const known = [form.whiteL, form.whiteA, form.whiteB].filter((value) => value !== null).length;
  return known === 0 || known === 3;
}
const WHOLE_POINT = { message: "Give L*, a* and b* together, or none of them.", path: ["whiteL"] };

function measuredIsGiven(form: Measured): boolean {
  return !form.measured || form.whiteL !== null || form.maximumDensity !== null;
}
const MEASURED = {
  message: "Give what was measured: the white point, the maximum density, or both.",
  path: ["measured"],
};

/** A new paper. `id` came with the form, so that sending it twice makes one paper. */
export const newPaperForm = z
  .object({ intent: z.literal("make"), id: z.uuid(), ...fields })
  .refine(whitePointIsWhole, WHOLE_POINT)
  .refine(measuredIsGiven, MEASURED);

/** The words and measurements of a paper. */
export const editPaperForm = z
  .object({ intent: z.literal("edit"), ...fields })
  .refine(whitePointIsWhole, WHOLE_POINT)
  .refine(measuredIsGiven, MEASURED);

export type PaperFields = Omit<z.output<typeof editPaperForm>, "intent">;

/** Everything that can be done on the page of a paper. */
export const paperForm = z.discriminatedUnion("intent", [
  editPaperForm,
  z.object({ intent: z.enum(["retire", "bring-back"]) }),
]);

/** Everything that can be done on the page of the papers. */
export const papersForm = z.discriminatedUnion("intent", [
  newPaperForm,
  z.object({ intent: z.literal("move"), id: z.uuid(), to: z.enum(["earlier", "later"]) }),
]);
