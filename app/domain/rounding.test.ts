import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { exact, product, quotient, roundHalfEven, roundHalfUp } from "./rounding";

describe("exact", () => {
  it("takes a number for the decimal it prints as", () => {
    expect(exact(0.1)).toEqual({ above: 1n, below: 10n });
    expect(exact(-12.5)).toEqual({ above: -125n, below: 10n });
    expect(exact(1e21)).toEqual({ above: 10n ** 21n, below: 1n });
    expect(exact(1.5e-7)).toEqual({ above: 15n, below: 10n ** 8n });
    expect(() => exact(Number.NaN)).toThrow(RangeError);
    expect(() => exact(Number.POSITIVE_INFINITY)).toThrow(RangeError);
  });
});

describe("rounding", () => {
  it("sees ties that binary fractions hide", () => {
    expect(roundHalfUp(exact(1.005), 2)).toBe(1.01);
    expect(roundHalfUp(exact(-1.005), 2)).toBe(-1.01);
    expect(roundHalfUp(product(0.1, 3, 0.5), 2)).toBe(0.15);
    expect(roundHalfUp(quotient(exact(1), exact(-8)), 2)).toBe(-0.13);
    expect(Object.is(roundHalfUp(exact(-0.001), 2), 0)).toBe(true);
  });

  it("sends ties to the even digit where that is asked for", () => {
    expect(
      [0.05, 0.15, 0.25, 0.35, -0.05, -0.15, -0.25].map((value) => roundHalfEven(exact(value), 1)),
    ).toEqual([0, 0.2, 0.2, 0.4, 0, -0.2, -0.2]);
    expect(roundHalfEven(exact(0.251), 1)).toBe(0.3);
  });

  it("differs between the two by a tie and nothing else", () => {
    fc.assert(
      fc.property(fc.integer({ min: -1_000_000, max: 1_000_000 }), (thousandths) => {
        const value = exact(thousandths / 1000);
        const tie = Math.abs(thousandths) % 10 === 5;
        const [up, even] = [roundHalfUp(value, 2), roundHalfEven(value, 2)];
        if (!tie) expect(up).toBe(even);
        else expect(Math.round(even * 100) % 2).toBeCloseTo(0);
        expect(Math.abs(up * 1000 - thousandths)).toBeLessThanOrEqual(5.000001);
      }),
    );
  });
});
