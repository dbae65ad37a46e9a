import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  densityOfLightness,
  densityOfReflectance,
  lightness,
  lightnessOfDensity,
  luminanceOfGamma22,
  luminanceOfLightness,
  luminanceOfSrgb,
  reflectance,
  tonalRange,
} from "./density";

// ISO 5-4 for density; CIE 15 and ISO 11664-4:2008 for lightness, with the exact fractions 216/24389 and 24389/27.
describe("density, reflectance and lightness", () => {
  it.each([
    [0.05, "0.891251", "95.633"],
    [0.3, "0.501187", "76.142"],
    [0.75, "0.177828", "49.232"],
    [1, "0.100000", "37.842"],
  ])("D %f reflects %s, L* %s", (density, reflected, lStar) => {
    expect(reflectance(density).toFixed(6)).toBe(reflected);
    expect(lightnessOfDensity(density).toFixed(3)).toBe(lStar);
  });

  it.each([
    [2.1, "7.175"],
    [2.3, "4.527"],
    [2.5, "2.856"],
    [3, "0.903"],
  ])("D %f is on the lower branch, L* %s", (density, lStar) => {
    expect(lightnessOfDensity(density).toFixed(3)).toBe(lStar);
  });

  it.each([
    [50, "0.735"],
    [96, "0.046"],
    [20, "1.524"],
  ])("L* %i is D %s", (lStar, density) => {
    expect(densityOfLightness(lStar).toFixed(3)).toBe(density);
  });

  it("white is 100, and the branches meet at D 2.052740 with 8", () => {
    expect(lightnessOfDensity(0)).toBe(100);
    expect(lightnessOfDensity(2.05274).toFixed(3)).toBe("8.000");
    expect(lightness(216 / 24389)).toBeCloseTo(8, 12);
    expect(lightness(216 / 24389 + 1e-12)).toBeCloseTo(8, 8);
  });

  it("is relative to the paper where the paper's density is given", () => {
    expect(lightnessOfDensity(0.05, 0.05)).toBe(100);
    expect(lightnessOfDensity(1.05, 0.05)).toBeCloseTo(lightnessOfDensity(1), 10);
  });

  it("goes there and back", () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 4, noNaN: true }), (density) => {
        expect(densityOfLightness(lightnessOfDensity(density))).toBeCloseTo(density, 9);
        expect(densityOfReflectance(reflectance(density))).toBeCloseTo(density, 9);
      }),
    );
    expect(() => densityOfReflectance(0)).toThrow(RangeError);
    expect(() => luminanceOfLightness(-1)).toThrow(RangeError);
    expect(() => lightness(-0.1)).toThrow(RangeError);
  });
});

// From the definition: a stop is a factor of 2, log10 2 of density.
describe("the range of a print", () => {
  it.each([
    [0.05, 1.65, "39.8", "5.32"],
    [0.05, 2.4, "223.9", "7.81"],
  ])("D %f to %f is %s to 1, %s stops", (low, high, ratio, stops) => {
    expect(tonalRange(low, high).ratio.toFixed(1)).toBe(ratio);
    expect(tonalRange(low, high).stops.toFixed(2)).toBe(stops);
  });
});

// IEC 61966-2-1 (sRGB) for the code; the density and lightness follow from ISO 5-4 and CIE 15.
describe("codes", () => {
  it("sRGB 117 is Y 0.17789, D 0.750, L* 49.24", () => {
    const y = luminanceOfSrgb(117);
    expect(y.toFixed(5)).toBe("0.17789");
    expect(densityOfReflectance(y).toFixed(3)).toBe("0.750");
    expect(lightness(y).toFixed(2)).toBe("49.24");
  });

  // Computed from the definition of gamma 2.2.
  it("grey 128 of gamma 2.2 is Y 0.2195, L* 53.98", () => {
    expect(luminanceOfGamma22(128).toFixed(4)).toBe("0.2195");
    expect(lightness(luminanceOfGamma22(128)).toFixed(2)).toBe("53.98");
  });
});
