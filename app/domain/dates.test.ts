import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  addDays,
  addMonths,
  comparePartialDates,
  daysBetween,
  endOfWithdrawal,
  formatDay,
  formatInstant,
  formatPartialDate,
  isInForce,
  isIsoDay,
  isoDayInZone,
  isZoneName,
  type PartialDate,
  parsePartialDate,
  UNKNOWN_DATE,
} from "./dates";

const anyDay = fc
  .date({ min: new Date("1900-01-01"), max: new Date("2200-12-31"), noInvalidDate: true })
  .map((date) => date.toISOString().slice(0, 10));
const partial = (text: string): PartialDate => {
  const date = parsePartialDate(text);
  if (date === null) throw new Error(`${text} was not read`);
  return date;
};

describe("days", () => {
  it("exist or do not", () => {
    expect(["2024-02-29", "2000-02-29", "2026-12-31"].every(isIsoDay)).toBe(true);
    expect(
      [
        "2026-02-29",
        "1900-02-29",
        "2026-13-01",
        "2026-00-10",
        "2026-2-9",
        "2026-04-31",
        "0000-01-01",
        "",
      ].some(isIsoDay),
    ).toBe(false);
  });

  it("are added and counted over the end of a month, a year and February", () => {
    expect(addDays("2026-12-31", 1)).toBe("2027-01-01");
    expect(addDays("2028-02-28", 1)).toBe("2028-02-29");
    expect(addDays("2026-03-01", -1)).toBe("2026-02-28");
    expect(addMonths("2028-02-29", 12)).toBe("2029-02-28");
    expect(addMonths("2026-12-31", 2)).toBe("2027-02-28");
    expect(addMonths("2026-01-15", -1)).toBe("2025-12-15");
    expect(() => addDays("2026-02-30", 1)).toThrow(RangeError);
  });

  it("adding and counting agree", () => {
    fc.assert(
      fc.property(anyDay, fc.integer({ min: -50_000, max: 50_000 }), (day, days) => {
        const other = addDays(day, days);
        expect(isIsoDay(other)).toBe(true);
        expect(daysBetween(day, other)).toBe(days);
        expect(addDays(other, -days)).toBe(day);
      }),
    );
  });

  it("hold within a period, its two ends included", () => {
    const period = { from: "2026-01-01", to: "2026-12-31" };
    expect(["2026-01-01", "2026-06-01", "2026-12-31"].every((day) => isInForce(period, day))).toBe(true);
    expect(["2025-12-31", "2027-01-01"].some((day) => isInForce(period, day))).toBe(false);
    expect(isInForce({ from: "2026-01-01", to: null }, "2999-01-01")).toBe(true);
  });
});

describe("zones", () => {
  it("decide which day it is", () => {
    const late = new Date("2026-07-24T23:30:00Z");
    expect(isoDayInZone(late, "UTC")).toBe("2026-07-24");
    expect(isoDayInZone(late, "Europe/London")).toBe("2026-07-25");
    expect(isoDayInZone(late, "America/New_York")).toBe("2026-07-24");
    expect(() => isoDayInZone(late, "Nowhere/Else")).toThrow(RangeError);
  });

  it("are known or not", () => {
    expect(isZoneName("Europe/Berlin")).toBe(true);
    expect(isZoneName("Nowhere/Else")).toBe(false);
    expect(isZoneName("")).toBe(false);
  });

  it("are named beside a moment", () => {
    const instant = new Date("2026-07-01T17:00:00Z");
    expect(formatInstant(instant, "Europe/London", "en")).toBe("1 July 2026 at 18:00 BST");
    expect(formatInstant(instant, "Europe/Berlin", "de")).toBe("1. Juli 2026 um 19:00 MESZ");
    expect(formatInstant(new Date("2026-12-01T00:05:00Z"), "Europe/London", "en")).toBe(
      "1 December 2026 at 00:05 GMT",
    );
  });

  it("do not move a day", () => {
    expect(formatDay("2026-11-16", "en")).toBe("16 November 2026");
    expect(formatDay("2026-11-16", "de")).toBe("16. November 2026");
  });
});

describe("partial dates", () => {
  it("are read as closely as they are written", () => {
    expect(partial(" 2021 ")).toEqual({ value: "2021", precision: "year" });
    expect(partial("2021-05")).toEqual({ value: "2021-05", precision: "month" });
    expect(partial("2021-05-03")).toEqual({ value: "2021-05-03", precision: "day" });
    expect(partial("2021-05-03T16:30+02:00")).toEqual({
      value: "2021-05-03T14:30:00.000Z",
      precision: "instant",
    });
    expect(partial("")).toEqual(UNKNOWN_DATE);
  });

  it("are refused when they do not exist or cannot be told apart", () => {
    for (const text of [
      "21",
      "2021-13",
      "2021-02-30",
      "3/5/2021",
      "May 2021",
      "2021-05-03T14:30",
      "2021-02-30T10:00Z",
      "0000",
    ]) {
      expect(parsePartialDate(text), text).toBeNull();
    }
  });

  it("are shown no closer than they are known", () => {
    const show = (text: string) =>
      formatPartialDate(partial(text), { languageTag: "en", zone: "Europe/London", unknown: "not known" });
    expect(show("2021")).toBe("2021");
    expect(show("2021-05")).toBe("May 2021");
    expect(show("2021-05-03")).toBe("3 May 2021");
    expect(show("2021-05-03T14:30Z")).toBe("3 May 2021 at 15:30 BST");
    expect(show("")).toBe("not known");
  });

  it("are put in order, the unknown last", () => {
    const texts = ["", "2021-05-03T23:30:00.000Z", "2021-05-04", "2021-05-03", "2021-05", "2021", "2020-12"];
    const sorted = texts.map(partial).sort((a, b) => comparePartialDates(a, b, "Europe/London"));
    expect(sorted.map((date) => date.value)).toEqual([
      "2020-12",
      "2021",
      "2021-05",
      "2021-05-03",
      "2021-05-04",
      "2021-05-03T23:30:00.000Z",
      "",
    ]);
  });

  it("have one order whichever way round they are compared", () => {
    const anyPartial = fc
      .tuple(anyDay, fc.constantFrom(4, 7, 10, 0), fc.boolean())
      .map(([day, length, instant]) => partial(instant ? `${day}T12:00:00Z` : day.slice(0, length)));
    fc.assert(
      fc.property(anyPartial, anyPartial, anyPartial, (a, b, c) => {
        const order = (p: PartialDate, q: PartialDate) => Math.sign(comparePartialDates(p, q, "Asia/Tokyo"));
        expect(order(a, b) + order(b, a)).toBe(0);
        if (order(a, b) <= 0 && order(b, c) <= 0) expect(order(a, c)).toBeLessThanOrEqual(0);
      }),
    );
  });
});

describe("the end of withdrawal", () => {
  it("is counted from being told, when that came late", () => {
    expect(endOfWithdrawal("2026-11-02", "2026-10-20")).toBe("2026-11-16");
    expect(endOfWithdrawal("2026-11-02", "2027-03-01")).toBe("2027-03-15");
    expect(endOfWithdrawal("2026-11-02", "2027-11-02")).toBe("2027-11-16");
    expect(endOfWithdrawal("2026-11-02", "2027-11-10")).toBe("2027-11-16");
  });
});
