import { describe, expect, it } from "vitest";
import {
  acuityPpi,
  bottomWeightedMount,
  enlargement,
  fitIntoSheet,
  isoA,
  isoB,
  isSheetWithinTolerance,
  isWithinTolerance,
  largestAt,
  pixelsFor,
  printPpi,
  resolutionWord,
  sheetMassGrams,
} from "./sizes";

// ISO 216:2007, table of trimmed sizes.
describe("A and B series", () => {
  it.each([
    [0, 841, 1189],
    [1, 594, 841],
    [2, 420, 594],
    [3, 297, 420],
    [4, 210, 297],
    [5, 148, 210],
    [6, 105, 148],
    [9, 37, 52],
    [10, 26, 37],
  ])("A%i is %i x %i mm", (n, widthMm, heightMm) => {
    expect(isoA(n)).toEqual({ widthMm, heightMm });
  });

  // From memory of the same table.
  it.each([
    [0, 1000, 1414],
    [1, 707, 1000],
    [2, 500, 707],
    [3, 353, 500],
    [4, 250, 353],
    [5, 176, 250],
  ])("B%i is %i x %i mm", (n, widthMm, heightMm) => {
    expect(isoB(n)).toEqual({ widthMm, heightMm });
  });

  // ISO 216 construction: A0 has a square metre and sides of 1 to the square root of 2.
  it("A0 is within a millimetre of 1000·2^(-1/4) x 1000·2^(1/4)", () => {
    const { widthMm, heightMm } = isoA(0);
    expect(Math.abs(widthMm - 1000 * 2 ** -0.25)).toBeLessThan(1);
    expect(Math.abs(heightMm - 1000 * 2 ** 0.25)).toBeLessThan(1);
  });
});

// ISO 216:2007: +-1.5 mm up to 150 mm, +-2 mm from 150 to 600 mm, +-3 mm above.
describe("tolerances", () => {
  it("421.9 x 595.0 passes as A2", () => {
    expect(isSheetWithinTolerance({ widthMm: 421.9, heightMm: 595 }, isoA(2))).toBe(true);
  });
  it("844.0 passes as A0's short side, 844.1 does not", () => {
    expect(isWithinTolerance(844, 841)).toBe(true);
    expect(isWithinTolerance(844.1, 841)).toBe(false);
  });
  it("150 mm has 1.5, 600 mm has 2", () => {
    expect([151.5, 151.6].map((mm) => isWithinTolerance(mm, 150))).toEqual([true, false]);
    expect([602, 602.1, 597.9].map((mm) => isWithinTolerance(mm, 600))).toEqual([true, false, false]);
  });
});

// Arithmetic from the inch of 25.4 mm (international yard and pound agreement, 1959), to the nearest pixel.
describe("pixels of a frame", () => {
  it("56 x 56 at 3200 ppi is 7055 x 7055, 49.77 MP", () => {
    expect(pixelsFor({ widthMm: 56, heightMm: 56 }, 3200)).toEqual({
      widthPx: 7055,
      heightPx: 7055,
      megapixels: 49.77,
    });
  });
  it("56 x 84 at 2400 and 56 x 168 at 3200 ppi", () => {
    expect(pixelsFor({ widthMm: 84, heightMm: 56 }, 2400)).toMatchObject({ widthPx: 7937, heightPx: 5291 });
    expect(pixelsFor({ widthMm: 168, heightMm: 56 }, 3200)).toMatchObject({ widthPx: 21165, heightPx: 7055 });
  });
});

describe("enlargement and resolution of a print (arithmetic)", () => {
  it("56 mm to 400 mm from 3200 ppi is 7.143 times at 448.0 ppi", () => {
    expect(enlargement(56, 400)).toBe(7.143);
    expect(printPpi(3200, 56, 400)).toBe(448);
  });
  it("7055 px reach 597.3, 746.7 and 995.5 mm at 300, 240 and 180 ppi", () => {
    expect([300, 240, 180].map((ppi) => largestAt(7055, ppi))).toEqual([597.3, 746.7, 995.5]);
  });
});

// The 20/20 acuity rule, 1 / (2 d tan 0.5'), as published rounded to 3438 / d (pixelcraft.photo.blog: 24 in, 143 ppi).
describe("acuity", () => {
  it.each([
    [10, 343.8],
    [18, 191],
    [24, 143.2],
    [40, 86],
    [60, 57.3],
  ])("from %i in: %f ppi", (inches, ppi) => {
    expect(acuityPpi(inches)).toBe(ppi);
  });
});

// Common practice, a house rule: no standard.
describe("bands of resolution", () => {
  it("change at 300, 240 and 180 ppi", () => {
    expect([300, 299.9, 240, 239.9, 180, 179.9].map(resolutionWord)).toEqual([
      "fine",
      "good",
      "good",
      "enough at arm's length",
      "enough at arm's length",
      "below the floor",
    ]);
  });
});

// Geometry on ISO 216 A2 and on the nominal 6x9 frame of ISO 732 film.
describe("a frame on a sheet", () => {
  it("84 x 56 on A2 lengthways with 40 mm is 510 x 340, 42 at the sides", () => {
    expect(
      fitIntoSheet({
        ratio: { width: 84, height: 56 },
        sheet: { widthMm: 594, heightMm: 420 },
        minMargin: 40,
      }),
    ).toEqual({
      image: { widthMm: 510, heightMm: 340 },
      margins: { left: 42, right: 42, top: 40, bottom: 40 },
    });
  });
});

// Common practice among framers: the bottom 5 to 15 % larger than the top.
describe("a bottom-weighted mount", () => {
  it("500 x 600 round 300 x 300 at 1.10", () => {
    expect(
      bottomWeightedMount({
        outer: { widthMm: 500, heightMm: 600 },
        window: { widthMm: 300, heightMm: 300 },
        weight: 1.1,
      }),
    ).toEqual({ sides: 100, top: 143, bottom: 157, exactTop: 142.86, exactBottom: 157.14 });
  });
});

// ISO 536: grammage is mass by area.
describe("mass of paper", () => {
  it.each([
    ["A2 at 310 g/m2", 420, 594, 310, 77.339],
    ["A1 at 310 g/m2", 594, 841, 310, 154.862],
    ["A3 at 188 g/m2", 297, 420, 188, 23.451],
    ["16 x 20 in at 310 g/m2", 406.4, 508, 310, 64],
    ["a roll of 610 mm x 12 m at 310 g/m2, without its core", 610, 12_000, 310, 2269.2],
  ])("%s", (_name, width, height, grammage, grams) => {
    expect(sheetMassGrams(width, height, grammage)).toBe(grams);
  });
});
