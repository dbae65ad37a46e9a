import { z } from "zod";
import { isIsoDay, type ZoneName } from "~/domain/dates";
import type { PriceStep } from "~/domain/pricing/ladder";
import { type Answers, line, optionalText, ticked, wholeNumber } from "~/platform/form-fields";
import { type CurrencyCode, decimalText, type MoneyProblem, parseMoney } from "~/platform/money";
import type { EditionPlan } from "./edition-figures";
import { EMPTY_FORMAT, PROCESSES, rowsOf, TWICE, withRows } from "./edition-rows";
import { instantOf, isTimeOfDay, wallClock } from "./release-time";
import { sheetOption, sheetOptionOf } from "./sheet-options";

/** The form in which an edition is planned, and its answers. Lengths in whole mm, money in minor units. */

export const PRICE_PROBLEMS: Record<MoneyProblem, string> = {
  empty: "Give the price of these numbers.",
  not_an_amount: "Write the price as an amount: 280 or 280.50.",
  other_currency: "Write the price in the studio's own currency.",
  too_many_decimals: "That price has more decimals than the currency.",
  too_large: "That price is too large to be kept exactly.",
};

const LIMIT = "The limit is a whole number from 1 to 10,000.";
const NUMBER = "Numbers of an edition are whole, from 1 to 10,000.";
const COUNT = "Write a whole number from 0 to 999.";
const LENGTH = "Lengths are whole millimetres from 10 to 5,000.";

export type DraftFormat = {
  paperId: string;
  process: string;
  imageWidthMm: number;
  imageHeightMm: number;
  sheetWidthMm: number;
  sheetHeightMm: number;
  steps: PriceStep[];
};

export type DraftEdition = {
  limit: number;
  artistsProofs: number;
  printersProofs: number;
  horsCommerce: number;
  bonATirer: number;
  exhibitionCopies: number;
  /** null: when the edition is opened. */
  releaseAt: Date | null;
  furtherEditions: string;
  returnedNumber: "in_hand" | "retired";
  returnedPrice: "own" | "next";
  formats: DraftFormat[];
};

const count = z
  .string()
  .default("")
  .transform((text, context): number => {
    if (text === "") return 0;
    if (/^\d{1,3}$/.test(text)) return Number(text);
    context.addIssue({ code: "custom", message: COUNT });
    return z.NEVER;
  });

/** One step of a ladder as typed; a row left empty is left out. */
export function stepsSchema(currency: CurrencyCode) {
  const step = z
    .object({ from: z.string().default(""), to: z.string().default(""), price: z.string().default("") })
    .transform((row, context): PriceStep | null => {
      if (row.from === "" && row.to === "" && row.price === "") return null;
      const numberOf = (text: string, name: string) => {
        const value = /^\d{1,5}$/.test(text) ? Number(text) : 0;
        if (value >= 1 && value <= 10_000) return value;
        context.addIssue({ code: "custom", message: NUMBER, path: [name] });
        return 0;
      };
      const fromNumber = numberOf(row.from, "from");
      // A step of one number may name it once.
      const toNumber = row.to === "" ? fromNumber : numberOf(row.to, "to");
      if (fromNumber > 0 && toNumber > 0 && toNumber < fromNumber) {
        context.addIssue({
          code: "custom",
          message: `These numbers run from ${fromNumber} back to ${toNumber}.`,
          path: ["to"],
        });
      }
      const parsed = parseMoney(row.price, currency);
      if (!parsed.ok) {
        context.addIssue({ code: "custom", message: PRICE_PROBLEMS[parsed.problem], path: ["price"] });
        return z.NEVER;
      }
      if (parsed.money.amount <= 0) {
        context.addIssue({ code: "custom", message: "A price is more than nothing.", path: ["price"] });
        return z.NEVER;
      }
      return { fromNumber, toNumber, amount: parsed.money.amount };
    });
  return z
    .array(step)
    .max(100)
    .default([])
    .transform((rows) => rows.filter((row) => row !== null));
}

function formatSchema(currency: CurrencyCode) {
  return z
    .object({
      paperId: z.uuid("Choose a paper."),
      process: line("Name the process, in at most 100 characters.", 100),
      sheet: z.string().default(""),
      sheetWidth: z.string().default(""),
      sheetHeight: z.string().default(""),
      margin: z.string().default(""),
      imageWidth: wholeNumber(LENGTH, 10, 5_000),
      imageHeight: wholeNumber(LENGTH, 10, 5_000),
      steps: stepsSchema(currency),
    })
    .transform((row, context): DraftFormat => {
      const offered = sheetOption(row.sheet);
      const typed = (text: string, name: string) => {
        const value = /^\d{1,4}$/.test(text) ? Number(text) : 0;
        if (value < 10 || value > 5_000) context.addIssue({ code: "custom", message: LENGTH, path: [name] });
        return value;
      };
      const sheetWidthMm = offered?.widthMm ?? typed(row.sheetWidth, "sheetWidth");
      const sheetHeightMm = offered?.heightMm ?? typed(row.sheetHeight, "sheetHeight");
      if (sheetWidthMm > 0 && row.imageWidth > sheetWidthMm) {
        context.addIssue({
          code: "custom",
          message: `The image is wider than its sheet of ${sheetWidthMm} mm.`,
          path: ["imageWidth"],
        });
      }
      if (sheetHeightMm > 0 && row.imageHeight > sheetHeightMm) {
        context.addIssue({
          code: "custom",
          message: `The image is higher than its sheet of ${sheetHeightMm} mm.`,
          path: ["imageHeight"],
        });
      }
      return {
        paperId: row.paperId,
        process: row.process,
        imageWidthMm: row.imageWidth,
        imageHeightMm: row.imageHeight,
        sheetWidthMm,
        sheetHeightMm,
        steps: row.steps,
      };
    });
}

type ReleaseTyped = { release: string; releaseDay: string; releaseTime: string; releaseWhich: string };
type ReleaseRead =
  | { ok: true; at: Date | null }
  | { ok: false; field: "releaseDay" | "releaseTime"; sentence: string };

/** The release as typed, in the studio's zone. Where clocks change, a time may not exist or come twice. */
export function readRelease(typed: ReleaseTyped, zone: ZoneName): ReleaseRead {
  if (typed.release !== "at") return { ok: true, at: null };
  if (!isIsoDay(typed.releaseDay)) {
    return { ok: false, field: "releaseDay", sentence: "Give the day of the release." };
  }
  if (!isTimeOfDay(typed.releaseTime)) {
    return { ok: false, field: "releaseTime", sentence: "Give the time of the release as 18:00." };
  }
  const found = instantOf({ day: typed.releaseDay, time: typed.releaseTime }, zone);
  if (found.kind === "one") return { ok: true, at: found.at };
  if (found.kind === "gap") {
    return {
      ok: false,
      field: "releaseTime",
      sentence: `There is no ${typed.releaseTime} on that day in ${zone}: the clocks go forward over it. Choose another time.`,
    };
  }
  if (typed.releaseWhich === "first") return { ok: true, at: found.first };
  if (typed.releaseWhich === "second") return { ok: true, at: found.second };
  return { ok: false, field: "releaseTime", sentence: TWICE };
}

const releaseFields = {
  release: z.enum(["now", "at"], "Say when the edition can be bought."),
  releaseDay: z.string().default(""),
  releaseTime: z.string().default(""),
  releaseWhich: z.string().default(""),
};

/** A release alone, for moving it. */
export function releaseForm(zone: ZoneName) {
  return z.object({ intent: z.literal("release"), ...releaseFields }).transform((form, context) => {
    const read = readRelease(form, zone);
    if (read.ok) return { intent: form.intent, releaseAt: read.at };
    context.addIssue({ code: "custom", message: read.sentence, path: [read.field] });
    return z.NEVER;
  });
}

/** The whole plan. `id` is made with the form, so that sending it twice keeps one draft. */
export function editionForm({ currency, zone }: { currency: CurrencyCode; zone: ZoneName }) {
  return z
    .object({
      id: z.uuid(),
      printId: z.uuid(),
      limit: wholeNumber(LIMIT, 1, 10_000),
      artistsProofs: count,
      printersProofs: count,
      horsCommerce: count,
      bonATirer: ticked(),
      exhibitionCopies: count,
      formats: z.array(formatSchema(currency)).min(1, "An edition needs a format.").max(8).default([]),
      ...releaseFields,
      furtherEditions: optionalText(500, "The sentence is at most 500 characters long."),
      returnedNumber: z.enum(["in_hand", "retired"]),
      returnedPrice: z.enum(["own", "next"]),
    })
    .transform((form, context): { id: string; printId: string; draft: DraftEdition } => {
      const read = readRelease(form, zone);
      if (!read.ok) {
        context.addIssue({ code: "custom", message: read.sentence, path: [read.field] });
        return z.NEVER;
      }
      for (const [f, format] of form.formats.entries()) {
        for (const [s, step] of format.steps.entries()) {
          if (step.toNumber <= form.limit) continue;
          context.addIssue({
            code: "custom",
            message: `These numbers go on to ${step.toNumber}, past the limit of ${form.limit}.`,
            path: ["formats", f, "steps", s, "to"],
          });
        }
      }
      return {
        id: form.id,
        printId: form.printId,
        draft: {
          limit: form.limit,
          artistsProofs: form.artistsProofs,
          printersProofs: form.printersProofs,
          horsCommerce: form.horsCommerce,
          bonATirer: form.bonATirer ? 1 : 0,
          exhibitionCopies: form.exhibitionCopies,
          releaseAt: read.at,
          furtherEditions: form.furtherEditions,
          returnedNumber: form.returnedNumber,
          returnedPrice: form.returnedPrice,
          formats: form.formats,
        },
      };
    });
}

/** What a new edition's form shows at first. */
export const FIRST_ANSWERS: Answers = withRows(
  {
    limit: "25",
    artistsProofs: "2",
    printersProofs: "0",
    horsCommerce: "0",
    exhibitionCopies: "0",
    release: "now",
    releaseDay: "",
    releaseTime: "18:00",
    furtherEditions: "",
    returnedNumber: "in_hand",
    returnedPrice: "own",
  },
  { formats: [{ ...EMPTY_FORMAT, process: PROCESSES[0], steps: [{ from: "1", to: "25", price: "" }] }] },
);

/** The answers of a draft that was saved. */
export function answersOf(
  draft: DraftEdition,
  { currency, zone }: { currency: CurrencyCode; zone: ZoneName },
): Answers {
  const release = draft.releaseAt === null ? null : wallClock(draft.releaseAt, zone);
  const twice = release === null ? null : instantOf(release, zone);
  const answers: Answers = {
    limit: String(draft.limit),
    artistsProofs: String(draft.artistsProofs),
    printersProofs: String(draft.printersProofs),
    horsCommerce: String(draft.horsCommerce),
    ...(draft.bonATirer > 0 ? { bonATirer: "on" } : {}),
    exhibitionCopies: String(draft.exhibitionCopies),
    release: release === null ? "now" : "at",
    releaseDay: release?.day ?? "",
    releaseTime: release?.time ?? "18:00",
    ...(twice?.kind === "twice"
      ? { releaseWhich: twice.first.getTime() === draft.releaseAt?.getTime() ? "first" : "second" }
      : {}),
    furtherEditions: draft.furtherEditions,
    returnedNumber: draft.returnedNumber,
    returnedPrice: draft.returnedPrice,
  };
  return withRows(answers, {
    formats: draft.formats.map((format) => ({
      paperId: format.paperId,
      process: format.process,
      sheet: sheetOptionOf({ widthMm: format.sheetWidthMm, heightMm: format.sheetHeightMm })?.value ?? "",
      sheetWidth: String(format.sheetWidthMm),
      sheetHeight: String(format.sheetHeightMm),
      margin: String(
        Math.max(
          0,
          Math.floor(
            Math.min(format.sheetWidthMm - format.imageWidthMm, format.sheetHeightMm - format.imageHeightMm) /
              2,
          ),
        ),
      ),
      imageWidth: String(format.imageWidthMm),
      imageHeight: String(format.imageHeightMm),
      steps: stepAnswers(format.steps, currency),
    })),
  });
}

/** Steps of a ladder as they are typed. */
export function stepAnswers(steps: readonly PriceStep[], currency: CurrencyCode) {
  return steps.map((step) => ({
    from: String(step.fromNumber),
    to: String(step.toNumber),
    price: decimalText({ amount: step.amount, currency }).replace(/\.0+$/, ""),
  }));
}

/** What can be made of answers as far as they go, for the figures beside the form. Never refuses. */
export function planOf(
  answers: Answers,
  { currency, grammages }: { currency: CurrencyCode; grammages: ReadonlyMap<string, number> },
): EditionPlan {
  const whole = (name: string) => {
    const value = answers[name];
    return typeof value === "string" && /^\d{1,5}$/.test(value.trim()) ? Number(value) : null;
  };
  const length = (value: string) =>
    /^\d{1,4}$/.test(value.trim()) && Number(value) > 0 ? Number(value) : null;
  const size = (width: number | null, height: number | null) =>
    width === null || height === null ? null : { widthMm: width, heightMm: height };
  return {
    limit: whole("limit"),
    ap: whole("artistsProofs") ?? 0,
    pp: whole("printersProofs") ?? 0,
    hc: whole("horsCommerce") ?? 0,
    bat: (answers.bonATirer ?? "") === "" ? 0 : 1,
    exhibition: whole("exhibitionCopies") ?? 0,
    formats: rowsOf(answers).formats.map((row) => {
      const offered = sheetOption(row.sheet);
      return {
        sheet: offered ?? size(length(row.sheetWidth), length(row.sheetHeight)),
        image: size(length(row.imageWidth), length(row.imageHeight)),
        grammage: grammages.get(row.paperId) ?? null,
        steps: row.steps.flatMap((step): PriceStep[] => {
          const parsed = parseMoney(step.price, currency);
          const from = length(step.from);
          const to = step.to.trim() === "" ? from : length(step.to);
          if (!parsed.ok || from === null || to === null) return [];
          return [{ fromNumber: from, toNumber: to, amount: parsed.money.amount }];
        }),
      };
    }),
  };
}
