import { type Crop, cropInPixels } from "~/domain/imaging/proof-sizes";

/** A crop as a person types it: four numbers in per cent of the scan, kept in millionths. */

const WHOLE_SIDE = 1_000_000;
/** A crop is at least a hundredth of the scan's side. */
const LEAST = 10_000;

/** Millionths of "12.5" per cent (125000); at most four decimals, comma or point. null for anything else. */
export function parsePerCent(text: string): number | null {
  const match = /^(\d{1,3})(?:[.,](\d{1,4}))?$/.exec(text.trim().replace(/\s*%$/, ""));
  if (match === null) return null;
  const millionths = Number(match[1]) * 10_000 + Number((match[2] ?? "").padEnd(4, "0"));
  return millionths <= WHOLE_SIDE ? millionths : null;
}

/** The per cent of millionths as they are typed: 125000 is "12.5". */
export function perCent(millionths: number): string {
  const whole = Math.floor(millionths / 10_000);
  const rest = String(millionths % 10_000)
    .padStart(4, "0")
    .replace(/0+$/, "");
  return rest === "" ? String(whole) : `${whole}.${rest}`;
}

/** Why four numbers are no crop, or null when they are one. */
export function cropProblem(crop: Crop): string | null {
  if (crop.width < LEAST || crop.height < LEAST)
    return "A crop is at least 1 % of the scan wide and 1 % high.";
  if (crop.x + crop.width > WHOLE_SIDE) return "The crop goes past the right edge of the scan.";
  return crop.y + crop.height > WHOLE_SIDE ? "The crop goes past the lower edge of the scan." : null;
}

/** A crop between two corners, in millionths; kept within the scan and at least a hundredth of its sides. */
export function cropBetween(a: { x: number; y: number }, b: { x: number; y: number }): Crop {
  const clamp = (value: number) => Math.min(WHOLE_SIDE, Math.max(0, Math.round(value)));
  const [left, right] = [clamp(Math.min(a.x, b.x)), clamp(Math.max(a.x, b.x))];
  const [top, bottom] = [clamp(Math.min(a.y, b.y)), clamp(Math.max(a.y, b.y))];
  const width = Math.max(LEAST, right - left);
  const height = Math.max(LEAST, bottom - top);
  return {
    x: Math.min(left, WHOLE_SIDE - width),
    y: Math.min(top, WHOLE_SIDE - height),
    width,
    height,
  };
}

/** Whether nothing is cut away. */
export function isWhole(crop: Crop): boolean {
  return crop.width === WHOLE_SIDE && crop.height === WHOLE_SIDE;
}

export function isSameCrop(a: Crop, b: Crop): boolean {
  return a.x === b.x && a.y === b.y && a.width === b.width && a.height === b.height;
}

/** The pixels inside a crop of a scan. */
export function pixelsInside(
  crop: Crop,
  scan: { width: number; height: number },
): { widthPx: number; heightPx: number } {
  const { width, height } = cropInPixels(crop, scan);
  return { widthPx: width, heightPx: height };
}
