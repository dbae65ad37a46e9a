import { formatInstant, formatPartialDate, isoDayInZone, type ZoneName } from "~/domain/dates";
import { ladderRows } from "~/domain/pricing/ladder";
import { currencyCode, formatMoney } from "~/platform/money";
import type { LedgerBody } from "./ledger-body";
import { ENTRY_WORDS, type LedgerEntryKind } from "./transitions";

/** A line of the ledger in words, for the studio. */

const TAG = "en-GB";

/** "1 to 5 at £280.00, 6 to 15 at £340.00" */
export function ladderWords(
  ladder: readonly { fromNumber: number; toNumber: number; amount: number }[],
  currency: string,
): string {
  return ladderRows(ladder)
    .map((row) => {
      const price = formatMoney({ amount: row.amount, currency: currencyCode(currency) }, TAG);
      return row.fromNumber === row.toNumber
        ? `${row.fromNumber} at ${price}`
        : `${row.fromNumber} to ${row.toNumber} at ${price}`;
    })
    .join(", ");
}

/** "1, 3 to 5" of ascending numbers. */
export function spans(numbers: readonly number[]): string {
  const found: [number, number][] = [];
  for (const number of numbers) {
    const last = found.at(-1);
    if (last !== undefined && last[1] + 1 === number) last[1] = number;
    else found.push([number, number]);
  }
  return found.map(([from, to]) => (from === to ? `${from}` : `${from} to ${to}`)).join(", ");
}

export type WordsFor = {
  kind: LedgerEntryKind;
  sheet: number | null;
  mark: string | null;
  body: LedgerBody;
  corrects: number | null;
  secret: {
    partyName: string | null;
    orderNumber: number | null;
    reason: string | null;
  } | null;
};

/** The word a line is known by, and what follows it. What follows begins with a stop or comma, or with a word. */
export function entryWords(entry: WordsFor, zone: ZoneName): { verb: string; rest: string } {
  const { kind, body, secret, mark } = entry;
  const verb =
    kind === "closed_early" && mark !== null
      ? "Retired"
      : `${ENTRY_WORDS[kind].charAt(0).toUpperCase()}${ENTRY_WORDS[kind].slice(1)}`;
  const time = (iso: string) => formatInstant(new Date(iso), zone, TAG);
  const parts: string[] = [];
  if (entry.sheet !== null) parts.push(`, sheet ${entry.sheet}`);
  switch (kind) {
    case "opened":
      if (body.limit !== undefined) parts.push(`, limit ${body.limit}`);
      if (body.release !== undefined) parts.push(`, to be bought from ${time(body.release)}`);
      break;
    case "limit_lowered":
      parts.push(` from ${body.from ?? "?"} to ${body.to ?? "?"}`);
      break;
    case "prices_changed":
      if (body.now !== undefined && body.was !== undefined && body.currency !== undefined) {
        parts.push(
          `${body.format === undefined ? "" : ` of format ${body.format}`}: numbers ${ladderWords(body.now, body.currency)}; they were ${ladderWords(body.was, body.currency)}`,
        );
      }
      break;
    case "closed_early":
      if (mark !== null) parts.push(", as the edition was closed early");
      else if (body.retired !== undefined) {
        parts.push(
          body.retired.length === 0
            ? ", no number was left to retire"
            : `, ${body.retired.length === 1 ? "number" : "numbers"} ${spans(body.retired)} retired`,
        );
      }
      break;
    case "corrected":
      parts.push(entry.corrects === null ? "" : `, line ${entry.corrects}`);
      if (body.release !== undefined && body.wasRelease !== undefined) {
        parts.push(`: to be bought from ${time(body.release)}, no longer from ${time(body.wasRelease)}`);
      }
      break;
    default:
      if (secret?.partyName) parts.push(` to ${secret.partyName}`);
      if (secret?.orderNumber) parts.push(`, order ${secret.orderNumber}`);
      if (body.until !== undefined) parts.push(` until ${body.until}`);
  }
  if (secret?.reason) parts.push(`: ${secret.reason}`);
  return { verb, rest: parts.join("").trim() };
}

/** When a thing happened, in words, where that differs from when it was written; null where it does not. */
export function happenedWords(
  entry: {
    happenedAt: Date | null;
    happenedPrecision: "unknown" | "year" | "month" | "day" | "instant";
    recordedAt: Date;
  },
  zone: ZoneName,
): string | null {
  const { happenedAt, happenedPrecision, recordedAt } = entry;
  if (happenedPrecision === "unknown" || happenedAt === null) return "when is not known";
  if (happenedPrecision === "instant") {
    // The same minute reads the same.
    const apart = Math.abs(recordedAt.getTime() - happenedAt.getTime());
    return apart < 60_000 ? null : `happened ${formatInstant(happenedAt, zone, TAG)}`;
  }
  const length = { year: 4, month: 7, day: 10 }[happenedPrecision];
  const value = isoDayInZone(happenedAt, zone).slice(0, length);
  return `happened ${formatPartialDate(
    { value, precision: happenedPrecision },
    { languageTag: TAG, zone, unknown: "" },
  )}`;
}

/** "2 Dec 2026, 18:22" in the zone. */
export function writtenWords(at: Date, zone: ZoneName): string {
  return new Intl.DateTimeFormat(TAG, {
    timeZone: zone,
    day: "numeric",
    month: "short",
    year: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    hourCycle: "h23",
  }).format(at);
}
