/**
 * Exact arithmetic on decimals, for figures where a tie decides. A JavaScript number stands for the decimal it prints as: 0.1 is
 * one tenth, not the binary fraction next to it.
 */

import { divideHalfUp } from "~/platform/money";

/** An exact fraction; `below` is above zero. */
export type Ratio = { readonly above: bigint; readonly below: bigint };

/** The exact value of a number as it is printed. Throws RangeError for what is not finite. */
export function exact(value: number): Ratio {
  const match = /^(-?)(\d+)(?:\.(\d+))?(?:e([+-]\d+))?$/.exec(String(value));
  if (match === null) throw new RangeError(`${value} is not a finite number.`);
  const [, sign = "", whole = "", decimals = "", power = "0"] = match;
  const digits = BigInt(sign + whole + decimals);
  const exponent = Number(power) - decimals.length;
  return exponent >= 0
    ? { above: digits * 10n ** BigInt(exponent), below: 1n }
    : { above: digits, below: 10n ** BigInt(-exponent) };
}

/** The exact product of numbers. */
export function product(...values: readonly number[]): Ratio {
  return values
    .map(exact)
    .reduce((all, one) => ({ above: all.above * one.above, below: all.below * one.below }), {
      above: 1n,
      below: 1n,
    });
}

/** a / b, exact. Throws RangeError when b is 0. */
export function quotient(a: Ratio, b: Ratio): Ratio {
  if (b.above === 0n) throw new RangeError("Nothing can be divided by 0.");
  const sign = b.above < 0n ? -1n : 1n;
  return { above: a.above * b.below * sign, below: a.below * b.above * sign };
}

/** The fraction to so many decimals, ties away from zero. */
export function roundHalfUp(value: Ratio, decimals: number): number {
  const scale = 10n ** BigInt(decimals);
  return scaledBack(divideHalfUp(value.above * scale, value.below), decimals);
}

/** The fraction to so many decimals, ties to the even digit. */
export function roundHalfEven(value: Ratio, decimals: number): number {
  const above = value.above * 10n ** BigInt(decimals);
  const rounded = divideHalfUp(above, value.below);
  const tie = (above - rounded * value.below) * 2n;
  const wasTie = tie === value.below || tie === -value.below;
  const even = wasTie && rounded % 2n !== 0n ? rounded - (above < 0n ? -1n : 1n) : rounded;
  return scaledBack(even, decimals);
}

/** A whole number of units of 10^-decimals as the number that prints so. */
function scaledBack(units: bigint, decimals: number): number {
  return units === 0n ? 0 : Number(`${units}e-${decimals}`);
}
