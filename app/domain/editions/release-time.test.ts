import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { instantOf, noonOf, wallClock } from "./release-time";

// The clocks of Europe/London go forward at 01:00 UTC on the last Sunday of March and back at 01:00 UTC on the last Sunday of
// October (Summer Time Order 2002; Directive 2000/84/EC has the same instants).
const LONDON = "Europe/London";

describe("an instant from the wall clock of a zone", () => {
  it("is one on ordinary days", () => {
    expect(instantOf({ day: "2026-12-01", time: "18:00" }, LONDON)).toEqual({
      kind: "one",
      at: new Date("2026-12-01T18:00:00Z"),
    });
    expect(instantOf({ day: "2026-07-01", time: "18:00" }, LONDON)).toEqual({
      kind: "one",
      at: new Date("2026-07-01T17:00:00Z"),
    });
  });

  it("does not exist while the clocks go forward, and comes twice while they go back", () => {
    expect(instantOf({ day: "2026-03-29", time: "01:30" }, LONDON)).toEqual({ kind: "gap" });
    expect(instantOf({ day: "2026-10-25", time: "01:30" }, LONDON)).toEqual({
      kind: "twice",
      first: new Date("2026-10-25T00:30:00Z"),
      second: new Date("2026-10-25T01:30:00Z"),
    });
  });

  it("knows zones of half an hour, and clocks that change by half an hour", () => {
    expect(instantOf({ day: "2026-05-05", time: "00:15" }, "Asia/Kolkata")).toEqual({
      kind: "one",
      at: new Date("2026-05-04T18:45:00Z"),
    });
    // Lord Howe Island moves its clocks by thirty minutes: on the first Sunday of October from 02:00 to 02:30.
    expect(instantOf({ day: "2026-10-04", time: "02:15" }, "Australia/Lord_Howe")).toEqual({ kind: "gap" });
  });

  it("is what the clocks show, there and back", () => {
    const zone = fc.constantFrom(LONDON, "Europe/Berlin", "America/New_York", "Asia/Kolkata", "UTC");
    const minute = fc.integer({ min: Date.UTC(2000, 0, 1) / 60_000, max: Date.UTC(2040, 0, 1) / 60_000 });
    fc.assert(
      fc.property(minute, zone, (minutes, where) => {
        const at = new Date(minutes * 60_000);
        const found = instantOf(wallClock(at, where), where);
        const all =
          found.kind === "one" ? [found.at] : found.kind === "twice" ? [found.first, found.second] : [];
        expect(all.map(Number)).toContain(Number(at));
      }),
      { numRuns: 300 },
    );
  });

  it("refuses what is no time", () => {
    expect(() => instantOf({ day: "2026-02-30", time: "10:00" }, LONDON)).toThrow(RangeError);
    expect(() => instantOf({ day: "2026-02-20", time: "24:00" }, LONDON)).toThrow(RangeError);
    expect(noonOf("2026-07-01", LONDON)).toEqual(new Date("2026-07-01T11:00:00Z"));
  });
});
