/**
 * The tones of grey scans. A grey ICC profile says how bright each value is by one curve (`kTRC`); the proofs want
 * the same brightness in sRGB's own curve. libvips converts 16-bit grey without asking the profile, which would show a
 * linear scan nearly black, so it is done here.
 *
 * Layout of profiles: ICC.1:2022 (header, tag table, `curveType`, `parametricCurveType`, monochrome input profiles). Curve of sRGB:
 * IEC 61966-2-1:1999, 5.2.
 */

/** A device value from 0 to 1 to its brightness (linear, relative to the white) from 0 to 1. */
export type ToneCurve = (value: number) => number;

/** Brightness, 0 to 1 linear, to sRGB's value, 0 to 1 (IEC 61966-2-1). */
export function encodeSrgb(brightness: number): number {
  const y = Math.min(1, Math.max(0, brightness));
  return y <= 0.0031308 ? 12.92 * y : 1.055 * y ** (1 / 2.4) - 0.055;
}

/**
 * The tone curve of a grey profile; null for a profile of another colour space, a broken one, or one without a curve,
 * in which case values are taken for sRGB's.
 */
export function greyToneCurve(profile: Uint8Array): ToneCurve | null {
  const at = new DataView(profile.buffer, profile.byteOffset, profile.byteLength);
  if (at.byteLength < 132 || signature(at, 36) !== "acsp" || signature(at, 16) !== "GRAY") return null;
  const tag = findTag(at, "kTRC");
  if (tag === null) return null;
  const curve = readCurve(tag);
  if (curve === null) return null;
  if (signature(at, 20) !== "Lab ") return curve;
  return (value) => brightnessOfLightness(100 * curve(value));
}

/** The name a profile gives itself (`desc`), in whatever language it has; "" where it has none. */
export function profileName(profile: Uint8Array): string {
  const at = new DataView(profile.buffer, profile.byteOffset, profile.byteLength);
  if (at.byteLength < 132 || signature(at, 36) !== "acsp") return "";
  const tag = findTag(at, "desc");
  if (tag === null || tag.byteLength < 12) return "";
  const bytes = new Uint8Array(tag.buffer, tag.byteOffset, tag.byteLength);
  if (signature(tag, 0) === "desc") {
    return tidy(new TextDecoder("latin1").decode(bytes.subarray(12, 12 + tag.getUint32(8))));
  }
  if (signature(tag, 0) === "mluc" && tag.byteLength >= 28) {
    const [length, offset] = [tag.getUint32(20), tag.getUint32(24)];
    return tidy(new TextDecoder("utf-16be").decode(bytes.subarray(offset, offset + length)));
  }
  return "";
}

/** A table from every device value (0 to `size` - 1) to an 8-bit sRGB value. */
export function greyTable(curve: ToneCurve | null, size: 256 | 65_536): Uint8Array {
  const table = new Uint8Array(size);
  for (let i = 0; i < size; i++) {
    const value = i / (size - 1);
    table[i] = Math.round(255 * (curve === null ? value : encodeSrgb(curve(value))));
  }
  return table;
}

function tidy(text: string): string {
  return [...text]
    .filter((letter) => letter >= " " && letter !== "\u007f")
    .join("")
    .trim()
    .slice(0, 80);
}

function signature(at: DataView, offset: number): string {
  if (offset + 4 > at.byteLength) return "";
  return String.fromCharCode(...[0, 1, 2, 3].map((i) => at.getUint8(offset + i)));
}

function findTag(at: DataView, name: string): DataView | null {
  const count = Math.min(at.getUint32(128), 200);
  for (let i = 0; i < count; i++) {
    const entry = 132 + i * 12;
    if (entry + 12 > at.byteLength) return null;
    if (signature(at, entry) !== name) continue;
    const [offset, length] = [at.getUint32(entry + 4), at.getUint32(entry + 8)];
    return offset + length <= at.byteLength ? new DataView(at.buffer, at.byteOffset + offset, length) : null;
  }
  return null;
}

function readCurve(tag: DataView): ToneCurve | null {
  if (tag.byteLength < 12) return null;
  const type = signature(tag, 0);
  if (type === "curv") return sampledCurve(tag);
  if (type === "para") return parametricCurve(tag);
  return null;
}

function sampledCurve(tag: DataView): ToneCurve | null {
  const count = tag.getUint32(8);
  if (count === 0) return (value) => value;
  if (12 + count * 2 > tag.byteLength) return null;
  if (count === 1) {
    const gamma = tag.getUint16(12) / 256;
    return (value) => value ** gamma;
  }
  const sample = (i: number) => tag.getUint16(12 + 2 * Math.min(count - 1, i)) / 65_535;
  return (value) => {
    const place = value * (count - 1);
    const below = Math.floor(place);
    return sample(below) + (place - below) * (sample(below + 1) - sample(below));
  };
}

/** Functions 0 to 4 of `parametricCurveType`, with their parameters in its order: g, a, b, c, d, e, f. */
function parametricCurve(tag: DataView): ToneCurve | null {
  const kind = tag.getUint16(8);
  const parameters = [1, 3, 4, 5, 7][kind];
  if (parameters === undefined || 12 + parameters * 4 > tag.byteLength) return null;
  const p = (i: number) => (i < parameters ? tag.getInt32(12 + i * 4) / 65_536 : 0);
  const [g, a, b] = [p(0), kind === 0 ? 1 : p(1), p(2)];
  const power = (x: number) => Math.max(0, a * x + b) ** g;
  switch (kind) {
    case 0:
      return power;
    case 1:
      return (x) => (a * x + b >= 0 ? power(x) : 0);
    case 2:
      return (x) => (a * x + b >= 0 ? power(x) : 0) + p(3);
    case 3:
      return (x) => (x >= p(4) ? power(x) : p(3) * x);
    default:
      return (x) => (x >= p(4) ? power(x) + p(5) : p(3) * x + p(6));
  }
}

/** L* to relative brightness: ISO/CIE 11664-4:2019. */
function brightnessOfLightness(lightness: number): number {
  const f = (lightness + 16) / 116;
  return f > 6 / 29 ? f ** 3 : 3 * (6 / 29) ** 2 * (f - 4 / 29);
}
