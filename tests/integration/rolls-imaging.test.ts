import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import sharp from "sharp";
import { afterAll, describe, expect, it } from "vitest";
import { examineScan } from "~/domain/imaging/examine.server";
import { FRAME_PROOF_WIDTHS, WHOLE } from "~/domain/imaging/proof-sizes";
import { type RenderedProof, renderProofs } from "~/domain/imaging/render-proofs.server";
import { greyProfile, pngClaiming, rgbProfile, tiff } from "../support/pictures";

const folder = mkdtempSync(join(tmpdir(), "numberleaf-imaging-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

let files = 0;
function onDisk(contents: Uint8Array | string): string {
  const path = join(folder, `file-${++files}`);
  writeFileSync(path, contents);
  return path;
}

const examine = (contents: Uint8Array | string, pixelLimitMegapixels = 200) =>
  examineScan(onDisk(contents), { pixelLimitMegapixels });

async function reason(contents: Uint8Array | string, limit?: number): Promise<string> {
  const examined = await examine(contents, limit);
  if (examined.ok) throw new Error("the file was taken");
  return examined.reason;
}

/** Slopes in both directions, so that no two places are alike. */
const slope = (width: number, height: number, most: number) => (x: number, y: number) =>
  most * (0.15 + 0.5 * (x / width) + 0.3 * (y / height));

const greyTiff = (width: number, height: number, more: Partial<Parameters<typeof tiff>[0]> = {}) =>
  tiff({ width, height, channels: 1, bits: 16, value: slope(width, height, 65_535), ...more });

const photograph = () =>
  sharp(greyTiff(600, 400))
    .toColourspace("srgb")
    .raw({ depth: "uchar" })
    .toBuffer({ resolveWithObject: true });

async function encoded(format: "jpeg" | "png" | "gif" | "webp" | "avif"): Promise<Buffer> {
  const { data, info } = await photograph();
  return sharp(data, { raw: { width: info.width, height: info.height, channels: 3 } })
    .toFormat(format)
    .toBuffer();
}

describe("a file that is a scan", () => {
  it("is taken as 16-bit grey TIFF, with its facts", async () => {
    const examined = await examine(greyTiff(640, 480, { profile: greyProfile(2.2, "Plain grey") }));
    expect(examined).toEqual({
      ok: true,
      facts: {
        mediaType: "image/tiff",
        width: 640,
        height: 480,
        bitDepth: 16,
        channels: 1,
        colourSpace: "Plain grey",
        pixelsPerInch: null,
      },
    });
  });

  it.each([
    ["8-bit grey TIFF", () => tiff({ width: 90, height: 60, channels: 1, bits: 8, value: () => 99 }), 8, 1],
    ["8-bit RGB TIFF", () => tiff({ width: 90, height: 60, channels: 3, bits: 8, value: () => 99 }), 8, 3],
    [
      "16-bit RGB TIFF",
      () => tiff({ width: 90, height: 60, channels: 3, bits: 16, value: () => 9_999 }),
      16,
      3,
    ],
  ])("is taken as %s", async (_, make, bitDepth, channels) => {
    expect(await examine(make())).toMatchObject({
      ok: true,
      facts: { width: 90, height: 60, bitDepth, channels },
    });
  });

  it("is taken as JPEG and PNG", async () => {
    expect(await examine(await encoded("jpeg"))).toMatchObject({
      ok: true,
      facts: { mediaType: "image/jpeg" },
    });
    expect(await examine(await encoded("png"))).toMatchObject({
      ok: true,
      facts: { mediaType: "image/png" },
    });
  });

  it("has the size of the upright picture where the file lies on its side", async () => {
    expect(await examine(greyTiff(90, 60, { orientation: 6 }))).toMatchObject({
      ok: true,
      facts: { width: 60, height: 90 },
    });
  });

  it("may have an alpha channel that hides nothing", async () => {
    const base = sharp({
      create: { width: 30, height: 20, channels: 4, background: { r: 9, g: 9, b: 9, alpha: 1 } },
    });
    expect(await examine(await base.png().toBuffer())).toMatchObject({ ok: true, facts: { channels: 3 } });
  });
});

describe("a file that is refused", () => {
  it("is empty", async () => {
    expect(await reason("")).toBe("The file is empty.");
  });

  it("is a text with a picture's name", async () => {
    expect(await reason("Developed for eleven minutes.\n")).toContain("not a picture");
  });

  it.each([
    ["GIF", () => encoded("gif"), "a GIF"],
    ["WebP", () => encoded("webp"), "a WebP"],
    ["AVIF", () => encoded("avif"), "a HEIF or AVIF"],
    ["SVG", () => '<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg"/>', "a drawing"],
  ])("is a picture of a kind that is not taken: %s", async (_, make, words) => {
    expect(await reason(await make())).toContain(words);
  });

  it("is a TIFF cut short in its pixels, or before its directory", async () => {
    const whole = greyTiff(640, 480);
    expect(await reason(whole.subarray(0, Math.floor(whole.length * 0.7)))).toContain(
      "The TIFF is cut short",
    );
    const directoryLast = await sharp(whole).tiff({ compression: "lzw" }).toBuffer();
    expect(await reason(directoryLast.subarray(0, directoryLast.length - 200))).toContain(
      "The TIFF is cut short",
    );
  });

  it.each(["jpeg", "png"] as const)("is a %s cut short, even by three bytes", async (format) => {
    const whole = await encoded(format);
    const words = `The ${format.toUpperCase()} is cut short`;
    expect(await reason(whole.subarray(0, Math.floor(whole.length / 2)))).toContain(words);
    expect(await reason(whole.subarray(0, whole.length - 3))).toContain(words);
  });

  it("claims more pixels than the studio takes; both figures are named and nothing is decoded", async () => {
    const sentence = await reason(pngClaiming(100_000, 90_000));
    expect(sentence).toContain("9,000 megapixels (100,000 × 90,000)");
    expect(sentence).toContain("up to 200");
    expect(await reason(greyTiff(1_100, 1_000), 1)).toContain("1.1 megapixels (1,100 × 1,000)");
    expect((await examine(greyTiff(1_000, 1_000), 1)).ok).toBe(true);
  });

  it("claims many pixels within the limit but has none", async () => {
    expect(await reason(pngClaiming(12_000, 12_000))).toContain("cut short");
  });

  it("is a camera's raw data or begins with a mere preview", async () => {
    expect(await reason(greyTiff(90, 60, { tags: { 50706: 0x0401 } }))).toContain("camera raw");
    expect(await reason(greyTiff(90, 60, { tags: { 254: 1 } }))).toContain("only a small preview");
  });

  it("is separated for a press, floating-point or partly transparent", async () => {
    const { data, info } = await photograph();
    const rgb = () => sharp(data, { raw: { width: info.width, height: info.height, channels: 3 } });
    expect(await reason(await rgb().toColourspace("cmyk").jpeg().toBuffer())).toContain("CMYK");
    const floating = tiff({ width: 30, height: 20, channels: 1, bits: 32, value: () => 0.5 });
    expect(await reason(floating)).toContain("floating-point");
    const clear = sharp({
      create: { width: 30, height: 20, channels: 4, background: { r: 9, g: 9, b: 9, alpha: 0.4 } },
    });
    expect(await reason(await clear.png().toBuffer())).toContain("transparent");
  });
});

async function proofsOf(
  contents: Buffer,
  widths = FRAME_PROOF_WIDTHS,
  crop = WHOLE,
): Promise<RenderedProof[]> {
  const made: RenderedProof[] = [];
  for await (const proof of renderProofs(onDisk(contents), { crop, widths, pixelLimitMegapixels: 200 }))
    made.push(proof);
  return made;
}

/** The decoded value of a channel in the middle of a place, given in parts of the width and height. */
async function valueAt(proof: RenderedProof, x: number, y: number, channel = 0): Promise<number> {
  const { data, info } = await sharp(proof.data).raw().toBuffer({ resolveWithObject: true });
  const at = Math.floor(y * info.height) * info.width + Math.floor(x * info.width);
  const value = data[at * info.channels + channel];
  if (value === undefined) throw new Error("outside the picture");
  return value;
}

const only = (proofs: RenderedProof[], format: string, width: number): RenderedProof => {
  const found = proofs.find((proof) => proof.format === format && proof.width === width);
  if (found === undefined) throw new Error(`no ${format} of ${width} px`);
  return found;
};

/** IEC 61966-2-1, from brightness (0 to 1) to an 8-bit value. */
const srgb8 = (y: number) => 255 * (y <= 0.0031308 ? 12.92 * y : 1.055 * y ** (1 / 2.4) - 0.055);

describe("proofs", () => {
  it("come in three formats and the widths that do not enlarge, with names made from their contents", async () => {
    const proofs = await proofsOf(greyTiff(900, 450));
    expect(proofs.map((proof) => `${proof.format} ${proof.width}x${proof.height}`).sort()).toEqual(
      ["avif", "jpeg", "webp"].flatMap((f) => [`${f} 320x160`, `${f} 640x320`, `${f} 900x450`]).sort(),
    );
    expect(new Set(proofs.map((proof) => proof.sha256)).size).toBe(9);
    for (const proof of proofs) {
      const header = await sharp(proof.data).metadata();
      expect([header.width, header.height]).toEqual([proof.width, proof.height]);
    }
  });

  it("are the same bytes when built again", async () => {
    const scan = greyTiff(700, 500);
    const [once, again] = [await proofsOf(scan), await proofsOf(scan)];
    expect(again.map((proof) => proof.sha256)).toEqual(once.map((proof) => proof.sha256));
  });

  it("stay grey where the scan is grey: one channel in the JPEG", async () => {
    const proofs = await proofsOf(greyTiff(400, 400));
    const header = await sharp(only(proofs, "jpeg", 400).data).metadata();
    expect(header).toMatchObject({ channels: 1, space: "b-w" });
    for (const format of ["avif", "webp"]) {
      const { data, info } = await sharp(only(proofs, format, 400).data)
        .toColourspace("srgb")
        .raw()
        .toBuffer({ resolveWithObject: true });
      for (let i = 0; i < data.length; i += info.channels * 97) {
        const [r = 0, g = 0, b = 0] = data.subarray(i, i + 3);
        expect(Math.max(r, g, b) - Math.min(r, g, b)).toBeLessThanOrEqual(2);
      }
    }
  });

  it("carry no metadata, whatever the scan has", async () => {
    const scan = await sharp(greyTiff(400, 300))
      .withExif({ IFD0: { Artist: "Somebody", ImageDescription: "At the locks" } })
      .withXmp('<x:xmpmeta xmlns:x="adobe:ns:meta/"/>')
      .jpeg()
      .toBuffer();
    expect((await sharp(scan).metadata()).exif).toBeDefined();
    for (const proof of await proofsOf(scan)) {
      const header = await sharp(proof.data).metadata();
      expect([header.exif, header.xmp, header.iptc, header.icc]).toEqual([
        undefined,
        undefined,
        undefined,
        undefined,
      ]);
      expect(proof.data.includes("Somebody")).toBe(false);
    }
  });

  it.each([
    ["16-bit grey, gamma 1.0", 16, 1.0],
    ["16-bit grey, gamma 2.2", 16, 2.2],
    ["8-bit grey, gamma 1.8", 8, 1.8],
  ] as const)("show a grey scan as bright as its profile says: %s", async (_, bits, gamma) => {
    const most = bits === 16 ? 65_535 : 255;
    for (const part of [0.02, 0.2, 0.5, 0.8]) {
      const scan = tiff({
        width: 40,
        height: 40,
        channels: 1,
        bits,
        value: () => part * most,
        profile: greyProfile(gamma),
      });
      const exact = Math.round(part * most) / most;
      expect(
        Math.abs((await valueAt(only(await proofsOf(scan), "jpeg", 40), 0.5, 0.5)) - srgb8(exact ** gamma)),
      ).toBeLessThanOrEqual(1);
    }
  });

  it("show a grey scan without a profile with the values it has", async () => {
    const scan = tiff({ width: 40, height: 40, channels: 1, bits: 16, value: () => 0.4 * 65_535 });
    expect(
      Math.abs((await valueAt(only(await proofsOf(scan), "jpeg", 40), 0.5, 0.5)) - 102),
    ).toBeLessThanOrEqual(1);
  });

  it.each([8, 16] as const)("convert RGB of %i bits from its profile to sRGB", async (bits) => {
    // Primaries of sRGB adapted to D50, but in another order and gamma, so that leaving the profile out would show.
    const red = [0.4361, 0.2225, 0.0139];
    const green = [0.3851, 0.7169, 0.0971];
    const blue = [0.1431, 0.0606, 0.7142];
    const most = bits === 16 ? 65_535 : 255;
    const parts = [0.6, 0.3, 0.45];
    const scan = tiff({
      width: 40,
      height: 40,
      channels: 3,
      bits,
      value: (_x, _y, c) => (parts[c] ?? 0) * most,
      profile: rgbProfile(1.8, [green, blue, red]),
    });
    const proof = only(await proofsOf(scan), "webp", 40);
    const expected = [parts[2], parts[0], parts[1]].map((part) => srgb8((part ?? 0) ** 1.8));
    for (const [c, value] of expected.entries()) {
      expect(Math.abs((await valueAt(proof, 0.5, 0.5, c)) - value)).toBeLessThanOrEqual(4);
    }
  });

  it.each([1, 2, 3, 4, 5, 6, 7, 8])(
    "stand upright whatever way the file lies: orientation %i",
    async (orientation) => {
      // Samples as they lie in the file for an upright picture that is brighter to the right and, less, downwards.
      const [width, height] = orientation >= 5 ? [300, 400] : [400, 300];
      const upright = (u: number, v: number) => 65_535 * (0.1 + 0.6 * u + 0.2 * v);
      const value = (x: number, y: number) => {
        const [a, b] = [(x + 0.5) / width, (y + 0.5) / height];
        const places: [number, number][] = [
          [a, b],
          [1 - a, b],
          [1 - a, 1 - b],
          [a, 1 - b],
          [b, a],
          [1 - b, a],
          [1 - b, 1 - a],
          [b, 1 - a],
        ];
        const [u, v] = places[orientation - 1] ?? [0, 0];
        return upright(u, v);
      };
      const scan = tiff({ width, height, channels: 1, bits: 16, value, orientation });
      const whole = only(await proofsOf(scan), "jpeg", 400);
      expect(whole.height).toBe(300);
      // A crop is given in the upright picture: its right half, lower third.
      const crop = { x: 500_000, y: 666_667, width: 500_000, height: 333_333 };
      const part = only(await proofsOf(scan, [200], crop), "jpeg", 200);
      expect(part.height).toBe(100);
      for (const [u, v] of [
        [0.1, 0.1],
        [0.9, 0.1],
        [0.1, 0.9],
        [0.9, 0.9],
      ] as const) {
        expect(Math.abs((await valueAt(whole, u, v)) - upright(u, v) / 257)).toBeLessThanOrEqual(3);
        const inPart = upright(0.5 + u / 2, 2 / 3 + v / 3) / 257;
        expect(Math.abs((await valueAt(part, u, v)) - inPart)).toBeLessThanOrEqual(3);
      }
    },
  );

  it("are not built from a scan that is cut short", async () => {
    const whole = greyTiff(640, 480);
    await expect(proofsOf(whole.subarray(0, Math.floor(whole.length * 0.7)))).rejects.toThrow();
  });
});
