import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  checkLadder,
  cutLadder,
  ladderRows,
  type PriceStep,
  priceOf,
  priceOfReturned,
  sellOutTotal,
} from "./ladder";

const step = (fromNumber: number, toNumber: number, amount: number): PriceStep => ({
  fromNumber,
  toNumber,
  amount,
});
const codes = (steps: PriceStep[], limit: number) => checkLadder(steps, limit).map((problem) => problem.code);

const soundLadder = fc
  .record({
    lengths: fc.array(fc.integer({ min: 1, max: 20 }), { minLength: 1, maxLength: 8 }),
    amounts: fc.array(fc.integer({ min: 1, max: 10_000_000 }), { minLength: 8, maxLength: 8 }),
    turn: fc.boolean(),
  })
  .map(({ lengths, amounts, turn }) => {
    let next = 1;
    const steps = lengths.map((length, index) => {
      const from = next;
      next += length;
      return step(from, next - 1, amounts[index] ?? 1);
    });
    return { steps: turn ? steps.reverse() : steps, limit: next - 1 };
  });

const anyLadder = fc.record({
  steps: fc.array(
    fc.record({
      fromNumber: fc.integer({ min: -2, max: 14 }),
      toNumber: fc.integer({ min: -2, max: 14 }),
      amount: fc.integer({ min: -1, max: 3 }),
    }),
    { maxLength: 5 },
  ),
  limit: fc.integer({ min: 1, max: 12 }),
});

describe("checkLadder", () => {
  it("names every kind of problem", () => {
    expect(codes([], 5)).toEqual(["no_steps"]);
    expect(codes([step(1, 2, 100), step(4, 5, 100)], 5)).toEqual(["gap"]);
    expect(codes([step(1, 3, 100), step(3, 5, 200)], 5)).toEqual(["overlap"]);
    expect(codes([step(1, 6, 100)], 5)).toEqual(["past_limit"]);
    expect(codes([step(0, 5, 100)], 5)).toEqual(["below_one"]);
    expect(codes([step(1, 5, 0)], 5)).toEqual(["not_positive"]);
    expect(codes([step(5, 1, 100)], 5)).toEqual(["backwards", "gap"]);
    expect(codes([step(1, 5, 99.5)], 5)).toEqual(["not_whole", "gap"]);
    expect(codes([step(1, 4, 100)], 5)).toEqual(["gap"]);
    expect(codes([step(2, 5, 100)], 5)).toEqual(["gap"]);
    expect(() => checkLadder([step(1, 5, 100)], 0)).toThrow(RangeError);
  });

  it("says which numbers", () => {
    const sentences = checkLadder([step(1, 3, 100), step(3, 4, 100), step(7, 9, 100)], 12).map(
      (problem) => problem.sentence,
    );
    expect(sentences).toEqual([
      "Number 3 would have two prices.",
      "Numbers 5 to 6 have no price.",
      "Numbers 10 to 12 have no price.",
    ]);
  });

  it("finds nothing exactly when every number of 1 to the limit has one price above nothing, and no other has", () => {
    fc.assert(
      fc.property(anyLadder, ({ steps, limit }) => {
        const prices = (number: number) =>
          steps.filter((one) => one.fromNumber <= number && number <= one.toNumber).length;
        const range = (from: number, to: number) =>
          Array.from({ length: to - from + 1 }, (_, index) => from + index);
        const sound =
          range(1, limit).every((number) => prices(number) === 1) &&
          [...range(-2, 0), ...range(limit + 1, 14)].every((number) => prices(number) === 0) &&
          steps.every((one) => one.amount > 0 && one.fromNumber <= one.toNumber);
        expect(checkLadder(steps, limit).length === 0).toBe(sound);
      }),
      { numRuns: 2000 },
    );
  });

  it("accepts sound ladders, in any order", () => {
    fc.assert(
      fc.property(soundLadder, ({ steps, limit }) => {
        expect(checkLadder(steps, limit)).toEqual([]);
      }),
    );
  });
});

describe("a sound ladder", () => {
  it("has one price for each number, none outside, and rows that add up to the sum of the prices", () => {
    fc.assert(
      fc.property(soundLadder, ({ steps, limit }) => {
        let total = 0;
        for (let number = 1; number <= limit; number += 1) {
          const price = priceOf(steps, number);
          expect(price).not.toBeNull();
          total += price ?? 0;
        }
        expect(priceOf(steps, 0)).toBeNull();
        expect(priceOf(steps, limit + 1)).toBeNull();
        expect(sellOutTotal(steps)).toBe(total);
        expect(ladderRows(steps).reduce((all, row) => all + row.count, 0)).toBe(limit);
      }),
    );
  });

  it("stays sound when it is cut to a lower limit, and keeps its prices", () => {
    fc.assert(
      fc.property(soundLadder, fc.nat(), ({ steps, limit }, seed) => {
        const lower = (seed % limit) + 1;
        const cut = cutLadder(steps, lower);
        expect(checkLadder(cut, lower)).toEqual([]);
        expect(priceOf(cut, lower)).toBe(priceOf(steps, lower));
      }),
    );
  });

  it("shows neighbours of one price as one row", () => {
    expect(ladderRows([step(6, 10, 200), step(3, 5, 100), step(1, 2, 100)])).toEqual([
      { fromNumber: 1, toNumber: 5, amount: 100, count: 5, total: 500 },
      { fromNumber: 6, toNumber: 10, amount: 200, count: 5, total: 1000 },
    ]);
  });
});

describe("a returned number", () => {
  const steps = [step(1, 5, 30000), step(6, 10, 36000)];
  it("sells at its own price or at the next number's", () => {
    expect(priceOfReturned(steps, 2, "own", 7)).toBe(30000);
    expect(priceOfReturned(steps, 2, "next", 7)).toBe(36000);
    expect(priceOfReturned(steps, 2, "next", null)).toBe(30000);
  });
});

describe("a ladder by count of sale", () => {
  // Common practice: the price steps up as numbers sell. The figures are a worked example, added up by hand:
  // 5 x 300 + 5 x 360 + 5 x 450 + 5 x 600 + 4 x 800 + 1,200 = 12,950.
  const steps = [
    step(1, 5, 30000),
    step(6, 10, 36000),
    step(11, 15, 45000),
    step(16, 20, 60000),
    step(21, 24, 80000),
    step(25, 25, 120000),
  ];
  it("prices sales 5 and 6, and the sell-out", () => {
    expect(checkLadder(steps, 25)).toEqual([]);
    expect(priceOf(steps, 5)).toBe(30000);
    expect(priceOf(steps, 6)).toBe(36000);
    expect(sellOutTotal(steps)).toBe(1295000);
  });
});
