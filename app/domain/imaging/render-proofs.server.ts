import sharp, { type Metadata, type Sharp } from "sharp";
import { sha256 } from "~/platform/ids.server";
import { greyTable, greyToneCurve } from "./grey-profile";
import { type Rect, rectInFile, type Size, turnedSize, turnUpright } from "./orientation";
import { type Crop, cropInPixels, proofSizes } from "./proof-sizes";

export type ProofFormat = "avif" | "webp" | "jpeg";

export type RenderedProof = Size & { format: ProofFormat; data: Buffer; sha256: string };

export const PROOF_TYPE: Record<ProofFormat, string> = {
  avif: "image/avif",
  webp: "image/webp",
  jpeg: "image/jpeg",
};

const EXTENSION: Record<ProofFormat, string> = { avif: "avif", webp: "webp", jpeg: "jpg" };

/** The content-hashed name of a proof, the same in both buckets. */
export function proofKey(proof: { sha256: string; format: ProofFormat }): string {
  return `proofs/${proof.sha256}.${EXTENSION[proof.format]}`;
}

/** Past effort 3, AVIF takes several times as long for files hardly smaller. */
const ENCODERS: Record<ProofFormat, (picture: Sharp) => Sharp> = {
  avif: (picture) => picture.avif({ quality: 50, effort: 3 }),
  webp: (picture) => picture.webp({ quality: 80 }),
  jpeg: (picture) => picture.jpeg({ quality: 80, mozjpeg: true }),
};

const RENDER_SECONDS = 400;

type Upright = Size & { pixels: Uint8Array; channels: 1 | 3 };

/**
 * Builds the proofs of a scan or of a crop of it, each in AVIF, WebP and JPEG: in sRGB, grey staying grey, upright,
 * with nothing of the file's metadata. The scan is decoded once, to the largest size wanted; the smaller ones are made
 * from that. The same file gives the same bytes. Yields proof by proof, so that no more than one is held at a time.
 */
export async function* renderProofs(
  path: string,
  options: { crop: Crop; widths: readonly number[]; pixelLimitMegapixels: number },
): AsyncGenerator<RenderedProof> {
  const limitInputPixels = options.pixelLimitMegapixels * 1_000_000;
  const header = await sharp(path, { limitInputPixels }).metadata();
  const upright = turnedSize({ width: header.width, height: header.height }, header.orientation);
  const rect = cropInPixels(options.crop, upright);
  const sizes = proofSizes(rect, options.widths);
  const largest = sizes.at(-1);
  if (largest === undefined) throw new Error("no proof size was asked for");
  const base = await decode(path, { header, limitInputPixels, rect, upright, size: largest });

  for (const size of sizes) {
    for (const format of ["jpeg", "webp", "avif"] as const) {
      const { width, height } = size;
      const picture = sharp(base.pixels, {
        raw: { width: base.width, height: base.height, channels: base.channels },
      });
      if (width !== base.width) picture.resize(width, height, { fit: "fill", kernel: "lanczos3" });
      const data = await ENCODERS[format](
        picture.toColourspace(base.channels === 1 ? "b-w" : "srgb"),
      ).toBuffer();
      yield { width, height, format, data, sha256: sha256(data) };
    }
  }
}

type Decode = {
  header: Metadata;
  limitInputPixels: number;
  /** Of the upright picture, in pixels. */
  rect: Rect;
  upright: Size;
  size: Size;
};

/** Decodes to 8-bit grey or sRGB samples of the wanted size. Turned only when small, to spare memory. */
async function decode(
  path: string,
  { header, limitInputPixels, rect, upright, size }: Decode,
): Promise<Upright> {
  const { orientation } = header;
  const inFile = turnedSize(size, orientation);
  const grey = header.space === "b-w" || header.space === "grey16";
  const picture = sharp(path, { limitInputPixels, failOn: "error", ignoreIcc: grey })
    .timeout({ seconds: RENDER_SECONDS })
    .removeAlpha()
    .extract(rectInFile(rect, upright, orientation))
    .resize(inFile.width, inFile.height, { fit: "fill", kernel: "lanczos3" });

  const pixels = grey ? await greyPixels(picture, header) : await colourPixels(picture, header);
  const channels = grey ? 1 : 3;
  if (pixels.length !== inFile.width * inFile.height * channels) {
    throw new Error("the decoder gave another number of samples than asked for");
  }
  return { ...size, channels, pixels: turnUpright(pixels, inFile, channels, orientation) };
}

async function colourPixels(picture: Sharp, header: Metadata): Promise<Uint8Array> {
  // Without naming the profile, sharp converts 16-bit colour to Display P3 and then takes its values for sRGB's.
  if (header.icc !== undefined) picture.withIccProfile("srgb", { attach: false });
  return picture.toColourspace("srgb").raw({ depth: "uchar" }).toBuffer();
}

async function greyPixels(picture: Sharp, header: Metadata): Promise<Uint8Array> {
  const curve = header.icc === undefined ? null : greyToneCurve(header.icc);
  if (header.depth !== "ushort") {
    const samples = await picture.toColourspace("b-w").raw({ depth: "uchar" }).toBuffer();
    return curve === null ? samples : throughTable(samples, greyTable(curve, 256));
  }
  const bytes = await picture.toColourspace("grey16").raw({ depth: "ushort" }).toBuffer();
  // A buffer out of Node's pool may begin at an odd place, where 16-bit samples cannot be read.
  const aligned = bytes.byteOffset % 2 === 0 ? bytes : Buffer.from(Uint8Array.from(bytes).buffer);
  const samples = new Uint16Array(aligned.buffer, aligned.byteOffset, aligned.byteLength / 2);
  return throughTable(samples, greyTable(curve, 65_536));
}

function throughTable(samples: Uint8Array | Uint16Array, table: Uint8Array): Uint8Array {
  const pixels = new Uint8Array(samples.length);
  for (let i = 0; i < samples.length; i++) pixels[i] = table[samples[i] ?? 0] ?? 0;
  return pixels;
}
