import { describe, expect, it } from "vitest";
import { encodeSrgb, greyToneCurve, profileName } from "./grey-profile";

/* The documents are named beside each case; their formulas are from memory. */

/** A grey profile with the given tags; header and tag table after ICC.1:2022. */
function profile(tags: Record<string, Buffer>, options: { space?: string; pcs?: string } = {}): Uint8Array {
  const names = Object.keys(tags);
  const head = Buffer.alloc(132 + names.length * 12);
  head.write(options.space ?? "GRAY", 16, "latin1");
  head.write(options.pcs ?? "XYZ ", 20, "latin1");
  head.write("acsp", 36, "latin1");
  head.writeUInt32BE(names.length, 128);
  let at = head.length;
  names.forEach((name, i) => {
    head.write(name, 132 + i * 12, "latin1");
    head.writeUInt32BE(at, 136 + i * 12);
    head.writeUInt32BE(tags[name]?.length ?? 0, 140 + i * 12);
    at += tags[name]?.length ?? 0;
  });
  return Buffer.concat([head, ...Object.values(tags)]);
}

function curv(...values: number[]): Buffer {
  const tag = Buffer.alloc(12 + values.length * 2);
  tag.write("curv", 0, "latin1");
  tag.writeUInt32BE(values.length, 8);
  values.forEach((value, i) => {
    tag.writeUInt16BE(value, 12 + i * 2);
  });
  return tag;
}

function para(kind: number, ...parameters: number[]): Buffer {
  const tag = Buffer.alloc(12 + parameters.length * 4);
  tag.write("para", 0, "latin1");
  tag.writeUInt16BE(kind, 8);
  parameters.forEach((value, i) => {
    tag.writeInt32BE(Math.round(value * 65_536), 12 + i * 4);
  });
  return tag;
}

const curveOf = (kTRC: Buffer, options?: { space?: string; pcs?: string }) => {
  const curve = greyToneCurve(profile({ kTRC }, options));
  if (curve === null) throw new Error("no curve was found");
  return curve;
};

describe("the tone curve of a grey profile", () => {
  it("is the identity for an empty curve (ICC.1:2022, curveType)", () => {
    expect(curveOf(curv())(0.3)).toBeCloseTo(0.3, 9);
  });

  it("is a power for a curve of one value, in 8.8 fixed point (ICC.1:2022, curveType)", () => {
    expect(curveOf(curv(2.2 * 256))(0.5)).toBeCloseTo(0.5 ** (563 / 256), 6);
    expect(curveOf(curv(256))(0.5)).toBeCloseTo(0.5, 9);
  });

  it("is read between its samples for a curve of several (ICC.1:2022, curveType)", () => {
    const curve = curveOf(curv(0, 16_384, 65_535));
    expect(curve(0)).toBe(0);
    expect(curve(0.5)).toBeCloseTo(16_384 / 65_535, 9);
    expect(curve(0.75)).toBeCloseTo((16_384 + 65_535) / 2 / 65_535, 9);
    expect(curve(1)).toBe(1);
  });

  it("is each of the five parametric functions (ICC.1:2022, parametricCurveType)", () => {
    expect(curveOf(para(0, 1.8))(0.4)).toBeCloseTo(0.4 ** 1.8, 4);
    expect(curveOf(para(1, 2, 0.9, 0.1))(0.5)).toBeCloseTo(0.55 ** 2, 4);
    expect(curveOf(para(2, 2, 0.9, 0.05, 0.02))(0.5)).toBeCloseTo(0.5 ** 2 + 0.02, 4);
    const srgb = curveOf(para(3, 2.4, 1 / 1.055, 0.055 / 1.055, 1 / 12.92, 0.04045));
    expect(srgb(0.5)).toBeCloseTo(0.214, 3);
    expect(srgb(0.02)).toBeCloseTo(0.02 / 12.92, 4);
    const four = curveOf(para(4, 2, 1, 0, 0.5, 0.3, 0.1, 0.05));
    expect(four(0.5)).toBeCloseTo(0.35, 4);
    expect(four(0.2)).toBeCloseTo(0.15, 4);
  });

  it("gives lightness where the profile connects through Lab (ICC.1:2022, monochrome; ISO/CIE 11664-4)", () => {
    const curve = curveOf(curv(256), { pcs: "Lab " });
    // L* 50 is a relative luminance of 0.1842.
    expect(curve(0.5)).toBeCloseTo(0.1842, 4);
    expect(curve(1)).toBeCloseTo(1, 9);
  });

  it("is not looked for in a colour profile, a cut one, or bytes that are none", () => {
    expect(greyToneCurve(profile({ kTRC: curv(256) }, { space: "RGB " }))).toBeNull();
    expect(greyToneCurve(profile({ kTRC: curv(256) }).subarray(0, 150))).toBeNull();
    expect(greyToneCurve(Buffer.from("no profile"))).toBeNull();
    const many = curv(1, 2, 3).subarray(0, 14);
    expect(greyToneCurve(profile({ kTRC: many }))).toBeNull();
  });
});

describe("sRGB's own curve", () => {
  it("meets the values of IEC 61966-2-1:1999", () => {
    expect(encodeSrgb(0)).toBe(0);
    expect(encodeSrgb(1)).toBeCloseTo(1, 12);
    expect(encodeSrgb(0.0031308)).toBeCloseTo(0.04045, 4);
    // The middle grey of 18 % is 118 of 255 (common practice).
    expect(Math.round(255 * encodeSrgb(0.18))).toBe(118);
  });
});

it("a profile's name is read in both its forms (ICC.1:2001-04 textDescriptionType; ICC.1:2022 multiLocalizedUnicodeType)", () => {
  const old = Buffer.concat([
    Buffer.from("desc\0\0\0\0\0\0\0\x06", "latin1"),
    Buffer.from("Plain\0", "latin1"),
  ]);
  expect(profileName(profile({ desc: old }))).toBe("Plain");
  const text = Buffer.from("Grau", "utf16le").swap16();
  const mluc = Buffer.alloc(28);
  mluc.write("mluc", 0, "latin1");
  mluc.writeUInt32BE(1, 8);
  mluc.writeUInt32BE(12, 12);
  mluc.writeUInt32BE(text.length, 20);
  mluc.writeUInt32BE(28, 24);
  expect(profileName(profile({ desc: Buffer.concat([mluc, text]) }))).toBe("Grau");
});
