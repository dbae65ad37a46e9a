/**
 * Days, moments, and dates that are only partly known. Legal and tax days are days in the studio's zone; moments are
 * UTC and are always shown with the name of the zone they are shown in.
 */

/** A day of the calendar, "2026-11-02", without a zone: whoever makes one has said in which zone it was that day. */
export type IsoDay = string;

/** An IANA zone name, "Europe/London". */
export type ZoneName = string;

const DAY = /^(\d{4})-(\d{2})-(\d{2})$/;
const MONTH = /^(\d{4})-(\d{2})$/;
const YEAR = /^\d{4}$/;
const MILLISECONDS_A_DAY = 86_400_000;

function isLeapYear(year: number): boolean {
  return year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0);
}

function daysInMonth(year: number, month: number): number {
  if (month === 2) return isLeapYear(year) ? 29 : 28;
  return [4, 6, 9, 11].includes(month) ? 30 : 31;
}

/** Whether the text is a day that exists: "2024-02-29" is, "2026-02-29" and "2026-2-9" are not. Years 0001 to 9999. */
export function isIsoDay(text: string): boolean {
  const match = DAY.exec(text);
  if (match === null) return false;
  const [year, month, day] = [Number(match[1]), Number(match[2]), Number(match[3])];
  return year >= 1 && month >= 1 && month <= 12 && day >= 1 && day <= daysInMonth(year, month);
}

function partsOf(day: IsoDay): { year: number; month: number; day: number } {
  if (!isIsoDay(day)) throw new RangeError(`"${day}" is not a day of the calendar.`);
  return { year: Number(day.slice(0, 4)), month: Number(day.slice(5, 7)), day: Number(day.slice(8, 10)) };
}

function isoDay(year: number, month: number, day: number): IsoDay {
  if (year < 1 || year > 9999) throw new RangeError(`The year ${year} cannot be written as a day here.`);
  const padded = (value: number, length: number) => String(value).padStart(length, "0");
  return `${padded(year, 4)}-${padded(month, 2)}-${padded(day, 2)}`;
}

function utcOf(day: IsoDay): Date {
  const parts = partsOf(day);
  const date = new Date(0);
  date.setUTCFullYear(parts.year, parts.month - 1, parts.day);
  return date;
}

/** The day so many days later (or earlier, below zero). Throws RangeError for a day that does not exist. */
export function addDays(day: IsoDay, days: number): IsoDay {
  const date = new Date(utcOf(day).getTime() + days * MILLISECONDS_A_DAY);
  return isoDay(date.getUTCFullYear(), date.getUTCMonth() + 1, date.getUTCDate());
}

/** The same day so many months later; the last day of the month where that day does not exist (31 January + 1 is 28 or 29 February). */
export function addMonths(day: IsoDay, months: number): IsoDay {
  const parts = partsOf(day);
  const index = parts.year * 12 + (parts.month - 1) + months;
  const year = Math.floor(index / 12);
  const month = (index % 12) + 1;
  return isoDay(year, month, Math.min(parts.day, daysInMonth(year, month)));
}

/** How many days `to` lies after `from`; below zero when it lies before. */
export function daysBetween(from: IsoDay, to: IsoDay): number {
  return Math.round((utcOf(to).getTime() - utcOf(from).getTime()) / MILLISECONDS_A_DAY);
}

/** Whether a dated row holds on a day. Both ends belong to the period; no end means "until further notice". */
export function isInForce(period: { from: IsoDay; to: IsoDay | null }, day: IsoDay): boolean {
  return period.from <= day && (period.to === null || day <= period.to);
}

/** Whether the runtime knows the zone. */
export function isZoneName(text: string): boolean {
  if (text === "") return false;
  try {
    new Intl.DateTimeFormat("en", { timeZone: text });
    return true;
  } catch {
    return false;
  }
}

/** The day it is in a zone at an instant: 2026-10-24T23:30:00Z is 2026-10-25 in London. Throws RangeError for an unknown zone or no instant. */
export function isoDayInZone(instant: Date, zone: ZoneName): IsoDay {
  const parts = new Intl.DateTimeFormat("en", {
    timeZone: zone,
    calendar: "gregory",
    numberingSystem: "latn",
    year: "numeric",
    month: "numeric",
    day: "numeric",
  }).formatToParts(instant);
  const value = (type: string) => Number(parts.find((part) => part.type === type)?.value);
  return isoDay(value("year"), value("month"), value("day"));
}

/** English without a country is written the way the shop writes it: day before month, clock of 24 hours. */
function localeFor(languageTag: string): string {
  return languageTag === "en" ? "en-GB" : languageTag;
}

/** A moment as a reader of the language writes it, with the zone's name: "1 December 2026 at 18:00 GMT". */
export function formatInstant(instant: Date, zone: ZoneName, languageTag: string): string {
  return new Intl.DateTimeFormat(localeFor(languageTag), {
    timeZone: zone,
    year: "numeric",
    month: "long",
    day: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    timeZoneName: "short",
  }).format(instant);
}

/** A day as a reader of the language writes it: "16 November 2026". Throws RangeError for a day that does not exist. */
export function formatDay(day: IsoDay, languageTag: string): string {
  return new Intl.DateTimeFormat(localeFor(languageTag), {
    timeZone: "UTC",
    year: "numeric",
    month: "long",
    day: "numeric",
  }).format(utcOf(day));
}

/** How closely the time of something is known. */
export type DatePrecision = "year" | "month" | "day" | "instant" | "unknown";

/**
 * When something happened, as closely as is known. `value` is "2021", "2021-05", "2021-05-03", an instant in UTC
 * ("2021-05-03T14:30:00.000Z"), or "" when nothing is known.
 */
export type PartialDate = { readonly value: string; readonly precision: DatePrecision };

/** Nothing is known about when. */
export const UNKNOWN_DATE: PartialDate = { value: "", precision: "unknown" };

const INSTANT =
  /^(\d{4}-\d{2}-\d{2})T([01]\d|2[0-3]):([0-5]\d)(?::([0-5]\d)(?:\.\d{1,3})?)?(Z|[+-]([01]\d|2[0-3]):[0-5]\d)$/;

/**
 * A partial date from its text: "2021", "2021-05", "2021-05-03", an ISO 8601 instant with its offset, or nothing at
 * all (unknown). Null for anything else, dates that do not exist among them.
 */
export function parsePartialDate(text: string): PartialDate | null {
  const value = text.trim();
  if (value === "") return UNKNOWN_DATE;
  if (YEAR.test(value)) return isIsoDay(`${value}-01-01`) ? { value, precision: "year" } : null;
  if (MONTH.test(value)) return isIsoDay(`${value}-01`) ? { value, precision: "month" } : null;
  if (DAY.test(value)) return isIsoDay(value) ? { value, precision: "day" } : null;
  const match = INSTANT.exec(value);
  if (match === null || !isIsoDay(match[1] ?? "")) return null;
  return { value: new Date(value).toISOString(), precision: "instant" };
}

/** A partial date as a reader of the language writes it; instants in the zone, with its name. The caller brings the word for "unknown". */
export function formatPartialDate(
  date: PartialDate,
  options: { languageTag: string; zone: ZoneName; unknown: string },
): string {
  switch (date.precision) {
    case "unknown":
      return options.unknown;
    case "year":
      return String(Number(date.value));
    case "month":
      return new Intl.DateTimeFormat(localeFor(options.languageTag), {
        timeZone: "UTC",
        year: "numeric",
        month: "long",
      }).format(utcOf(`${date.value}-01`));
    case "day":
      return formatDay(date.value, options.languageTag);
    case "instant":
      return formatInstant(new Date(date.value), options.zone, options.languageTag);
  }
}

const COARSENESS: Record<DatePrecision, number> = { year: 0, month: 1, day: 2, instant: 3, unknown: 4 };

/**
 * Puts partial dates in order, for sorting: by the first day they could mean in the zone, then the less precise one
 * first (2021 stands before May 2021), then by instant. What is unknown comes last.
 */
export function comparePartialDates(a: PartialDate, b: PartialDate, zone: ZoneName): number {
  if (a.precision === "unknown" || b.precision === "unknown") {
    return COARSENESS[a.precision] === COARSENESS[b.precision] ? 0 : a.precision === "unknown" ? 1 : -1;
  }
  const [firstA, firstB] = [firstDay(a, zone), firstDay(b, zone)];
  if (firstA !== firstB) return firstA < firstB ? -1 : 1;
  if (a.precision !== b.precision) return COARSENESS[a.precision] - COARSENESS[b.precision];
  return a.value === b.value ? 0 : a.value < b.value ? -1 : 1;
}

function firstDay(date: PartialDate, zone: ZoneName): IsoDay {
  switch (date.precision) {
    case "year":
      return `${date.value}-01-01`;
    case "month":
      return `${date.value}-01`;
    case "instant":
      return isoDayInZone(new Date(date.value), zone);
    default:
      return date.value;
  }
}

/**
 * The last day on which a consumer may withdraw from a distance sale: the 14th day after the day the goods arrived.
 * A consumer who was never told of the right has 12 months more; one told within those 12 months has 14 days from the
 * day after being told. All are days where the buyer received the goods, to the end of that day.
 *
 * `informedOn` is the day the information was given: on or before delivery by default, null when never.
 * Local law may lengthen it (some of it moves a last day that is a holiday); the shop may always allow more.
 *
 * Source: Directive 2011/83/EU Arts 9 and 10; Consumer Contracts Regulations 2013 (SI 2013/3134) regs 29-31.
 * Regulation 31 and Art. 10 from memory.
 */
export function endOfWithdrawal(deliveredOn: IsoDay, informedOn: IsoDay | null = deliveredOn): IsoDay {
  const end = addDays(deliveredOn, 14);
  if (informedOn !== null && informedOn <= deliveredOn) return end;
  if (informedOn !== null && informedOn <= addMonths(deliveredOn, 12)) return addDays(informedOn, 14);
  return addMonths(end, 12);
}
