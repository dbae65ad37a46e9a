import { type FileHandle, open } from "node:fs/promises";
import sharp, { type Metadata } from "sharp";
import { BYTES_TO_SEE, kindOfFile, MEDIA_TYPE, type TakenKind } from "./file-kind";
import { profileName } from "./grey-profile";
import { turnedSize } from "./orientation";
import { refusals } from "./refusals";
import { readTiffDirectory } from "./tiff-directory";

/** What is known of a scan once its file has been read to the end. Pixels are those of the upright picture. */
export type ScanFacts = {
  mediaType: string;
  width: number;
  height: number;
  /** Bits a channel: 8 or 16. */
  bitDepth: number;
  /** 1 for grey, 3 for RGB; a wholly opaque alpha channel is not counted. */
  channels: number;
  /** The profile's own name for its colours; "" where the file has no profile. */
  colourSpace: string;
  pixelsPerInch: number | null;
};

export type Examined = { ok: true; facts: ScanFacts } | { ok: false; reason: string };

const refused = (reason: string): Examined => ({ ok: false, reason });

/** Longer than any scan within a sane limit takes; a file built to decode for ever ends here. */
const DECODE_SECONDS = 240;

/** What a PNG must end with: the IEND chunk with its checksum (W3C PNG, 5.3 and 11.2.5). */
const PNG_END = Buffer.from([0, 0, 0, 0, 0x49, 0x45, 0x4e, 0x44, 0xae, 0x42, 0x60, 0x82]);
/** Some programs append a few bytes of their own. */
const PNG_END_WITHIN = 65_536;

/**
 * Reads a file as a scan: kind by contents, header, pixel limit before anything is decoded, then once to its last
 * line. A refusal carries the sentence for the photographer. Throws for what is not the file's fault.
 */
export async function examineScan(
  path: string,
  options: { pixelLimitMegapixels: number },
): Promise<Examined> {
  const file = await open(path, "r");
  try {
    const { size } = await file.stat();
    if (size === 0) return refused(refusals.empty());
    const kind = kindOfFile(await readAt(file, 0, BYTES_TO_SEE));
    if (kind === null) return refused(refusals.notAPicture());
    if (kind !== "jpeg" && kind !== "png" && kind !== "tiff") return refused(refusals.otherKind(kind));
    const wrong = await structureProblem(file, kind, size);
    if (wrong !== null) return refused(wrong);
    return await examinePicture(path, kind, options.pixelLimitMegapixels);
  } finally {
    await file.close();
  }
}

async function structureProblem(file: FileHandle, kind: TakenKind, size: number): Promise<string | null> {
  if (kind === "tiff") {
    const directory = await readTiffDirectory((offset, length) => readAt(file, offset, length));
    if (directory === null) return refusals.cutShort(kind);
    if (directory.cameraRaw) return refusals.otherKind("camera-raw");
    if (directory.reduced) return refusals.onlyAPreview();
  }
  if (kind === "png") {
    const from = Math.max(0, size - PNG_END_WITHIN);
    const end = Buffer.from(await readAt(file, from, size - from));
    if (!end.includes(PNG_END)) return refusals.cutShort(kind);
  }
  return null;
}

async function examinePicture(path: string, kind: TakenKind, limitMegapixels: number): Promise<Examined> {
  let header: Metadata;
  try {
    // Reads the header alone; the limit is judged here, with both figures, and not by sharp.
    header = await sharp(path, { limitInputPixels: false }).metadata();
  } catch (error) {
    throwIfOurs(error);
    return refused(refusals.cutShort(kind));
  }
  if (header.format !== kind) return refused(refusals.notAPicture());
  const wrong = headerProblem(header, limitMegapixels);
  if (wrong !== null) return refused(wrong);

  const options = { limitInputPixels: limitMegapixels * 1_000_000, failOn: "error" } as const;
  try {
    // The average of all pixels cannot be had without decoding every one, and needs little memory.
    await sharp(path, options)
      .resize(1, 1, { fit: "fill", kernel: "linear", fastShrinkOnLoad: false })
      .timeout({ seconds: DECODE_SECONDS })
      .raw()
      .toBuffer();
    if (header.hasAlpha && !(await sharp(path, options).stats()).isOpaque)
      return refused(refusals.transparent());
  } catch (error) {
    throwIfOurs(error);
    return refused(refusals.cutShort(kind));
  }
  return { ok: true, facts: factsOf(header, kind) };
}

function headerProblem(header: Metadata, limitMegapixels: number): string | null {
  const { width, height, depth, space, channels, hasAlpha, bitsPerSample } = header;
  if (width * height > limitMegapixels * 1_000_000)
    return refusals.overPixelLimit(width, height, limitMegapixels);
  if (bitsPerSample !== undefined && bitsPerSample < 8) return refusals.bits(bitsPerSample);
  if (depth === "float" || depth === "double" || depth === "complex" || depth === "dpcomplex") {
    return refusals.floatingPoint();
  }
  if (depth !== "uchar" && depth !== "ushort") return refusals.bits(32);
  if (space === "cmyk") return refusals.colourSpace("CMYK");
  if (space === "lab" || space === "labs") return refusals.colourSpace("Lab");
  if (channels - (hasAlpha ? 1 : 0) !== (isGrey(header) ? 1 : 3)) return refusals.transparent();
  return null;
}

function isGrey(header: Metadata): boolean {
  return header.space === "b-w" || header.space === "grey16";
}

function factsOf(header: Metadata, kind: TakenKind): ScanFacts {
  const upright = turnedSize({ width: header.width, height: header.height }, header.orientation);
  return {
    mediaType: MEDIA_TYPE[kind],
    ...upright,
    bitDepth: header.depth === "ushort" ? 16 : 8,
    channels: isGrey(header) ? 1 : 3,
    colourSpace: header.icc === undefined ? "" : profileName(header.icc),
    pixelsPerInch: header.density !== undefined && header.density > 1 ? Math.round(header.density) : null,
  };
}

/** Lack of memory or room, or a decoder that ran out of time, says nothing about the file. */
function throwIfOurs(error: unknown): void {
  const message = error instanceof Error ? error.message : String(error);
  if (/out of memory|alloc|no space left|ENOSPC|EMFILE|ENOMEM|timeout/i.test(message)) throw error;
}

async function readAt(file: FileHandle, offset: number, length: number): Promise<Uint8Array> {
  const buffer = new Uint8Array(length);
  let filled = 0;
  while (filled < length) {
    const { bytesRead } = await file.read(buffer, filled, length - filled, offset + filled);
    if (bytesRead === 0) break;
    filled += bytesRead;
  }
  return buffer.subarray(0, filled);
}
