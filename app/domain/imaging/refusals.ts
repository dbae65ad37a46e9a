import type { OtherKind, TakenKind } from "./file-kind";

/**
 * Why a file does not count as a scan, in the photographer's words: what is wrong with it and what helps.
 */

const figures = new Intl.NumberFormat("en-GB");
const oneDecimal = new Intl.NumberFormat("en-GB", { maximumFractionDigits: 1 });

const OTHER_KINDS: Record<OtherKind, string> = {
  gif: "a GIF",
  webp: "a WebP picture",
  heif: "a HEIF or AVIF picture",
  "jpeg-xl": "a JPEG XL picture",
  "jpeg-2000": "a JPEG 2000 picture",
  bitmap: "a bitmap (BMP)",
  layered: "a file with layers",
  "camera-raw": "camera raw data",
  pdf: "a PDF",
  drawing: "a drawing (SVG)",
  archive: "an archive (ZIP)",
};

const TAKEN_KINDS: Record<TakenKind, string> = { jpeg: "JPEG", png: "PNG", tiff: "TIFF" };

const TAKEN = "Scans are taken as TIFF (8 or 16 bits), JPEG or PNG.";

export const refusals = {
  empty: () => "The file is empty.",

  sizeDiffers: (arrived: number, declared: number) =>
    `${figures.format(arrived)} bytes arrived, but the file has ${figures.format(declared)}. Send it again.`,

  notInStorage: () => "The file has gone from storage before it could be read. Send it again.",

  notAPicture: () => `What is in the file is not a picture, whatever its name says. ${TAKEN}`,

  otherKind: (kind: OtherKind) => `This is ${OTHER_KINDS[kind]}. ${TAKEN}`,

  onlyAPreview: () =>
    "The first picture in the file is only a small preview of another one. Save the scan as a plain TIFF.",

  cutShort: (kind: TakenKind) =>
    `The ${TAKEN_KINDS[kind]} is cut short or damaged: the picture ends before its last line. Copy or export it again.`,

  overPixelLimit: (width: number, height: number, limitMegapixels: number) =>
    `It has ${oneDecimal.format((width * height) / 1e6)} megapixels (${figures.format(width)} × ${figures.format(height)}); ` +
    `the studio takes up to ${figures.format(limitMegapixels)}. The limit is among the settings.`,

  bits: (bits: number) =>
    `It has ${figures.format(bits)} ${bits === 1 ? "bit" : "bits"} a channel. Save it with 8 or 16.`,

  floatingPoint: () => "Its values are floating-point numbers. Save it with 8 or 16 bits a channel.",

  colourSpace: (name: string) =>
    `Its colours are ${name}, made for a press or for measuring. Save it as greyscale or RGB.`,

  transparent: () =>
    "Parts of it are transparent, or it carries a further channel such as a scanner's infra-red. Save it with grey or RGB alone.",
};
