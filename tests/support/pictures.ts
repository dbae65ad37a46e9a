import { deflateSync } from "node:zlib";

/*
 * Picture files made byte by byte, so that tests know every sample and need none of the program's own encoders.
 * TIFF: TIFF 6.0 (1992). PNG: W3C PNG, third edition. Profiles: ICC.1:2022.
 */

type TiffPicture = {
  width: number;
  height: number;
  /** 1 for grey, 3 for RGB. */
  channels: 1 | 3;
  /** 32 is written as floating point. */
  bits: 8 | 16 | 32;
  /** The value of a channel at a pixel, 0 to 255 or 0 to 65,535; 0 to 1 in floating point. */
  value: (x: number, y: number, channel: number) => number;
  profile?: Buffer;
  orientation?: number;
  /** Further tags of 32 bits: NewSubfileType, DNGVersion. */
  tags?: Record<number, number>;
};

/** An uncompressed baseline TIFF in one strip, little-endian. */
export function tiff(picture: TiffPicture): Buffer {
  const { width, height, channels, bits, profile } = picture;
  const samples = new { 8: Uint8Array, 16: Uint16Array, 32: Float32Array }[bits](width * height * channels);
  let at = 0;
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      for (let c = 0; c < channels; c++) {
        const value = picture.value(x, y, c);
        samples[at++] = bits === 32 ? value : Math.round(value);
      }
    }
  }
  // Every machine this runs on keeps its numbers little-endian, as the file does.
  const pixels = Buffer.from(samples.buffer, samples.byteOffset, samples.byteLength);
  const [SHORT, LONG, UNDEFINED] = [3, 4, 7];
  const fixed: [tag: number, type: number, count: number, value: number | "bits" | "pixels" | "profile"][] = [
    [256, LONG, 1, width],
    [257, LONG, 1, height],
    [258, SHORT, channels, channels === 1 ? bits : "bits"],
    [259, SHORT, 1, 1],
    [262, SHORT, 1, channels === 1 ? 1 : 2],
    [273, LONG, 1, "pixels"],
    [274, SHORT, 1, picture.orientation ?? 1],
    [277, SHORT, 1, channels],
    [278, LONG, 1, height],
    [279, LONG, 1, pixels.length],
  ];
  if (profile !== undefined) fixed.push([34_675, UNDEFINED, profile.length, "profile"]);
  if (bits === 32) fixed.push([339, SHORT, 1, 3]);
  for (const [tag, value] of Object.entries(picture.tags ?? {})) fixed.push([Number(tag), LONG, 1, value]);
  fixed.sort(([a], [b]) => a - b);

  const bitsAt = 8 + 2 + fixed.length * 12 + 4;
  const profileAt = bitsAt + 8;
  const pixelsAt = (profileAt + (profile?.length ?? 0) + 15) & ~15;
  const places = { bits: bitsAt, pixels: pixelsAt, profile: profileAt };
  const head = Buffer.alloc(pixelsAt);
  head.write("II", 0, "latin1");
  head.writeUInt16LE(42, 2);
  head.writeUInt32LE(8, 4);
  head.writeUInt16LE(fixed.length, 8);
  fixed.forEach(([tag, type, count, value], i) => {
    const entry = 10 + i * 12;
    head.writeUInt16LE(tag, entry);
    head.writeUInt16LE(type, entry + 2);
    head.writeUInt32LE(count, entry + 4);
    if (typeof value === "string") head.writeUInt32LE(places[value], entry + 8);
    else if (type === SHORT) head.writeUInt16LE(value, entry + 8);
    else head.writeUInt32LE(value, entry + 8);
  });
  for (let c = 0; c < 3; c++) head.writeUInt16LE(bits, bitsAt + c * 2);
  profile?.copy(head, profileAt);
  return Buffer.concat([head, pixels]);
}

/** A PNG that claims a size its few bytes of pixels do not fill: what a hostile sender would send. */
export function pngClaiming(width: number, height: number): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header.set([8, 0, 0, 0, 0], 8);
  const signature = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
  const data = deflateSync(Buffer.alloc(1_000));
  return Buffer.concat([
    signature,
    pngChunk("IHDR", header),
    pngChunk("IDAT", data),
    pngChunk("IEND", Buffer.alloc(0)),
  ]);
}

function pngChunk(type: string, data: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from(type, "latin1"), data]);
  const chunk = Buffer.alloc(body.length + 8);
  chunk.writeUInt32BE(data.length, 0);
  body.copy(chunk, 4);
  chunk.writeUInt32BE(crc32(body), body.length + 4);
  return chunk;
}

/** The cyclic redundancy code of PNG's Annex D, bit by bit. */
function crc32(data: Buffer): number {
  let crc = 0xffffffff;
  for (const byte of data) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit++) crc = crc & 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  }
  return (crc ^ 0xffffffff) >>> 0;
}

const D50 = [0.9642, 1, 0.8249] as const;

/** A version 2 profile of a grey device with a plain gamma. */
export function greyProfile(gamma: number, name = "Test grey"): Buffer {
  return profile("GRAY", name, [["kTRC", gammaTag(gamma)]]);
}

/** A version 2 profile of an RGB device: colorants as D50-adapted XYZ, one plain gamma for all. */
export function rgbProfile(
  gamma: number,
  colorants: readonly (readonly number[])[],
  name = "Test RGB",
): Buffer {
  const [r = [], g = [], b = []] = colorants;
  return profile("RGB ", name, [
    ["rXYZ", xyzTag(r)],
    ["gXYZ", xyzTag(g)],
    ["bXYZ", xyzTag(b)],
    ["rTRC", gammaTag(gamma)],
    ["gTRC", gammaTag(gamma)],
    ["bTRC", gammaTag(gamma)],
  ]);
}

function profile(space: string, name: string, own: [string, Buffer][]): Buffer {
  const tags: [string, Buffer][] = [
    ["desc", descTag(name)],
    ["cprt", Buffer.concat([Buffer.from("text\0\0\0\0", "latin1"), Buffer.from("No rights\0", "latin1")])],
    ["wtpt", xyzTag(D50)],
    ...own,
  ];
  const head = Buffer.alloc(132 + tags.length * 12);
  head.writeUInt32BE(0x02400000, 8);
  head.write(`mntr${space}XYZ `, 12, "latin1");
  [2026, 1, 1, 0, 0, 0].forEach((part, i) => {
    head.writeUInt16BE(part, 24 + i * 2);
  });
  head.write("acsp", 36, "latin1");
  D50.forEach((part, i) => {
    head.writeInt32BE(Math.round(part * 65_536), 68 + i * 4);
  });
  head.writeUInt32BE(tags.length, 128);
  const body: Buffer[] = [];
  let at = head.length;
  tags.forEach(([signature, data], i) => {
    head.write(signature, 132 + i * 12, "latin1");
    head.writeUInt32BE(at, 136 + i * 12);
    head.writeUInt32BE(data.length, 140 + i * 12);
    const padded = Buffer.concat([data, Buffer.alloc((4 - (data.length % 4)) % 4)]);
    body.push(padded);
    at += padded.length;
  });
  head.writeUInt32BE(at, 0);
  return Buffer.concat([head, ...body]);
}

function descTag(name: string): Buffer {
  const tag = Buffer.alloc(12 + name.length + 1 + 78);
  tag.write("desc", 0, "latin1");
  tag.writeUInt32BE(name.length + 1, 8);
  tag.write(name, 12, "latin1");
  return tag;
}

function gammaTag(gamma: number): Buffer {
  const tag = Buffer.alloc(14);
  tag.write("curv", 0, "latin1");
  tag.writeUInt32BE(1, 8);
  tag.writeUInt16BE(Math.round(gamma * 256), 12);
  return tag;
}

function xyzTag(values: readonly number[]): Buffer {
  const tag = Buffer.alloc(20);
  tag.write("XYZ ", 0, "latin1");
  values.forEach((value, i) => {
    tag.writeInt32BE(Math.round(value * 65_536), 8 + i * 4);
  });
  return tag;
}
