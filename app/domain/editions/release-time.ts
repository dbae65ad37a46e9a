import { isIsoDay, type ZoneName } from "~/domain/dates";

/** The wall clock of a zone: turning a day and a time of day into an instant, and back. */

export type WallClock = { day: string; time: string };

/** `gap`: the clocks go forward over that time; `twice`: they go back over it, and it comes two times. */
export type InstantOfWallClock =
  | { kind: "one"; at: Date }
  | { kind: "twice"; first: Date; second: Date }
  | { kind: "gap" };

const TIME = /^([01]\d|2[0-3]):([0-5]\d)$/;
const HOURS = 3_600_000;

/** Making a formatter costs far more than using it. */
const formatters = new Map<ZoneName, Intl.DateTimeFormat>();

function formatterFor(zone: ZoneName): Intl.DateTimeFormat {
  const known = formatters.get(zone);
  if (known !== undefined) return known;
  const made = new Intl.DateTimeFormat("en", {
    timeZone: zone,
    calendar: "gregory",
    numberingSystem: "latn",
    hourCycle: "h23",
    year: "numeric",
    month: "2-digit",
    day: "2-digit",
    hour: "2-digit",
    minute: "2-digit",
  });
  formatters.set(zone, made);
  return made;
}

/** What the clocks of a zone show at an instant: "2026-12-01", "18:00". Seconds are left out. */
export function wallClock(at: Date, zone: ZoneName): WallClock {
  const parts = formatterFor(zone).formatToParts(at);
  const value = (type: string) => parts.find((part) => part.type === type)?.value ?? "";
  return {
    day: `${value("year").padStart(4, "0")}-${value("month")}-${value("day")}`,
    time: `${value("hour")}:${value("minute")}`,
  };
}

/** Whether a text is a time of day: "18:00". */
export function isTimeOfDay(text: string): boolean {
  return TIME.test(text);
}

/**
 * The instant at which the clocks of a zone show a day and a time of day. Where clocks change there may be none or two.
 * Throws RangeError for a day that does not exist or a time that is none.
 */
export function instantOf({ day, time }: WallClock, zone: ZoneName): InstantOfWallClock {
  if (!isIsoDay(day) || !isTimeOfDay(time)) throw new RangeError(`${day} ${time} is no time of a day.`);
  const asUtc = Date.parse(`${day}T${time}:00.000Z`);
  // How far the zone's clocks are from UTC, asked on both sides of any change nearby.
  const found = new Set<number>();
  for (const aside of [-26, 0, 26]) {
    const near = new Date(asUtc + aside * HOURS);
    const shown = wallClock(near, zone);
    const offset = Date.parse(`${shown.day}T${shown.time}:00.000Z`) - near.getTime();
    const candidate = asUtc - offset;
    const back = wallClock(new Date(candidate), zone);
    if (back.day === day && back.time === time) found.add(candidate);
  }
  const [first, second] = [...found].sort((a, b) => a - b);
  if (first === undefined) return { kind: "gap" };
  if (second === undefined) return { kind: "one", at: new Date(first) };
  return { kind: "twice", first: new Date(first), second: new Date(second) };
}

/** Noon of a day in a zone: the instant that stands for a day known without its time. */
export function noonOf(day: string, zone: ZoneName): Date {
  const noon = instantOf({ day, time: "12:00" }, zone);
  // No zone changes its clocks at noon; whatever one might do, midday in UTC is on that day or next to it.
  return noon.kind === "one" ? noon.at : new Date(`${day}T12:00:00.000Z`);
}
