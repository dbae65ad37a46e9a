/**
 * Sizes of sheets, images and mounts, and the resolution a scan gives at a size. Lengths in millimetres, widths before
 * heights; resolutions in pixels per inch. Decimals are exact: no binary fraction decides a tie.
 */

import { exact, product, quotient, roundHalfEven, roundHalfUp } from "../rounding";

/** Width and height in mm. */
export type SizeMm = { readonly widthMm: number; readonly heightMm: number };

/** Exact since the international yard and pound agreement of 1959. */
export const MM_PER_INCH = 25.4;

function needPositive(...values: readonly number[]): void {
  for (const value of values) {
    if (!Number.isFinite(value) || value <= 0)
      throw new RangeError(`${value} is not a size or a resolution.`);
  }
}

function halved(largest: SizeMm, times: number): SizeMm {
  if (!Number.isSafeInteger(times) || times < 0 || times > 10) {
    throw new RangeError(`The series goes from 0 to 10, not to ${times}.`);
  }
  let size = largest;
  for (let step = 0; step < times; step += 1) {
    size = { widthMm: Math.floor(size.heightMm / 2), heightMm: size.widthMm };
  }
  return size;
}

/** A sheet of the A series, upright: A0 is 841 x 1189 mm, each next one is half of the last, cut down to whole mm. Source: ISO 216:2007. */
export function isoA(number: number): SizeMm {
  return halved({ widthMm: 841, heightMm: 1189 }, number);
}

/** A sheet of the B series, upright, made the same way from B0, 1000 x 1414 mm. Source: ISO 216:2007. */
export function isoB(number: number): SizeMm {
  return halved({ widthMm: 1000, heightMm: 1414 }, number);
}

/** How far a length may stray from its nominal one, in mm: 1.5 up to 150, 2 up to 600, 3 above. Source: ISO 216:2007. */
export function toleranceMm(nominalMm: number): number {
  needPositive(nominalMm);
  if (nominalMm <= 150) return 1.5;
  return nominalMm <= 600 ? 2 : 3;
}

/** Whether a measured length is within the tolerance of its nominal one, the limit itself included. */
export function isWithinTolerance(measuredMm: number, nominalMm: number): boolean {
  const [measured, nominal, tolerance] = [exact(measuredMm), exact(nominalMm), exact(toleranceMm(nominalMm))];
  const off = measured.above * nominal.below - nominal.above * measured.below;
  const size = off < 0n ? -off : off;
  return size * tolerance.below <= tolerance.above * measured.below * nominal.below;
}

/** Whether a measured sheet is what it is called: each side within the tolerance of its own, in either orientation. */
export function isSheetWithinTolerance(measured: SizeMm, nominal: SizeMm): boolean {
  const fits = (width: number, height: number) =>
    isWithinTolerance(width, nominal.widthMm) && isWithinTolerance(height, nominal.heightMm);
  return fits(measured.widthMm, measured.heightMm) || fits(measured.heightMm, measured.widthMm);
}

/** Inches to mm, exact. */
export function inchesToMm(inches: number): number {
  return roundHalfUp(product(inches, MM_PER_INCH), 6);
}

export type NamedSheet = SizeMm & {
  /** As the trade calls it: "A3", "16 × 20 in". */
  readonly name: string;
  readonly family: "iso_a" | "iso_b" | "photographic";
};

const INCHES: readonly (readonly [number, number, string])[] = [
  [5, 7, "5 × 7 in"],
  [8, 10, "8 × 10 in"],
  [9.5, 12, "9½ × 12 in"],
  [11, 14, "11 × 14 in"],
  [12, 16, "12 × 16 in"],
  [16, 20, "16 × 20 in"],
  [20, 24, "20 × 24 in"],
  [24, 30, "24 × 30 in"],
  [30, 40, "30 × 40 in"],
];

/** Common photographic sheets, upright. Trade sizes from memory; the inch is exact. */
export const PHOTOGRAPHIC_SHEETS: readonly NamedSheet[] = INCHES.map(([width, height, name]) => ({
  name,
  family: "photographic",
  widthMm: inchesToMm(width),
  heightMm: inchesToMm(height),
}));

/** The sheets offered when a format is planned, upright: A0 to A6, B0 to B5, photographic sheets. Any other size may be typed. */
export const OFFERED_SHEETS: readonly NamedSheet[] = [
  ...[0, 1, 2, 3, 4, 5, 6].map((n): NamedSheet => ({ name: `A${n}`, family: "iso_a", ...isoA(n) })),
  ...[0, 1, 2, 3, 4, 5].map((n): NamedSheet => ({ name: `B${n}`, family: "iso_b", ...isoB(n) })),
  ...PHOTOGRAPHIC_SHEETS,
];

/** What a sheet of this size is called, in either orientation; null when it has no name here. Exact to the tenth of a mm. */
export function sheetName(size: SizeMm): string | null {
  const tenths = (mm: number) => Math.round(mm * 10);
  const [short, long] = [Math.min(size.widthMm, size.heightMm), Math.max(size.widthMm, size.heightMm)];
  const found = OFFERED_SHEETS.find(
    (sheet) => tenths(sheet.widthMm) === tenths(short) && tenths(sheet.heightMm) === tenths(long),
  );
  return found?.name ?? null;
}

/** The pixels of a frame scanned at so many ppi: mm / 25.4 x ppi, to the nearest pixel; megapixels to two decimals, from the unrounded pixels. */
export function pixelsFor(
  frame: SizeMm,
  ppi: number,
): { widthPx: number; heightPx: number; megapixels: number } {
  needPositive(frame.widthMm, frame.heightMm, ppi);
  const inch = exact(MM_PER_INCH);
  const area = quotient(
    product(frame.widthMm, frame.heightMm, ppi, ppi),
    product(MM_PER_INCH, MM_PER_INCH, 1_000_000),
  );
  return {
    widthPx: roundHalfUp(quotient(product(frame.widthMm, ppi), inch), 0),
    heightPx: roundHalfUp(quotient(product(frame.heightMm, ppi), inch), 0),
    megapixels: roundHalfUp(area, 2),
  };
}

/** How many times larger the print is than the frame, to three decimals: print mm / frame mm. */
export function enlargement(frameMm: number, printMm: number): number {
  needPositive(frameMm, printMm);
  return roundHalfUp(quotient(exact(printMm), exact(frameMm)), 3);
}

/** The resolution of a print from a frame scanned at `scanPpi`, to one decimal: scan ppi / enlargement, rounded once. */
export function printPpi(scanPpi: number, frameMm: number, printMm: number): number {
  needPositive(scanPpi, frameMm, printMm);
  return roundHalfUp(quotient(product(scanPpi, frameMm), exact(printMm)), 1);
}

/** The resolution of so many pixels over so many mm, to one decimal. */
export function ppiOf(pixels: number, lengthMm: number): number {
  needPositive(pixels, lengthMm);
  return roundHalfUp(quotient(product(pixels, MM_PER_INCH), exact(lengthMm)), 1);
}

/** The longest side so many pixels give at a resolution, in mm to 0.1. */
export function largestAt(pixels: number, ppi: number): number {
  needPositive(pixels, ppi);
  return roundHalfUp(quotient(product(pixels, MM_PER_INCH), exact(ppi)), 1);
}

/**
 * The resolution beyond which an eye of normal acuity, half a minute of arc to the pixel, sees no more from a distance in inches:
 * 3438 / distance, to one decimal. Ties go to the even digit, as the published figures have them (143.2 ppi at 24 in).
 */
export function acuityPpi(distanceInches: number): number {
  needPositive(distanceInches);
  return roundHalfEven(quotient(exact(3438), exact(distanceInches)), 1);
}

/** A comfortable distance to look from, in mm: one and a half to two diagonals. A rule of thumb. */
export function viewingDistanceMm(image: SizeMm): { nearest: number; furthest: number } {
  needPositive(image.widthMm, image.heightMm);
  const diagonal = Math.hypot(image.widthMm, image.heightMm);
  return { nearest: Math.round(diagonal * 1.5), furthest: Math.round(diagonal * 2) };
}

export type ResolutionWord = "fine" | "good" | "enough at arm's length" | "below the floor";

/** The word for a resolution: fine from 300 ppi, good from 240, enough at arm's length from 180. The studio's house rule, common practice, no standard. */
export function resolutionWord(ppi: number): ResolutionWord {
  if (ppi >= 300) return "fine";
  if (ppi >= 240) return "good";
  return ppi >= 180 ? "enough at arm's length" : "below the floor";
}

/** What a scan, or the part of it inside the crop, gives at an image size: the lower of its two resolutions, and its word. */
export function resolutionAt(
  scan: { readonly widthPx: number; readonly heightPx: number },
  image: SizeMm,
): { ppi: number; word: ResolutionWord } {
  const ppi = Math.min(ppiOf(scan.widthPx, image.widthMm), ppiOf(scan.heightPx, image.heightMm));
  return { ppi, word: resolutionWord(ppi) };
}

/** The white around an image in the middle of its sheet, in mm, each exactly half of what is over. */
export type Margins = {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
};

/** The margins of an image in the middle of its sheet. Below zero where the image is larger than the sheet. */
export function margins(image: SizeMm, sheet: SizeMm): Margins {
  needPositive(image.widthMm, image.heightMm, sheet.widthMm, sheet.heightMm);
  const half = (outer: number, inner: number) => {
    const [o, i] = [exact(outer), exact(inner)];
    return roundHalfUp({ above: o.above * i.below - i.above * o.below, below: o.below * i.below * 2n }, 6);
  };
  const [sides, ends] = [half(sheet.widthMm, image.widthMm), half(sheet.heightMm, image.heightMm)];
  return { left: sides, right: sides, top: ends, bottom: ends };
}

/**
 * The largest image of a ratio that leaves at least a margin on every side of a sheet, with the margins it leaves; null when the
 * margins leave nothing. The side that touches its margin is exact, the other one is to 0.1 mm and never past its own.
 */
export function fitIntoSheet(fit: {
  /** Width to height in any unit: a frame of 84 x 56 mm, a crop in pixels. */
  readonly ratio: { readonly width: number; readonly height: number };
  readonly sheet: SizeMm;
  readonly minMargin: number;
}): { image: SizeMm; margins: Margins } | null {
  const { ratio, sheet, minMargin } = fit;
  needPositive(ratio.width, ratio.height, sheet.widthMm, sheet.heightMm);
  if (!Number.isFinite(minMargin) || minMargin < 0) throw new RangeError(`${minMargin} is not a margin.`);
  const left = (side: number) => {
    const [whole, margin] = [exact(side), exact(minMargin)];
    const above = whole.above * margin.below - 2n * margin.above * whole.below;
    return { above, below: whole.below * margin.below };
  };
  const [width, height] = [left(sheet.widthMm), left(sheet.heightMm)];
  if (width.above <= 0n || height.above <= 0n) return null;
  const [fullWidth, fullHeight] = [roundHalfUp(width, 6), roundHalfUp(height, 6)];
  // Compared by cross-multiplying, so that a ratio that fits exactly touches all four margins.
  const [r, h] = [exact(ratio.width), exact(ratio.height)];
  const widthForHeight = { above: height.above * r.above * h.below, below: height.below * r.below * h.above };
  const isTooWide = widthForHeight.above * width.below > width.above * widthForHeight.below;
  const heightForWidth = { above: width.above * h.above * r.below, below: width.below * h.below * r.above };
  const image = isTooWide
    ? { widthMm: fullWidth, heightMm: Math.min(roundHalfUp(heightForWidth, 1), fullHeight) }
    : { widthMm: Math.min(roundHalfUp(widthForHeight, 1), fullWidth), heightMm: fullHeight };
  if (image.widthMm <= 0 || image.heightMm <= 0) return null;
  return { image, margins: margins(image, sheet) };
}

/**
 * A window mount whose lower margin is a little larger than the upper one: bottom = `weight` x top (1.05 to 1.15 is common practice
 * among framers, and even margins are common too). In mm: the sides, the exact top and bottom to 0.01, and both in whole mm with
 * their sum kept. Throws RangeError when the window does not fit or the weight is below 1.
 */
export function bottomWeightedMount(mount: {
  readonly outer: SizeMm;
  readonly window: SizeMm;
  readonly weight: number;
}): { sides: number; top: number; bottom: number; exactTop: number; exactBottom: number } {
  const { outer, window, weight } = mount;
  const { left: sides, top: even } = margins(window, outer);
  if (sides < 0 || even < 0) throw new RangeError("The window is larger than the mount.");
  if (!Number.isFinite(weight) || weight < 1) throw new RangeError(`${weight} does not weight the bottom.`);
  const total = roundHalfUp(product(even, 2), 6);
  const parts = exact(weight);
  const onePlusWeight = { above: parts.above + parts.below, below: parts.below };
  const top = quotient(exact(total), onePlusWeight);
  const bottom = quotient(product(total, weight), onePlusWeight);
  const wholeTop = roundHalfUp(top, 0);
  return {
    sides,
    top: wholeTop,
    bottom: roundHalfUp(exact(total - wholeTop), 6),
    exactTop: roundHalfUp(top, 2),
    exactBottom: roundHalfUp(bottom, 2),
  };
}

/** The mass of a sheet in grams, to three decimals: width (m) x height (m) x grammage (g/m2). Source: ISO 536, by its definition of grammage. */
export function sheetMassGrams(widthMm: number, heightMm: number, grammage: number): number {
  needPositive(widthMm, heightMm, grammage);
  return roundHalfUp(quotient(product(widthMm, heightMm, grammage), exact(1_000_000)), 3);
}
