import { describe, expect, it } from "vitest";
import { type CurrencyCode, CurrencyError, decimalText, formatMoney, minorUnits, money } from "./money";

describe("ISO 4217 table A.1: minor units", () => {
  const published: [number, string[]][] = [
    [2, ["GBP", "EUR", "USD", "CHF", "HUF"]],
    [0, ["JPY", "KRW", "ISK", "VND"]],
    [3, ["BHD", "KWD", "JOD", "TND"]],
    [4, ["CLF", "UYW"]],
  ];
  for (const [exponent, codes] of published) {
    it(`${codes.join(", ")} have ${exponent}`, () => {
      expect(codes.map(minorUnits)).toEqual(codes.map(() => exponent));
    });
  }

  it("gold has a code but no minor unit, and ABC is no code at all", () => {
    expect(() => minorUnits("XAU")).toThrow(CurrencyError);
    expect(() => minorUnits("ABC")).toThrow(CurrencyError);
  });

  it("12000 minor units in JPY, GBP and KWD", () => {
    expect(decimalText(money(12000, "JPY"))).toBe("12000");
    expect(decimalText(money(12000, "GBP"))).toBe("120.00");
    expect(decimalText(money(12000, "KWD"))).toBe("12.000");
    expect(formatMoney(money(12000, "JPY"), "en")).toBe("¥12,000");
    expect(formatMoney(money(12000, "GBP"), "en")).toBe("£120.00");
    expect(formatMoney(money(12000, "KWD"), "en")).toBe("KWD\u00a012.000");
  });

  // ISO 4217 gives these two decimals; CLDR, which runtimes display by, has at times given none.
  it.each<CurrencyCode>(["HUF", "LAK", "IRR", "AFN"])("%s is shown with two decimals", (code) => {
    expect(formatMoney(money(12345, code), "en")).toMatch(/123\.45$/);
  });
});
