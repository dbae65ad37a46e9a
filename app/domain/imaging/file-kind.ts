/**
 * What a file is, judged by how it begins. Names and declared types are claims; only contents count.
 */

export type TakenKind = "jpeg" | "png" | "tiff";
export type OtherKind =
  | "gif"
  | "webp"
  | "heif"
  | "jpeg-xl"
  | "jpeg-2000"
  | "bitmap"
  | "layered"
  | "camera-raw"
  | "pdf"
  | "drawing"
  | "archive";

/** How many bytes from the beginning of a file `kindOfFile` wants to see (fewer where the file has fewer). */
export const BYTES_TO_SEE = 512;

export const MEDIA_TYPE: Record<TakenKind, string> = {
  jpeg: "image/jpeg",
  png: "image/png",
  tiff: "image/tiff",
};

/** Brands of ISO base media files (ISO/IEC 14496-12, 4.3) that hold still pictures; `crx ` holds camera raw data. */
const STILL_BRANDS = new Set(["heic", "heix", "heim", "heis", "hevc", "mif1", "msf1", "avif", "avis"]);

/**
 * The kind of a file by its first bytes; null for what is no kind of picture or document known here.
 * The signatures and their sources are held by `file-kind.standard.test.ts`.
 */
export function kindOfFile(head: Uint8Array): TakenKind | OtherKind | null {
  const has = (at: number, ...bytes: number[]) => bytes.every((byte, i) => head[at + i] === byte);
  const says = (at: number, text: string) => has(at, ...[...text].map((letter) => letter.charCodeAt(0)));

  if (has(0, 0xff, 0xd8, 0xff)) return "jpeg";
  if (has(0, 0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a)) return "png";
  if (has(0, 0x49, 0x49, 0x2a, 0x00) || has(0, 0x4d, 0x4d, 0x00, 0x2a)) return "tiff";
  if (has(0, 0x49, 0x49, 0x2b, 0x00, 0x08, 0x00) || has(0, 0x4d, 0x4d, 0x00, 0x2b, 0x00, 0x08)) return "tiff";
  if (says(0, "GIF87a") || says(0, "GIF89a")) return "gif";
  if (says(0, "RIFF") && says(8, "WEBP")) return "webp";
  if (says(4, "ftyp")) {
    const brand = String.fromCharCode(...head.subarray(8, 12));
    if (STILL_BRANDS.has(brand)) return "heif";
    return brand === "crx " ? "camera-raw" : null;
  }
  if (has(0, 0xff, 0x0a) || (has(0, 0, 0, 0, 12) && says(4, "JXL "))) return "jpeg-xl";
  if (has(0, 0, 0, 0, 12) && says(4, "jP  ")) return "jpeg-2000";
  if (says(0, "8BPS")) return "layered";
  if (says(0, "%PDF-")) return "pdf";
  if (says(0, "PK") && (has(2, 3, 4) || has(2, 5, 6))) return "archive";
  if (says(0, "BM") && has(6, 0, 0, 0, 0)) return "bitmap";
  return isSvg(head) ? "drawing" : null;
}

/** An SVG drawing is text: whatever comes before, its first element is `svg`. */
function isSvg(head: Uint8Array): boolean {
  const text = new TextDecoder("utf-8").decode(head);
  return /^\s*(<\?xml[^>]*>\s*)?((<!--[\s\S]*?-->|<!DOCTYPE[^>]*>)\s*)*<svg[\s>]/i.test(text);
}
