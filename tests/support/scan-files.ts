import { writeFile } from "node:fs/promises";
import sharp from "sharp";
import { pngClaiming } from "./pictures";

/*
 * Scans as a browser is given them: files, whose name is what the studio sees.
 */

/** 2,400 pixels an inch of film, as libvips counts: pixels a millimetre. */
const DENSITY = { xres: 2_400 / 25.4, yres: 2_400 / 25.4, resolutionUnit: "inch" } as const;

/**
 * A grey 16-bit TIFF, uncompressed as a scanner writes it: a sky that falls off above a dark wood, with grain.
 *
 * @param seed moves the edge of the wood, so that no two are the same file.
 */
export async function greyScan(file: string, width: number, height: number, seed: number): Promise<string> {
  const edges = Float64Array.from(
    { length: width },
    (_, x) => height * (0.55 + 0.12 * Math.sin((x / width) * 9 + seed)),
  );
  const samples = new Uint16Array(width * height);
  let grain = seed;
  for (let y = 0, at = 0; y < height; y++) {
    const sky = 58_000 - (y / height) * 34_000;
    for (let x = 0; x < width; x++, at++) {
      grain = (grain * 1_664_525 + 1_013_904_223) >>> 0;
      samples[at] = (y > (edges[x] ?? 0) ? 6_000 : sky) + (grain >>> 21);
    }
  }
  await sharp(samples, { raw: { width, height, channels: 1 } })
    .toColourspace("grey16")
    .tiff({ compression: "none", ...DENSITY })
    .toFile(file);
  return file;
}

/** A colour TIFF of 8 bits a channel, compressed without loss: an evening sky. */
export async function colourScan(file: string, width: number, height: number): Promise<string> {
  const samples = new Uint8Array(width * height * 3);
  for (let y = 0, at = 0; y < height; y++) {
    const low = y / height;
    for (let x = 0; x < width; x++, at += 3) {
      samples[at] = 70 + low * 150;
      samples[at + 1] = 90 + low * 40 + (x & 7);
      samples[at + 2] = 170 - low * 90;
    }
  }
  await sharp(samples, { raw: { width, height, channels: 3 } })
    .tiff({ compression: "lzw", ...DENSITY })
    .toFile(file);
  return file;
}

/** A few bytes that claim to be a picture of more pixels than a machine could hold. */
export async function hostileFile(file: string): Promise<string> {
  await writeFile(file, pngClaiming(60_000, 60_000));
  return file;
}
