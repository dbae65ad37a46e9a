/**
 * Density, reflectance and lightness of neutral tones. All in full precision; whoever shows a figure rounds it once.
 *
 * A lightness reckoned from a density is right only for a neutral tone, and only beside the white it was reckoned against:
 * the perfect diffuser (absolute), or the paper (relative). Keep which one it was.
 */

/** The part of the light that is reflected, 0 to 1: 10 to the power of minus the density. Source: ISO 5-4. */
export function reflectance(density: number): number {
  return 10 ** -density;
}

/** The density of a reflectance above 0: minus its logarithm to the base of 10. Throws RangeError at 0 and below. Source: ISO 5-4. */
export function densityOfReflectance(value: number): number {
  if (!(value > 0)) throw new RangeError(`A reflectance of ${value} has no density.`);
  return 0 - Math.log10(value);
}

const EPSILON = 216 / 24389;
const KAPPA = 24389 / 27;

/** CIE lightness L*, 0 to 100, of a luminance relative to white (Y / Yn). Source: CIE 15; ISO 11664-4:2008, with its exact fractions. */
export function lightness(relativeLuminance: number): number {
  if (relativeLuminance < 0) throw new RangeError(`${relativeLuminance} is not a luminance.`);
  return relativeLuminance > EPSILON ? 116 * Math.cbrt(relativeLuminance) - 16 : KAPPA * relativeLuminance;
}

/** The luminance relative to white of a lightness L*: the inverse of `lightness`. */
export function luminanceOfLightness(lStar: number): number {
  if (lStar < 0) throw new RangeError(`${lStar} is not a lightness.`);
  return lStar > KAPPA * EPSILON ? ((lStar + 16) / 116) ** 3 : lStar / KAPPA;
}

/** CIE lightness of a density, against the perfect diffuser, or against a paper of the density given. */
export function lightnessOfDensity(density: number, paperDensity = 0): number {
  return lightness(reflectance(density - paperDensity));
}

/** The density, against the perfect diffuser, of a lightness above 0: the inverse of `lightnessOfDensity`. */
export function densityOfLightness(lStar: number): number {
  return densityOfReflectance(luminanceOfLightness(lStar));
}

/** The range from the lightest to the darkest density of a print: as a ratio to 1, and in stops (density / log10 2). */
export function tonalRange(minimum: number, maximum: number): { ratio: number; stops: number } {
  const range = maximum - minimum;
  return { ratio: 10 ** range, stops: range / Math.log10(2) };
}

/** The relative luminance of a grey sRGB code, 0 to 255. Source: IEC 61966-2-1. */
export function luminanceOfSrgb(code: number): number {
  const value = code / 255;
  return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
}

/** The relative luminance of a grey code of gamma 2.2, 0 to 255. */
export function luminanceOfGamma22(code: number): number {
  return (code / 255) ** 2.2;
}
