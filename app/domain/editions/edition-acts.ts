import { z } from "zod";
import type { ZoneName } from "~/domain/dates";
import { isIsoDay } from "~/domain/dates";
import { line, optionalText, ticked, wholeNumber } from "~/platform/form-fields";
import type { CurrencyCode } from "~/platform/money";
import { releaseForm, stepsSchema } from "./edition-form";
import { HAND_ACTS } from "./hand-acts";
import { HAPPENED_PROBLEMS, parseHappened } from "./happened";

/** Everything that can be done to an edition from its page. Amounts in minor units. */

const REASON = "At most 500 characters.";

export function editionActs(studio: { currency: CurrencyCode; zone: ZoneName; now: Date }) {
  const happened = z.string().max(40).default("");
  const readHappened = (text: string, context: z.RefinementCtx) => {
    const read = parseHappened(text, studio);
    if (read.ok) return read.happened;
    context.addIssue({ code: "custom", message: HAPPENED_PROBLEMS[read.problem], path: ["happened"] });
    return z.NEVER;
  };
  return z.discriminatedUnion("intent", [
    z.object({ intent: z.literal("open"), acceptPastCap: ticked(), sure: ticked() }),
    z.object({ intent: z.literal("delete") }),
    z.object({
      intent: z.literal("lower-limit"),
      limit: wholeNumber("The new limit is a whole number from 1 to 10,000.", 1, 10_000),
    }),
    z.object({
      intent: z.literal("prices"),
      formatId: z.uuid(),
      steps: stepsSchema(studio.currency),
    }),
    releaseForm(studio.zone),
    z.object({
      intent: z.literal("close"),
      reason: line("Say why the edition is closed, in at most 500 characters.", 500),
      sure: ticked().refine((is) => is, "Tick this to close the edition: it cannot be opened again."),
    }),
    z
      .object({
        intent: z.literal("place"),
        copyId: z.uuid("Choose a copy."),
        act: z.enum(HAND_ACTS, "Choose what happens to the copy."),
        reason: optionalText(500, REASON),
        happened,
        until: z
          .string()
          .default("")
          .refine((day) => day === "" || isIsoDay(day), "Give a day that exists."),
        toName: optionalText(200, "A name is at most 200 characters long."),
        toEmail: z
          .string()
          .max(254)
          .default("")
          .refine((text) => text === "" || z.email().safeParse(text).success, "That is no e-mail address."),
        formatId: z.string().default(""),
      })
      .transform((form, context) => ({ ...form, happened: readHappened(form.happened, context) })),
    z
      .object({
        intent: z.literal("correct"),
        line: wholeNumber("Give the number of the line that is put right.", 1, 1_000_000),
        words: line("Say what is right, in at most 500 characters.", 500),
        happened,
      })
      .transform((form, context) => ({
        ...form,
        // Left empty, only words are put right: the correction itself happens now.
        happened: form.happened === "" ? null : readHappened(form.happened, context),
      })),
  ]);
}
