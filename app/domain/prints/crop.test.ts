import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { cropBetween, cropProblem, isWhole, parsePerCent, perCent, pixelsInside } from "./crop";

const millionths = fc.integer({ min: 0, max: 1_000_000 });

describe("per cent as typed", () => {
  it("is exact to four decimals, by comma or point", () => {
    expect(parsePerCent("12.5")).toBe(125_000);
    expect(parsePerCent("0,0001")).toBe(1);
    expect(parsePerCent(" 100 % ")).toBe(1_000_000);
    for (const text of ["", "-1", "100.0001", "1.23456", "12.", "1e2", "half"]) {
      expect(parsePerCent(text)).toBeNull();
    }
  });

  it("comes back as it went in", () => {
    fc.assert(
      fc.property(millionths, (value) => {
        expect(parsePerCent(perCent(value))).toBe(value);
      }),
    );
  });
});

describe("a crop", () => {
  it("stays within the scan and is never a sliver", () => {
    const corner = fc.record({
      x: fc.double({ min: -2e6, max: 3e6, noNaN: true }),
      y: fc.double({ min: -2e6, max: 3e6, noNaN: true }),
    });
    fc.assert(
      fc.property(corner, corner, (a, b) => {
        const crop = cropBetween(a, b);
        expect(cropProblem(crop)).toBeNull();
        expect(crop.x).toBeGreaterThanOrEqual(0);
        expect(crop.y).toBeGreaterThanOrEqual(0);
      }),
    );
  });

  it("says what is wrong with four numbers", () => {
    expect(cropProblem({ x: 0, y: 0, width: 9_999, height: 500_000 })).toMatch(/at least 1 %/);
    expect(cropProblem({ x: 600_000, y: 0, width: 400_001, height: 500_000 })).toMatch(/right edge/);
    expect(cropProblem({ x: 0, y: 1, width: 400_000, height: 1_000_000 })).toMatch(/lower edge/);
    expect(isWhole({ x: 0, y: 0, width: 1_000_000, height: 1_000_000 })).toBe(true);
  });

  it("is so many pixels of its scan", () => {
    const half = { x: 250_000, y: 0, width: 500_000, height: 1_000_000 };
    expect(pixelsInside(half, { width: 6_000, height: 4_800 })).toEqual({ widthPx: 3_000, heightPx: 4_800 });
  });
});
