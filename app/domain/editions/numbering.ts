/**
 * How a copy is numbered: the mark pencilled at the lower left of its sheet.
 *
 * Sources: IPCNY glossary, "Artist annotations" (lower left, impression over edition size; AP, PP, HC, BAT and their
 * meaning); Tamarind Book of Lithography (Antreasian & Adams, 1971) section 5.1.
 */

/** Which sequence a copy belongs to. */
export type Run = "numbered" | "ap" | "pp" | "hc" | "bat" | "exhibition";

/** Every run, in the order an edition's book shows them. */
export const RUNS: readonly Run[] = ["numbered", "ap", "pp", "hc", "bat", "exhibition"];

/** A run's name in full, for the studio's screens. */
export const RUN_NAMES: Record<Run, string> = {
  numbered: "Numbered",
  ap: "Artist's proof",
  pp: "Printer's proof",
  hc: "Hors commerce",
  bat: "Bon à tirer",
  exhibition: "Exhibition copy",
};

const PREFIXES: Record<Exclude<Run, "numbered" | "bat">, string> = {
  ap: "AP",
  pp: "PP",
  hc: "HC",
  exhibition: "Exhibition",
};

const RUN_NAMES_MANY: Record<Run, string> = {
  numbered: "numbered copies",
  ap: "artist's proofs",
  pp: "printer's proofs",
  hc: "hors commerce",
  bat: "bon à tirer",
  exhibition: "exhibition copies",
};

/** "1 artist's proof", "2 exhibition copies", for the studio's screens. */
export function countOfRun(run: Run, count: number): string {
  return `${count} ${count === 1 ? RUN_NAMES[run].toLowerCase() : RUN_NAMES_MANY[run]}`;
}

/** Exhibition copies are not for sale, and "hors commerce" says the same of itself. The rest may be sold. */
export function isForSale(run: Run): boolean {
  return run !== "exhibition" && run !== "hc";
}

/** A copy's place: the number in its run, and how many the run has in all. */
export type CopyNumber = { readonly run: Run; readonly number: number; readonly total: number };

/**
 * The mark of a copy: "3/25", "AP 2/3", "PP 1/1", "HC 1/2", "Exhibition 1/1"; the bon à tirer is one only and says "BAT".
 * Throws RangeError unless number and total are whole and 1 <= number <= total (total 1 for the BAT).
 */
export function numberMark({ run, number, total }: CopyNumber): string {
  if (!Number.isSafeInteger(number) || !Number.isSafeInteger(total) || number < 1 || number > total) {
    throw new RangeError(`There is no number ${number} of ${total}.`);
  }
  if (run === "bat") {
    if (total !== 1) throw new RangeError("An edition has one bon à tirer.");
    return "BAT";
  }
  return run === "numbered" ? `${number}/${total}` : `${PREFIXES[run]} ${number}/${total}`;
}

const RUNS_BY_PREFIX: Record<string, Exclude<Run, "bat">> = {
  "": "numbered",
  AP: "ap",
  EA: "ap",
  PP: "pp",
  HC: "hc",
  EXHIBITION: "exhibition",
};

/**
 * The copy a mark names, or null when it names none. Case, points and spaces do not matter, and the French "EA" is
 * read as AP: "7 / 25", "a.p. 2/3", "EA 2/3", "bat".
 */
export function parseNumberMark(text: string): CopyNumber | null {
  const plain = text.replace(/[\s.]/g, "").toUpperCase();
  if (plain === "BAT") return { run: "bat", number: 1, total: 1 };
  const match = /^([A-Z]*)([1-9]\d{0,5})\/([1-9]\d{0,5})$/.exec(plain);
  if (match === null) return null;
  const [, prefix = "", number = "", total = ""] = match;
  const run = Object.hasOwn(RUNS_BY_PREFIX, prefix) ? RUNS_BY_PREFIX[prefix] : undefined;
  if (run === undefined || Number(number) > Number(total)) return null;
  return { run, number: Number(number), total: Number(total) };
}

/**
 * How many artist's proofs a share of the run makes, cut down and rounded up: the studio chooses which it means.
 * The usual share, a tenth, is common practice (two trade glossaries agree), not a rule; it can be higher.
 * Throws RangeError unless limit is a whole number of 0 or more and percent a whole number from 0 to 100.
 */
export function proofShare(limit: number, percent = 10): { floor: number; ceil: number } {
  if (!Number.isSafeInteger(limit) || limit < 0) throw new RangeError(`${limit} is not a limit.`);
  if (!Number.isSafeInteger(percent) || percent < 0 || percent > 100) {
    throw new RangeError(`${percent} is not a share in whole per cent.`);
  }
  const hundredths = limit * percent;
  return { floor: Math.floor(hundredths / 100), ceil: Math.ceil(hundredths / 100) };
}
