import type { Rect, Size } from "./orientation";

/** Widths (pixels) of the proofs of a whole frame, for the contact sheet and the frame's page. */
export const FRAME_PROOF_WIDTHS: readonly number[] = [320, 640, 1280];

/** Widths (pixels) of the proofs of a print's crop, for the shop. */
export const PRINT_PROOF_WIDTHS: readonly number[] = [320, 640, 1280, 2048];

/** Millionths of the upright scan's width and height. */
export type Crop = { x: number; y: number; width: number; height: number };

/** The whole scan. */
export const WHOLE: Crop = { x: 0, y: 0, width: 1_000_000, height: 1_000_000 };

/** A crop in whole pixels of a scan; at least one pixel, never past its edges. */
export function cropInPixels(crop: Crop, size: Size): Rect {
  const clamp = (value: number, least: number, most: number) => Math.min(most, Math.max(least, value));
  const left = clamp(Math.round((crop.x * size.width) / 1_000_000), 0, size.width - 1);
  const top = clamp(Math.round((crop.y * size.height) / 1_000_000), 0, size.height - 1);
  const right = clamp(Math.round(((crop.x + crop.width) * size.width) / 1_000_000), left + 1, size.width);
  const bottom = clamp(Math.round(((crop.y + crop.height) * size.height) / 1_000_000), top + 1, size.height);
  return { left, top, width: right - left, height: bottom - top };
}

/**
 * The sizes to build for a picture: the wanted widths that do not enlarge it, and its own width where that is less
 * than the largest wanted one. Smallest first; heights keep the shape, rounded.
 */
export function proofSizes(picture: Size, wanted: readonly number[]): Size[] {
  const largest = Math.min(picture.width, Math.max(...wanted));
  const widths = [...new Set([...wanted.filter((width) => width < largest), largest])].sort((a, b) => a - b);
  return widths.map((width) => ({
    width,
    height: Math.max(1, Math.round((picture.height * width) / picture.width)),
  }));
}
