/**
 * How the samples of a file lie to the upright picture: values 1 to 8 of the Orientation tag (TIFF 6.0, p. 36;
 * JEITA CP-3451 Exif uses the same).
 */

export type Rect = { left: number; top: number; width: number; height: number };
export type Size = { width: number; height: number };

type Turn = { swapped: boolean; mirroredAcross: boolean; mirroredDown: boolean };

const TURNS: readonly Turn[] = [
  { swapped: false, mirroredAcross: false, mirroredDown: false },
  { swapped: false, mirroredAcross: true, mirroredDown: false },
  { swapped: false, mirroredAcross: true, mirroredDown: true },
  { swapped: false, mirroredAcross: false, mirroredDown: true },
  { swapped: true, mirroredAcross: false, mirroredDown: false },
  { swapped: true, mirroredAcross: true, mirroredDown: false },
  { swapped: true, mirroredAcross: true, mirroredDown: true },
  { swapped: true, mirroredAcross: false, mirroredDown: true },
];

/** Anything but 1 to 8 is taken for 1, as readers do with a missing tag. */
function turnOf(orientation: number | undefined): Turn {
  const upright: Turn = { swapped: false, mirroredAcross: false, mirroredDown: false };
  return TURNS[(orientation ?? 1) - 1] ?? upright;
}

/** The size of the upright picture, from the size as it lies in the file; the same the other way round. */
export function turnedSize(size: Size, orientation: number | undefined): Size {
  return turnOf(orientation).swapped ? { width: size.height, height: size.width } : size;
}

/** Where a rectangle of the upright picture (pixels) lies in the file. */
export function rectInFile(rect: Rect, upright: Size, orientation: number | undefined): Rect {
  const turn = turnOf(orientation);
  const left = turn.mirroredAcross ? upright.width - rect.left - rect.width : rect.left;
  const top = turn.mirroredDown ? upright.height - rect.top - rect.height : rect.top;
  return turn.swapped
    ? { left: top, top: left, width: rect.height, height: rect.width }
    : { left, top, width: rect.width, height: rect.height };
}

/** Turns samples upright: `size` and `pixels` as they lie in the file, `channels` bytes a pixel. */
export function turnUpright(
  pixels: Uint8Array,
  size: Size,
  channels: number,
  orientation: number | undefined,
): Uint8Array {
  const turn = turnOf(orientation);
  if (!turn.swapped && !turn.mirroredAcross && !turn.mirroredDown) return pixels;
  const upright = turnedSize(size, orientation);
  const turned = new Uint8Array(pixels.length);
  let to = 0;
  for (let v = 0; v < upright.height; v++) {
    const b = turn.mirroredDown ? upright.height - 1 - v : v;
    for (let u = 0; u < upright.width; u++) {
      const a = turn.mirroredAcross ? upright.width - 1 - u : u;
      const from = (turn.swapped ? a * size.width + b : b * size.width + a) * channels;
      for (let c = 0; c < channels; c++) turned[to++] = pixels[from + c] ?? 0;
    }
  }
  return turned;
}
