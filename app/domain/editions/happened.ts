import { isoDayInZone, parsePartialDate, type ZoneName } from "~/domain/dates";
import type { Happened } from "./ledger.server";
import { noonOf } from "./release-time";

/** When something happened, as a person writes it into a form. */
export type HappenedProblem = "not_a_date" | "in_the_future";

export const HAPPENED_PROBLEMS: Record<HappenedProblem, string> = {
  not_a_date: "Write when it happened as 2026-11-29, only 2026-11 or 2026, or unknown.",
  in_the_future: "That day has not come yet.",
};

/**
 * Reads "2026-11-29", "2026-11", "2026" or "unknown"; nothing at all is the present instant. A day, month or year is
 * kept as noon of its first day in the studio's zone, with how much of it is known.
 */
export function parseHappened(
  text: string,
  { zone, now }: { zone: ZoneName; now: Date },
): { ok: true; happened: Happened } | { ok: false; problem: HappenedProblem } {
  const typed = text.trim();
  if (typed === "") return { ok: true, happened: { precision: "instant", at: now } };
  if (/^unknown$/i.test(typed)) return { ok: true, happened: { precision: "unknown" } };
  const date = parsePartialDate(typed);
  if (date === null || date.precision === "unknown") return { ok: false, problem: "not_a_date" };
  if (date.precision === "instant") {
    const at = new Date(date.value);
    if (at > now) return { ok: false, problem: "in_the_future" };
    return { ok: true, happened: { precision: "instant", at } };
  }
  const firstDay = { year: `${date.value}-01-01`, month: `${date.value}-01`, day: date.value }[
    date.precision
  ];
  if (firstDay > isoDayInZone(now, zone)) return { ok: false, problem: "in_the_future" };
  return { ok: true, happened: { precision: date.precision, at: noonOf(firstDay, zone) } };
}
