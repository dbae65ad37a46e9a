/**
 * The films a roll can be. Frame sizes are nominal: backs and bodies differ (many 6×12 backs expose 56 × 112 mm, some 6×7 bodies 67
 * to 69 mm), so a studio goes by what its own camera exposes.
 */

import type { SizeMm } from "./sizes";

/** A film and the frame a camera makes on it: height across the film, width along it, in mm. */
export type FilmFormat = SizeMm & {
  /** Kept with the roll. */
  readonly key: string;
  readonly name: string;
  readonly film: "120" | "135" | "sheet";
  /** How many frames a film has, the usual number first. */
  readonly frames: readonly number[];
};

/** Source: frame tables for ISO 732 roll film (two tables agree); ISO 1007 for 135 film and the 4×5 in sheet from memory. */
export const FILM_FORMATS: readonly FilmFormat[] = [
  {
    key: "120-6x4.5",
    name: "6×4.5 on 120 roll film",
    film: "120",
    widthMm: 41.5,
    heightMm: 56,
    frames: [15, 16],
  },
  { key: "120-6x6", name: "6×6 on 120 roll film", film: "120", widthMm: 56, heightMm: 56, frames: [12, 13] },
  { key: "120-6x7", name: "6×7 on 120 roll film", film: "120", widthMm: 70, heightMm: 56, frames: [10] },
  { key: "120-6x8", name: "6×8 on 120 roll film", film: "120", widthMm: 77, heightMm: 56, frames: [9] },
  { key: "120-6x9", name: "6×9 on 120 roll film", film: "120", widthMm: 84, heightMm: 56, frames: [8] },
  { key: "120-6x12", name: "6×12 on 120 roll film", film: "120", widthMm: 118, heightMm: 56, frames: [6] },
  { key: "120-6x17", name: "6×17 on 120 roll film", film: "120", widthMm: 168, heightMm: 56, frames: [4] },
  { key: "120-6x24", name: "6×24 on 120 roll film", film: "120", widthMm: 224, heightMm: 56, frames: [3] },
  {
    key: "135-24x36",
    name: "24×36 mm on 135 film",
    film: "135",
    widthMm: 36,
    heightMm: 24,
    frames: [36, 24, 12],
  },
  { key: "sheet-4x5", name: "4×5 in sheet film", film: "sheet", widthMm: 120, heightMm: 95, frames: [1] },
];

/** A format by its key; null when there is none. */
export function filmFormat(key: string): FilmFormat | null {
  return FILM_FORMATS.find((format) => format.key === key) ?? null;
}
