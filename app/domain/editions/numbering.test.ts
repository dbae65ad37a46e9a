import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type CopyNumber, isForSale, numberMark, parseNumberMark, proofShare, RUNS } from "./numbering";

describe("numberMark", () => {
  it("refuses numbers a run does not have", () => {
    for (const [number, total] of [
      [0, 25],
      [26, 25],
      [1.5, 25],
      [-1, 25],
      [1, 0],
    ] as const) {
      expect(() => numberMark({ run: "numbered", number, total })).toThrow(RangeError);
    }
    expect(() => numberMark({ run: "bat", number: 1, total: 2 })).toThrow(RangeError);
  });

  it("is read back as the same copy", () => {
    const anyCopy = fc
      .tuple(fc.constantFrom(...RUNS), fc.integer({ min: 1, max: 999 }), fc.nat(999))
      .map(
        ([run, number, more]): CopyNumber =>
          run === "bat" ? { run, number: 1, total: 1 } : { run, number, total: number + more },
      );
    fc.assert(
      fc.property(anyCopy, (copy) => {
        expect(parseNumberMark(numberMark(copy))).toEqual(copy);
      }),
    );
  });
});

describe("parseNumberMark", () => {
  it("does not mind how it is typed", () => {
    expect(parseNumberMark(" 7 / 25 ")).toEqual({ run: "numbered", number: 7, total: 25 });
    expect(parseNumberMark("a.p. 2/3")).toEqual({ run: "ap", number: 2, total: 3 });
    expect(parseNumberMark("EA 2/3")).toEqual({ run: "ap", number: 2, total: 3 });
    expect(parseNumberMark("bat")).toEqual({ run: "bat", number: 1, total: 1 });
  });

  it("names nothing when the text does not", () => {
    for (const text of [
      "",
      "7",
      "26/25",
      "0/25",
      "XX 1/2",
      "7/25/2",
      "-1/25",
      "7/25 extra",
      "constructor 1/2",
      "BAT 1/1",
    ]) {
      expect(parseNumberMark(text), text).toBeNull();
    }
  });
});

describe("what may be sold", () => {
  it("is everything but exhibition copies and hors commerce", () => {
    expect(RUNS.filter(isForSale)).toEqual(["numbered", "ap", "pp", "bat"]);
  });
});

describe("proofShare", () => {
  it("refuses what is no limit or no share", () => {
    expect(() => proofShare(-1)).toThrow(RangeError);
    expect(() => proofShare(10, 101)).toThrow(RangeError);
    expect(proofShare(29, 20)).toEqual({ floor: 5, ceil: 6 });
  });
});
