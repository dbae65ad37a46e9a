import { describe, expect, it } from "vitest";
import { numberMark, proofShare } from "./numbering";

// IPCNY glossary, "Artist annotations", and Tamarind Book of Lithography (1971) section 5.1.
describe("the mark of an impression", () => {
  it.each([
    ["numbered", 3, 25, "3/25"],
    ["ap", 2, 3, "AP 2/3"],
    ["pp", 1, 1, "PP 1/1"],
    ["hc", 1, 2, "HC 1/2"],
    ["bat", 1, 1, "BAT"],
  ] as const)("%s %i of %i is %s", (run, number, total, mark) => {
    expect(numberMark({ run, number, total })).toBe(mark);
  });
});

// Common practice: about a tenth of the run (two trade glossaries agree). Cut down or rounded up is the studio's choice.
describe("a tenth of the run as artist's proofs", () => {
  it.each([
    [5, 0, 1],
    [10, 1, 1],
    [15, 1, 2],
    [25, 2, 3],
    [30, 3, 3],
    [50, 5, 5],
  ])("of %i: %i or %i", (limit, floor, ceil) => {
    expect(proofShare(limit)).toEqual({ floor, ceil });
  });
});
