import { fitIntoSheet } from "~/domain/imaging/sizes";
import type { Answers } from "~/platform/form-fields";
import { sheetOption } from "./sheet-options";

/**
 * The rows of an edition's form as they are typed: formats and the steps of their ladders. Rows are added and taken away by
 * presses of the form itself, so that it works without script; what was typed in the others stays.
 */

/** Suggestions only; any process may be written. */
export const PROCESSES = [
  "pigment print",
  "silver gelatin print",
  "platinum/palladium print",
  "cyanotype",
  "salt print",
  "photogravure",
] as const;

/** Said beside the time when the clocks show it twice; the form then offers the choice. */
export const TWICE = "The clocks go back over that time, so it comes twice: say which is meant.";

export type StepRow = { from: string; to: string; price: string };
export type FormatRow = {
  paperId: string;
  process: string;
  /** An offered sheet's value, or "" for the size typed. */
  sheet: string;
  sheetWidth: string;
  sheetHeight: string;
  margin: string;
  imageWidth: string;
  imageHeight: string;
  steps: StepRow[];
};
export type EditionRows = { formats: FormatRow[] };

const FORMAT_FIELDS = [
  "paperId",
  "process",
  "sheet",
  "sheetWidth",
  "sheetHeight",
  "margin",
  "imageWidth",
  "imageHeight",
] as const;
const STEP_FIELDS = ["from", "to", "price"] as const;
/** As many as a page can hold; an edition of more formats than this is no edition. */
const MOST_FORMATS = 8;
const MOST_STEPS = 60;

export const EMPTY_STEP: StepRow = { from: "", to: "", price: "" };
export const EMPTY_FORMAT: FormatRow = {
  paperId: "",
  process: "",
  sheet: "",
  sheetWidth: "",
  sheetHeight: "",
  margin: "30",
  imageWidth: "",
  imageHeight: "",
  steps: [EMPTY_STEP],
};

function text(answers: Answers, name: string): string {
  const value = answers[name];
  return (Array.isArray(value) ? value[0] : value) ?? "";
}

function indices(answers: Answers, pattern: RegExp): number[] {
  const found = new Set<number>();
  for (const name of Object.keys(answers)) {
    const match = pattern.exec(name);
    if (match !== null) found.add(Number(match[1]));
  }
  return [...found].sort((a, b) => a - b);
}

/** The rows named `formats[0].steps[1].price` and so on; gaps close up. */
export function rowsOf(answers: Answers): EditionRows {
  return {
    formats: indices(answers, /^formats\[(\d{1,3})\]\./)
      .slice(0, MOST_FORMATS)
      .map((f) => {
        const field = (name: string) => text(answers, `formats[${f}].${name}`);
        return {
          paperId: field("paperId"),
          process: field("process"),
          sheet: field("sheet"),
          sheetWidth: field("sheetWidth"),
          sheetHeight: field("sheetHeight"),
          margin: field("margin"),
          imageWidth: field("imageWidth"),
          imageHeight: field("imageHeight"),
          steps: indices(answers, new RegExp(`^formats\\[${f}\\]\\.steps\\[(\\d{1,3})\\]\\.`))
            .slice(0, MOST_STEPS)
            .map((s) => ({
              from: field(`steps[${s}].from`),
              to: field(`steps[${s}].to`),
              price: field(`steps[${s}].price`),
            })),
        };
      }),
  };
}

/** The same answers with other rows. */
export function withRows(answers: Answers, rows: EditionRows): Answers {
  const kept = Object.fromEntries(Object.entries(answers).filter(([name]) => !name.startsWith("formats[")));
  for (const [f, format] of rows.formats.entries()) {
    for (const field of FORMAT_FIELDS) kept[`formats[${f}].${field}`] = format[field];
    for (const [s, step] of format.steps.entries()) {
      for (const field of STEP_FIELDS) kept[`formats[${f}].steps[${s}].${field}`] = step[field];
    }
  }
  return kept;
}

/** What a press of the form does to its rows: "add-step:0", "remove-step:0:2", "add-format", "remove-format:1", "fit:0". */
export type RowAct = { answers: Answers; focus: string; said: string | null };

/** The next step begins where the last one ends. */
function nextStep(steps: readonly StepRow[]): StepRow {
  const last = steps.at(-1);
  if (last === undefined) return { ...EMPTY_STEP, from: "1" };
  return /^\d+$/.test(last.to) ? { ...EMPTY_STEP, from: String(Number(last.to) + 1) } : EMPTY_STEP;
}

/**
 * Does what a press asks of the rows; null when it asks for something else. `ratio` is the shape of the picture inside its crop,
 * for "fit". Returns the answers, and the field that takes the focus.
 */
export function actOnRows(
  intent: string,
  answers: Answers,
  ratio: { width: number; height: number } | null,
): RowAct | null {
  const [act = "", first = "0", second = "0"] = intent.split(":");
  const rows = rowsOf(answers);
  const f = Number(first);
  const s = Number(second);
  const format = rows.formats[f];
  const done = (formats: FormatRow[], focus: string, said: string | null = null): RowAct => ({
    answers: withRows(answers, { formats }),
    focus,
    said,
  });
  const replaced = (next: FormatRow) => rows.formats.map((row, at) => (at === f ? next : row));
  switch (act) {
    case "add-format": {
      const last = rows.formats.at(-1) ?? EMPTY_FORMAT;
      const added = { ...EMPTY_FORMAT, paperId: last.paperId, process: last.process, margin: last.margin };
      if (rows.formats.length >= MOST_FORMATS) {
        return done(rows.formats, "limit", `An edition has at most ${MOST_FORMATS} formats here.`);
      }
      return done(
        [...rows.formats, { ...added, steps: last.steps.map((step) => ({ ...step, price: "" })) }],
        `formats[${rows.formats.length}].paperId`,
      );
    }
    case "remove-format":
      if (rows.formats.length < 2 || format === undefined) return done(rows.formats, "limit");
      return done(
        rows.formats.filter((_, at) => at !== f),
        `formats[${Math.max(0, f - 1)}].paperId`,
      );
    case "add-step": {
      if (format === undefined || format.steps.length >= MOST_STEPS) return done(rows.formats, "limit");
      const step = nextStep(format.steps);
      return done(
        replaced({ ...format, steps: [...format.steps, step] }),
        `formats[${f}].steps[${format.steps.length}].${step.from === "" ? "from" : "to"}`,
      );
    }
    case "remove-step": {
      if (format === undefined) return done(rows.formats, "limit");
      const steps = format.steps.filter((_, at) => at !== s);
      return done(
        replaced({ ...format, steps: steps.length === 0 ? [EMPTY_STEP] : steps }),
        `formats[${f}].steps[${Math.max(0, Math.min(s, steps.length - 1))}].from`,
      );
    }
    case "fit": {
      if (format === undefined) return done(rows.formats, "limit");
      const offered = sheetOption(format.sheet);
      const sheet = offered ?? { widthMm: Number(format.sheetWidth), heightMm: Number(format.sheetHeight) };
      const minMargin = Number(format.margin === "" ? "0" : format.margin);
      const known = ratio !== null && sheet.widthMm > 0 && sheet.heightMm > 0 && minMargin >= 0;
      const fit = known ? fitIntoSheet({ ratio, sheet, minMargin }) : null;
      if (fit === null) {
        return done(
          rows.formats,
          `formats[${f}].${offered === null ? "sheetWidth" : "margin"}`,
          "Give a sheet, and a margin that leaves room on it.",
        );
      }
      return done(
        replaced({
          ...format,
          imageWidth: String(Math.floor(fit.image.widthMm)),
          imageHeight: String(Math.floor(fit.image.heightMm)),
        }),
        `formats[${f}].imageWidth`,
      );
    }
    default:
      return null;
  }
}

/** The rows of a ladder that stands by itself: `steps[0].price`. */
export function stepsOf(answers: Answers): StepRow[] {
  return indices(answers, /^steps\[(\d{1,3})\]\./)
    .slice(0, MOST_STEPS)
    .map((s) => ({
      from: text(answers, `steps[${s}].from`),
      to: text(answers, `steps[${s}].to`),
      price: text(answers, `steps[${s}].price`),
    }));
}

/** The same answers with other rows of a ladder that stands by itself. */
export function withSteps(answers: Answers, steps: readonly StepRow[]): Answers {
  const kept = Object.fromEntries(Object.entries(answers).filter(([name]) => !name.startsWith("steps[")));
  for (const [s, step] of steps.entries()) {
    for (const field of STEP_FIELDS) kept[`steps[${s}].${field}`] = step[field];
  }
  return kept;
}

/** "add-step" and "remove-step:2" on a ladder that stands by itself; null when a press asks for something else. */
export function actOnSteps(intent: string, answers: Answers): { answers: Answers; focus: string } | null {
  const [act, second = "0"] = intent.split(":");
  const steps = stepsOf(answers);
  if (act === "add-step") {
    if (steps.length >= MOST_STEPS) return { answers, focus: "steps[0].from" };
    const added = nextStep(steps);
    return {
      answers: withSteps(answers, [...steps, added]),
      focus: `steps[${steps.length}].${added.from === "" ? "from" : "to"}`,
    };
  }
  if (act !== "remove-step") return null;
  const left = steps.filter((_, at) => at !== Number(second));
  return {
    answers: withSteps(answers, left.length === 0 ? [EMPTY_STEP] : left),
    focus: `steps[${Math.max(0, Math.min(Number(second), left.length - 1))}].from`,
  };
}
