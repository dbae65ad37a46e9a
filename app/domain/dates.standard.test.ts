import { describe, expect, it } from "vitest";
import { endOfWithdrawal } from "./dates";

// Consumer Contracts Regulations 2013 (SI 2013/3134) regs 29-30, and Directive 2011/83/EU Art. 9: 14 days, beginning the day
// after the goods arrive. Reg. 31 and Art. 10 (from memory): up to 12 months more when the information was never given.
describe("right to cancel a distance sale", () => {
  it.each([
    ["2026-11-02", "2026-11-16", "2027-11-16"],
    ["2026-12-20", "2027-01-03", "2028-01-03"],
    ["2028-02-15", "2028-02-29", "2029-02-28"],
  ])("delivered %s: last day %s, or %s when never informed", (delivered, last, lastUninformed) => {
    expect(endOfWithdrawal(delivered)).toBe(last);
    expect(endOfWithdrawal(delivered, null)).toBe(lastUninformed);
  });
});
