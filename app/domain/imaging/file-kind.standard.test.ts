import { describe, expect, it } from "vitest";
import { kindOfFile } from "./file-kind";

/* Each signature with the document that fixes it; the numbers of sections are from memory. */

const bytes = (...parts: (number | string)[]) =>
  Uint8Array.from(
    parts.flatMap((part) => (typeof part === "string" ? [...Buffer.from(part, "latin1")] : [part])),
  );

describe("a file is known by how it begins", () => {
  it.each([
    ["ITU-T T.81 (1992), B.1.1.3 and B.2.1: SOI and the next marker", "jpeg", bytes(0xff, 0xd8, 0xff, 0xe0)],
    ["W3C PNG, 5.2 (ISO/IEC 15948)", "png", bytes(0x89, "PNG", 0x0d, 0x0a, 0x1a, 0x0a)],
    ["TIFF 6.0 (1992), section 2: little-endian", "tiff", bytes("II", 42, 0)],
    ["TIFF 6.0 (1992), section 2: big-endian", "tiff", bytes("MM", 0, 42)],
    [
      "BigTIFF design, as read by libtiff: version 43, 8-byte offsets",
      "tiff",
      bytes("II", 43, 0, 8, 0, 0, 0),
    ],
    ["GIF89a (1990), 17: header", "gif", bytes("GIF89a")],
    ["RFC 9649 (2024), 2.4: WebP file header", "webp", bytes("RIFF", 4, 0, 0, 0, "WEBPVP8 ")],
    ["ISO/IEC 23008-12, 10.2: HEIC brand", "heif", bytes(0, 0, 0, 24, "ftypheic")],
    ["AVIF 1.1, 6.2: brand", "heif", bytes(0, 0, 0, 28, "ftypavif")],
    ["ISO/IEC 18181-2, 9.1: JPEG XL container", "jpeg-xl", bytes(0, 0, 0, 12, "JXL ", 13, 10, 0x87, 10)],
    ["ISO/IEC 18181-1: bare JPEG XL codestream", "jpeg-xl", bytes(0xff, 0x0a, 1, 2)],
    [
      "ISO/IEC 15444-1, I.5.1: JPEG 2000 signature box",
      "jpeg-2000",
      bytes(0, 0, 0, 12, "jP  ", 13, 10, 0x87, 10),
    ],
    ["ISO 32000-1:2008, 7.5.2: PDF header", "pdf", bytes("%PDF-1.7")],
    ["ZIP application note, 4.3.7: local file header (from memory)", "archive", bytes("PK", 3, 4)],
    ["SVG 2, 5.1: the root element", "drawing", bytes('<?xml version="1.0"?><!-- a --><svg width="9">')],
  ])("%s: %s", (_source, kind, head) => {
    expect(kindOfFile(head)).toBe(kind);
  });

  it.each([
    ["nothing", bytes()],
    ["a text", bytes("Developed for eleven minutes.")],
    ["a page that holds a drawing", bytes("<!doctype html><p>an <svg></svg>")],
    ["half a signature", bytes(0x89, "PN")],
    ["a film in the family of HEIF", bytes(0, 0, 0, 24, "ftypisom")],
    ["a TIFF of an unknown version", bytes("II", 44, 0)],
  ])("%s is no picture", (_what, head) => {
    expect(kindOfFile(head)).toBeNull();
  });
});
