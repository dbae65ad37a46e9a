import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  add,
  allocate,
  type CurrencyCode,
  CurrencyError,
  compare,
  currencyCode,
  currencyCodes,
  decimalText,
  divideHalfUp,
  formatMoney,
  isCurrencyCode,
  money,
  multiplyRatio,
  negate,
  parseMoney,
  subtract,
  sum,
  zero,
} from "./money";

const currencies: CurrencyCode[] = ["GBP", "EUR", "USD", "CHF", "JPY", "KWD", "CLF", "HUF"];
const anyMoney = fc
  .record({ amount: fc.maxSafeInteger(), currency: fc.constantFrom(...currencies) })
  .map(({ amount, currency }) => money(amount, currency));
const read = (text: string, currency: CurrencyCode, language?: string) => {
  const result = parseMoney(text, currency, language);
  return result.ok ? result.money.amount : result.problem;
};

describe("money", () => {
  it("refuses fractions and amounts that cannot be counted exactly", () => {
    expect(() => money(0.5, "GBP")).toThrow(RangeError);
    expect(() => money(2 ** 53, "GBP")).toThrow(RangeError);
    expect(() => add(money(Number.MAX_SAFE_INTEGER, "GBP"), money(1, "GBP"))).toThrow(RangeError);
  });

  it("has no negative nothing", () => {
    expect(Object.is(negate(zero("GBP")).amount, 0)).toBe(true);
  });

  it("refuses to mix currencies", () => {
    expect(() => add(money(1, "GBP"), money(1, "EUR"))).toThrow(CurrencyError);
    expect(() => subtract(money(1, "GBP"), money(1, "EUR"))).toThrow(CurrencyError);
    expect(() => compare(money(1, "GBP"), money(1, "EUR"))).toThrow(CurrencyError);
    expect(() => sum("GBP", [money(1, "EUR")])).toThrow(CurrencyError);
  });

  it("knows its currencies", () => {
    expect(isCurrencyCode("gbp")).toBe(false);
    expect(() => currencyCode("ABC")).toThrow(CurrencyError);
    expect(currencyCodes()).toContain("GBP");
    expect(new Set(currencyCodes()).size).toBe(currencyCodes().length);
  });
});

describe("divideHalfUp", () => {
  it("sends ties away from zero on both sides", () => {
    expect([5n, -5n, 15n, -15n, 14n, -14n].map((n) => divideHalfUp(n, 10n))).toEqual([
      1n,
      -1n,
      2n,
      -2n,
      1n,
      -1n,
    ]);
    expect(divideHalfUp(5n, -10n)).toBe(-1n);
    expect(() => divideHalfUp(1n, 0n)).toThrow(RangeError);
  });

  it("is never further than half a unit from the exact ratio", () => {
    fc.assert(
      fc.property(fc.bigInt(), fc.bigInt({ min: 1n }), (numerator, denominator) => {
        const twiceError = (divideHalfUp(numerator, denominator) * denominator - numerator) * 2n;
        const size = twiceError < 0n ? -twiceError : twiceError;
        expect(size <= denominator).toBe(true);
      }),
    );
  });
});

describe("multiplyRatio", () => {
  it("rounds once, half-up, without binary fractions", () => {
    expect(multiplyRatio(money(1005, "GBP"), 1, 10).amount).toBe(101);
    expect(multiplyRatio(money(-1005, "GBP"), 1, 10).amount).toBe(-101);
    expect(multiplyRatio(money(1234567890123, "GBP"), 175, 1000).amount).toBe(216049380772);
  });
});

describe("allocate", () => {
  it("gives the odd units to the largest remainders", () => {
    expect(allocate(money(1000, "GBP"), [1, 1, 1]).map((part) => part.amount)).toEqual([334, 333, 333]);
    expect(allocate(money(100, "GBP"), [1, 0, 2]).map((part) => part.amount)).toEqual([33, 0, 67]);
    expect(allocate(money(-1000, "GBP"), [1, 1, 1]).map((part) => part.amount)).toEqual([-334, -333, -333]);
  });

  it("refuses weights that cannot share anything", () => {
    expect(() => allocate(money(1, "GBP"), [])).toThrow(RangeError);
    expect(() => allocate(money(1, "GBP"), [0, 0])).toThrow(RangeError);
    expect(() => allocate(money(1, "GBP"), [-1, 2])).toThrow(RangeError);
  });

  it("always adds up, and never strays a unit from the exact share", () => {
    const weights = fc
      .array(fc.nat(10_000), { minLength: 1, maxLength: 30 })
      .filter((list) => list.some((weight) => weight > 0));
    fc.assert(
      fc.property(anyMoney, weights, (whole, list) => {
        const parts = allocate(whole, list);
        const total = BigInt(list.reduce((all, weight) => all + weight, 0));
        expect(parts.reduce((all, part) => all + BigInt(part.amount), 0n)).toBe(BigInt(whole.amount));
        for (const [index, part] of parts.entries()) {
          const off = BigInt(part.amount) * total - BigInt(whole.amount) * BigInt(list[index] ?? 0);
          expect(off < total && off > -total).toBe(true);
        }
      }),
    );
  });
});

describe("decimalText", () => {
  it("writes the decimals the currency has", () => {
    expect(decimalText(money(-5, "GBP"))).toBe("-0.05");
    expect(decimalText(money(12000, "JPY"))).toBe("12000");
    expect(decimalText(money(Number.MAX_SAFE_INTEGER, "GBP"))).toBe("90071992547409.91");
  });
});

describe("parseMoney", () => {
  it("reads an amount by the marks of the language", () => {
    expect(read("1,234.50", "GBP", "en")).toBe(123450);
    expect(read("1.234,50", "EUR", "de")).toBe(123450);
    expect(read("12\u202f345,6", "EUR", "fr")).toBe(1234560);
    expect(read("1'234.50", "CHF", "de-CH")).toBe(123450);
    expect(read("12,34,567.50", "INR", "en-IN")).toBe(123456750);
    expect(read("450", "GBP")).toBe(45000);
    expect(read(".5", "GBP")).toBe(50);
    expect(read("\u22125", "GBP")).toBe(-500);
  });

  it("takes the currency's own sign or code, and no other", () => {
    expect(read("£1,234.50", "GBP")).toBe(123450);
    expect(read("gbp 12", "GBP")).toBe(1200);
    expect(read("12 EUR", "EUR", "de")).toBe(1200);
    expect(read("€12", "GBP")).toBe("other_currency");
    expect(read("12 USD", "GBP")).toBe("other_currency");
    expect(read("12 apples", "GBP")).toBe("not_an_amount");
  });

  it("refuses what it would have to guess or to round", () => {
    expect(read("1.500", "GBP", "en")).toBe("too_many_decimals");
    expect(read("1,500", "EUR", "de")).toBe("too_many_decimals");
    expect(read("0.005", "GBP")).toBe("too_many_decimals");
    expect(read("1.5", "JPY")).toBe("too_many_decimals");
    expect(read("1,50", "GBP", "en")).toBe("not_an_amount");
    expect(read("0,150", "GBP", "en")).toBe("not_an_amount");
    expect(read("1,,000", "GBP")).toBe("not_an_amount");
    expect(read("1.2.3", "GBP")).toBe("not_an_amount");
    expect(read("1e5", "GBP")).toBe("not_an_amount");
    expect(read("--5", "GBP")).toBe("not_an_amount");
    expect(read("", "GBP")).toBe("empty");
    expect(read("   ", "GBP")).toBe("empty");
    expect(read("90071992547409.92", "GBP")).toBe("too_large");
    expect(read("9".repeat(10_000), "GBP")).toBe("not_an_amount");
  });

  it("reads back whatever formatMoney wrote", () => {
    fc.assert(
      fc.property(
        anyMoney,
        fc.constantFrom("en", "en-GB", "de", "de-CH", "fr", "es", "nl", "pl", "sv"),
        (amount, language) => {
          expect(parseMoney(formatMoney(amount, language), amount.currency, language)).toEqual({
            ok: true,
            money: amount,
          });
        },
      ),
    );
  });
});
