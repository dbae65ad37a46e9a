import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  bottomWeightedMount,
  fitIntoSheet,
  inchesToMm,
  isoA,
  isSheetWithinTolerance,
  largestAt,
  margins,
  OFFERED_SHEETS,
  ppiOf,
  resolutionAt,
  sheetMassGrams,
  sheetName,
  viewingDistanceMm,
} from "./sizes";

const tenths = (min: number, max: number) => fc.integer({ min, max }).map((n) => n / 10);

describe("sheets", () => {
  it("have names, in either orientation", () => {
    expect(sheetName({ widthMm: 594, heightMm: 420 })).toBe("A2");
    expect(sheetName({ widthMm: 406.4, heightMm: 508 })).toBe("16 × 20 in");
    expect(sheetName({ widthMm: 400, heightMm: 500 })).toBeNull();
    expect(new Set(OFFERED_SHEETS.map((sheet) => sheet.name)).size).toBe(OFFERED_SHEETS.length);
  });

  it("are measured in either orientation, but not with the sides of two sheets", () => {
    expect(isSheetWithinTolerance({ widthMm: 595, heightMm: 421 }, isoA(2))).toBe(true);
    expect(isSheetWithinTolerance({ widthMm: 420, heightMm: 420 }, isoA(2))).toBe(false);
  });

  it("in inches are exact", () => {
    expect(inchesToMm(9.5)).toBe(241.3);
    expect(inchesToMm(0.1)).toBe(2.54);
  });

  it("refuse what is no size", () => {
    expect(() => isoA(11)).toThrow(RangeError);
    expect(() => isoA(-1)).toThrow(RangeError);
    expect(() => isoA(1.5)).toThrow(RangeError);
    expect(() => sheetMassGrams(0, 1, 1)).toThrow(RangeError);
    expect(() => ppiOf(100, Number.NaN)).toThrow(RangeError);
  });
});

describe("resolution", () => {
  it("is the lower of the two sides'", () => {
    expect(resolutionAt({ widthPx: 6000, heightPx: 4000 }, { widthMm: 508, heightMm: 400 })).toEqual({
      ppi: 254,
      word: "good",
    });
  });

  it("and the largest size undo each other", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 500, max: 30_000 }),
        fc.integer({ min: 72, max: 1200 }),
        (pixels, ppi) => {
          const reached = largestAt(pixels, ppi);
          // Half of a tenth of a millimetre, carried back into ppi, and half of a tenth of a ppi.
          expect(Math.abs(ppiOf(pixels, reached) - ppi)).toBeLessThanOrEqual(
            (ppi * 0.05) / (reached - 0.05) + 0.0501,
          );
        },
      ),
    );
  });

  it("comes with a distance", () => {
    expect(viewingDistanceMm({ widthMm: 300, heightMm: 400 })).toEqual({ nearest: 750, furthest: 1000 });
  });
});

describe("fitIntoSheet", () => {
  it("touches a margin, keeps the other, and keeps the ratio to the tenth of a millimetre", () => {
    fc.assert(
      fc.property(
        fc.record({ width: fc.integer({ min: 10, max: 300 }), height: fc.integer({ min: 10, max: 300 }) }),
        fc.record({ widthMm: tenths(1000, 15_000), heightMm: tenths(1000, 15_000) }),
        tenths(0, 450),
        (ratio, sheet, minMargin) => {
          const fit = fitIntoSheet({ ratio, sheet, minMargin });
          if (fit === null) throw new Error("there is room");
          const least = Math.min(fit.margins.left, fit.margins.top);
          expect(least).toBeCloseTo(minMargin, 6);
          expect(fit.image.widthMm + 2 * fit.margins.left).toBeCloseTo(sheet.widthMm, 6);
          expect(fit.image.heightMm + 2 * fit.margins.top).toBeCloseTo(sheet.heightMm, 6);
          const [byWidth, byHeight] = [
            (fit.image.widthMm * ratio.height) / ratio.width,
            (fit.image.heightMm * ratio.width) / ratio.height,
          ];
          const close =
            Math.abs(byWidth - fit.image.heightMm) <= 0.0501 ||
            Math.abs(byHeight - fit.image.widthMm) <= 0.0501;
          expect(close).toBe(true);
        },
      ),
    );
  });

  it("fills a sheet of its own ratio to all four margins", () => {
    expect(
      fitIntoSheet({
        ratio: { width: 1, height: 3 },
        sheet: { widthMm: 120.1, heightMm: 320.3 },
        minMargin: 10,
      }),
    ).toEqual({
      image: { widthMm: 100.1, heightMm: 300.3 },
      margins: { left: 10, right: 10, top: 10, bottom: 10 },
    });
  });

  it("finds no room where the margins leave none", () => {
    const sheet = { widthMm: 100, heightMm: 200 };
    expect(fitIntoSheet({ ratio: { width: 1, height: 1 }, sheet, minMargin: 50 })).toBeNull();
    expect(() => fitIntoSheet({ ratio: { width: 1, height: 1 }, sheet, minMargin: -1 })).toThrow(RangeError);
  });
});

describe("margins", () => {
  it("are halves, below zero where the image is too large", () => {
    expect(margins({ widthMm: 99.9, heightMm: 210 }, { widthMm: 100, heightMm: 200 })).toEqual({
      left: 0.05,
      right: 0.05,
      top: -5,
      bottom: -5,
    });
  });
});

describe("bottomWeightedMount", () => {
  it("keeps the sum and never makes the top the larger one", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 100, max: 900 }),
        fc.integer({ min: 20, max: 400 }),
        fc.integer({ min: 100, max: 150 }),
        (window, over, percent) => {
          const mount = bottomWeightedMount({
            outer: { widthMm: window + over, heightMm: window + over },
            window: { widthMm: window, heightMm: window },
            weight: percent / 100,
          });
          expect(mount.top + mount.bottom).toBe(over);
          expect(mount.bottom).toBeGreaterThanOrEqual(mount.top - 1);
          expect(Math.abs(mount.top - mount.exactTop)).toBeLessThanOrEqual(0.505);
        },
      ),
    );
  });

  it("refuses a window that does not fit", () => {
    const size = { widthMm: 100, heightMm: 100 };
    expect(() =>
      bottomWeightedMount({ outer: size, window: { widthMm: 101, heightMm: 50 }, weight: 1.1 }),
    ).toThrow(RangeError);
    expect(() => bottomWeightedMount({ outer: size, window: size, weight: 0.9 })).toThrow(RangeError);
  });
});
