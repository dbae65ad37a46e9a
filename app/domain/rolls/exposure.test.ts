import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { formatSeconds, parseAperture, parseSeconds } from "./exposure";

describe("an aperture", () => {
  it.each([
    ["22", 22],
    ["f/22", 22],
    ["F22", 22],
    ["f / 5,6", 5.6],
    ["192", 192],
  ])("may be written %s", (text, value) => expect(parseAperture(text)).toBe(value));

  it.each(["", "wide open", "f/", "0", "22 8", "-4", "1/22"])("is not %j", (text) =>
    expect(parseAperture(text)).toBeNull(),
  );
});

describe("a time", () => {
  it.each([
    ["1/125", 1 / 125],
    ["1/125 s", 1 / 125],
    ["6", 6],
    ["6 s", 6],
    ["0,5", 0.5],
    ["1:30", 90],
    ["4 min", 240],
    ["4m", 240],
    ["2 h", 7200],
    ["1 min 30 s", 90],
  ])("may be written %s", (text, value) => expect(parseSeconds(text)).toBeCloseTo(value, 9));

  it.each(["", "long", "1/0", "0", "1:75", "-3", "8 days", "999999999"])("is not %j", (text) =>
    expect(parseSeconds(text)).toBeNull(),
  );

  it("is read back as it is written", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 7 * 24 * 3600 }), (seconds) => {
        expect(parseSeconds(formatSeconds(seconds))).toBe(seconds);
      }),
    );
    fc.assert(
      fc.property(fc.integer({ min: 2, max: 8000 }), (below) => {
        expect(parseSeconds(formatSeconds(1 / below))).toBeCloseTo(1 / below, 9);
      }),
    );
  });
});
