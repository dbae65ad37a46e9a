import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { rectInFile, turnedSize, turnUpright } from "./orientation";
import { cropInPixels, PRINT_PROOF_WIDTHS, proofSizes, WHOLE } from "./proof-sizes";

const side = fc.integer({ min: 1, max: 20_000 });
const crops = fc
  .tuple(
    fc.nat(999_999),
    fc.nat(999_999),
    fc.integer({ min: 1, max: 1_000_000 }),
    fc.integer({ min: 1, max: 1_000_000 }),
  )
  .map(([x, y, w, h]) => ({ x, y, width: Math.min(w, 1_000_000 - x), height: Math.min(h, 1_000_000 - y) }));

describe("a crop in pixels", () => {
  it("is the whole scan for the whole crop", () => {
    expect(cropInPixels(WHOLE, { width: 7_000, height: 5_600 })).toEqual({
      left: 0,
      top: 0,
      width: 7_000,
      height: 5_600,
    });
  });

  it("never leaves the scan and is never empty", () => {
    fc.assert(
      fc.property(crops, side, side, (crop, width, height) => {
        const rect = cropInPixels(crop, { width, height });
        expect(rect.left).toBeGreaterThanOrEqual(0);
        expect(rect.top).toBeGreaterThanOrEqual(0);
        expect(rect.width).toBeGreaterThanOrEqual(1);
        expect(rect.height).toBeGreaterThanOrEqual(1);
        expect(rect.left + rect.width).toBeLessThanOrEqual(width);
        expect(rect.top + rect.height).toBeLessThanOrEqual(height);
      }),
    );
  });

  it("meets its neighbour without a gap or an overlap", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 999_999 }),
        fc.integer({ min: 2_000, max: 20_000 }),
        (cut, width) => {
          const size = { width, height: 10 };
          const left = cropInPixels({ ...WHOLE, width: cut }, size);
          const right = cropInPixels({ ...WHOLE, x: cut, width: 1_000_000 - cut }, size);
          fc.pre(left.width < width && Math.round((cut * width) / 1e6) > 0);
          expect(left.left + left.width).toBe(right.left);
        },
      ),
    );
  });
});

describe("the sizes of proofs", () => {
  it("are those wanted, none enlarged", () => {
    const widths = (width: number) =>
      proofSizes({ width, height: 1_000 }, PRINT_PROOF_WIDTHS).map((size) => size.width);
    expect(widths(7_000)).toEqual([320, 640, 1280, 2048]);
    expect(widths(2_048)).toEqual([320, 640, 1280, 2048]);
    expect(widths(1_500)).toEqual([320, 640, 1280, 1500]);
    expect(widths(320)).toEqual([320]);
    expect(widths(12)).toEqual([12]);
  });

  it("keep the shape to a pixel", () => {
    fc.assert(
      fc.property(side, side, (width, height) => {
        for (const size of proofSizes({ width, height }, PRINT_PROOF_WIDTHS)) {
          expect(Math.abs(size.height - Math.max(1, (height * size.width) / width))).toBeLessThanOrEqual(0.5);
        }
      }),
    );
  });
});

describe("turning upright", () => {
  it("moves every pixel of a rectangle to where the rectangle lies", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 8 }),
        fc.integer({ min: 1, max: 7 }),
        fc.integer({ min: 1, max: 7 }),
        fc.nat(6),
        fc.nat(6),
        (orientation, width, height, u, v) => {
          const inFile = { width, height };
          const upright = turnedSize(inFile, orientation);
          fc.pre(u < upright.width && v < upright.height);
          const samples = Uint8Array.from({ length: width * height }, (_, i) => i);
          const turned = turnUpright(samples, inFile, 1, orientation);
          const rect = rectInFile({ left: u, top: v, width: 1, height: 1 }, upright, orientation);
          expect(turned[v * upright.width + u]).toBe(samples[rect.top * width + rect.left]);
          expect([...turned].sort((a, b) => a - b)).toEqual([...samples]);
        },
      ),
    );
  });
});
