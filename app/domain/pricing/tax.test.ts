import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { commissionOn } from "./commission";
import {
  creditFor,
  MissingTaxRate,
  percentText,
  type TaxLine,
  type TaxQuery,
  type TaxTables,
  taxFor,
  taxInside,
  taxOnNet,
} from "./tax";
import { orderTotal } from "./total";

const standard = { kind: "standard" as const, to: null, source: "an invented act" };
const tables: TaxTables = {
  registrations: [
    { country: "GB", number: "1", from: "2024-01-01", to: "2026-06-30" },
    { country: "GB", number: "2", from: "2026-09-01", to: null },
    { country: "DE", number: "3", from: "2020-01-01", to: null },
    { country: "FR", number: "4", from: "2020-01-01", to: null },
  ],
  rates: [
    { ...standard, country: "GB", basisPoints: 2000, from: "2011-01-04" },
    { ...standard, country: "DE", basisPoints: 1900, from: "2007-01-01" },
    {
      country: "DE",
      kind: "reduced_art",
      basisPoints: 700,
      from: "2025-01-01",
      to: null,
      source: "an invented section",
    },
    { ...standard, country: "FR", basisPoints: 2000, from: "2014-01-01" },
    {
      country: "FR",
      kind: "reduced_art",
      basisPoints: 550,
      from: "2014-01-01",
      to: null,
      source: "an invented article",
    },
  ],
};
const print = (gross: number, worksOfArt = true): TaxLine => ({
  id: "print",
  gross,
  kind: "print",
  worksOfArt,
});
const ask = (query: Partial<TaxQuery> & { lines: TaxLine[] }) =>
  taxFor(
    { homeCountry: "GB", buyerCountry: "GB", buyerKind: "consumer", at: "2026-12-01", ...query },
    tables,
  );
const only = (query: Partial<TaxQuery> & { lines: TaxLine[] }) => {
  const [first] = ask(query);
  if (first === undefined) throw new Error("no line");
  return first;
};

describe("taxFor", () => {
  it("takes the home tax out of a price at home", () => {
    expect(only({ lines: [print(45000)] })).toMatchObject({
      gross: 45000,
      net: 37500,
      tax: 7500,
      basisPoints: 2000,
      country: "GB",
      kind: "standard",
      treatment: "home",
      label: "VAT 20%",
      source: "an invented act",
    });
  });

  it("mentions no tax on a day without a registration, to the day", () => {
    const at = (day: string) => only({ at: day, lines: [print(45000)] });
    expect(at("2026-06-30").tax).toBe(7500);
    expect(at("2026-07-01")).toMatchObject({
      gross: 45000,
      net: 45000,
      tax: 0,
      country: null,
      kind: "none",
      treatment: "unregistered",
      label: "",
    });
    expect(at("2026-08-31").treatment).toBe("unregistered");
    expect(at("2026-09-01").tax).toBe(7500);
    expect(orderTotal(ask({ at: "2026-07-01", lines: [print(45000)] })).byRate).toEqual([]);
  });

  it("does not charge the tax of a country it is not at home in", () => {
    expect(only({ homeCountry: "IE", buyerCountry: "DE", lines: [print(100)] }).treatment).toBe(
      "unregistered",
    );
  });

  it("takes the home tax off what leaves the territory", () => {
    for (const buyerCountry of ["DE", "US", "JE", "IE"]) {
      expect(only({ buyerCountry, lines: [print(45000)] })).toMatchObject({
        listed: 45000,
        gross: 37500,
        net: 37500,
        tax: 0,
        basisPoints: 0,
        treatment: "export",
        label: "VAT 0% (export)",
      });
    }
    expect(only({ homeCountry: "DE", buyerCountry: "GB", lines: [print(10700)] }).gross).toBe(10000);
    expect(only({ homeCountry: "DE", buyerCountry: "CH", lines: [print(10700)] }).treatment).toBe("export");
  });

  it("keeps the home rate within the EU, the Isle of Man and Monaco", () => {
    expect(only({ homeCountry: "DE", buyerCountry: "FR", lines: [print(10700)] })).toMatchObject({
      treatment: "home",
      tax: 700,
      country: "DE",
    });
    expect(
      only({ homeCountry: "DE", buyerCountry: "FR", buyerKind: "business", lines: [print(10700)] }).tax,
    ).toBe(700);
    expect(only({ buyerCountry: "IM", lines: [print(45000)] }).treatment).toBe("home");
    expect(only({ homeCountry: "FR", buyerCountry: "MC", lines: [print(10550)] }).tax).toBe(550);
    expect(only({ homeCountry: "FR", buyerCountry: "GP", lines: [print(10550)] }).treatment).toBe("export");
  });

  it("gives works of art the reduced rate from the day there is one, and nothing else", () => {
    const german = (at: string, worksOfArt: boolean) =>
      only({ homeCountry: "DE", buyerCountry: "DE", at, lines: [print(10000, worksOfArt)] }).basisPoints;
    expect(german("2024-12-31", true)).toBe(1900);
    expect(german("2025-01-01", true)).toBe(700);
    expect(german("2025-01-01", false)).toBe(1900);
    expect(only({ lines: [print(45000, true)] }).basisPoints).toBe(2000);
  });

  it("taxes frames and mounts in full, and delivery like the goods it carries", () => {
    const rates = (lines: TaxLine[]) =>
      ask({ homeCountry: "DE", buyerCountry: "DE", lines }).map((snapshot) => snapshot.basisPoints);
    const frame: TaxLine = { id: "frame", gross: 5000, kind: "frame", worksOfArt: true };
    const delivery: TaxLine = { id: "delivery", gross: 900, kind: "delivery", worksOfArt: false };
    expect(rates([print(10000), delivery])).toEqual([700, 700]);
    expect(rates([print(10000), frame, delivery])).toEqual([700, 1900, 1900]);
    expect(rates([delivery])).toEqual([1900]);
  });

  it("says so when the tables name no rate", () => {
    expect(() =>
      taxFor(
        { homeCountry: "GB", buyerCountry: "GB", buyerKind: "consumer", at: "2026-12-01", lines: [print(1)] },
        { ...tables, rates: [] },
      ),
    ).toThrow(MissingTaxRate);
  });

  it("always splits what is paid into net and tax, and never rounds the tax by more than half a penny", () => {
    fc.assert(
      fc.property(fc.nat(1_000_000_000), fc.integer({ min: 0, max: 3000 }), (gross, basisPoints) => {
        const tax = taxInside(gross, basisPoints);
        const off = BigInt(tax) * BigInt(10_000 + basisPoints) - BigInt(gross) * BigInt(basisPoints);
        expect((off < 0n ? -off : off) * 2n <= BigInt(10_000 + basisPoints)).toBe(true);
        expect(taxInside(-gross, basisPoints)).toBe(tax === 0 ? 0 : -tax);
      }),
    );
    fc.assert(
      fc.property(
        fc.array(fc.nat(10_000_000), { maxLength: 6 }),
        fc.constantFrom("GB", "DE", "FR", "IE"),
        fc.constantFrom("GB", "DE", "FR", "US", "IM"),
        (amounts, homeCountry, buyerCountry) => {
          const lines = amounts.map((gross, index) => ({
            ...print(gross, index % 2 === 0),
            id: String(index),
          }));
          const snapshots = ask({ homeCountry, buyerCountry, lines });
          expect(snapshots.map((snapshot) => snapshot.id)).toEqual(lines.map((one) => one.id));
          for (const snapshot of snapshots) {
            expect(snapshot.net + snapshot.tax).toBe(snapshot.gross);
            expect(snapshot.gross).toBeLessThanOrEqual(snapshot.listed);
            expect(snapshot.tax).toBeGreaterThanOrEqual(0);
          }
          const total = orderTotal(snapshots);
          expect(total.net + total.tax).toBe(total.gross);
          expect(total.byRate.reduce((all, row) => all + row.tax, 0)).toBe(total.tax);
        },
      ),
    );
  });
});

describe("creditFor", () => {
  it("takes back parts that add up to the whole line, tax and all", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1_000_000 }),
        fc.array(fc.integer({ min: 1, max: 100 }), { minLength: 1, maxLength: 6 }),
        (gross, cuts) => {
          const snapshot = only({ lines: [print(gross)] });
          let credited = { gross: 0, tax: 0 };
          for (const cut of [...cuts.map((percent) => Math.floor((gross * percent) / 600)), gross]) {
            const part = Math.min(cut, gross - credited.gross);
            if (part <= 0) continue;
            const credit = creditFor(snapshot, { gross: part, credited });
            expect(credit.net + credit.tax).toBe(credit.gross);
            expect(credit.tax).toBeLessThanOrEqual(0);
            credited = { gross: credited.gross - credit.gross, tax: credited.tax - credit.tax };
          }
          expect(credited).toEqual({ gross: snapshot.gross, tax: snapshot.tax });
        },
      ),
    );
  });

  it("refuses more than is left", () => {
    const snapshot = only({ lines: [print(1000)] });
    expect(() => creditFor(snapshot, { gross: 1001 })).toThrow(RangeError);
    expect(() => creditFor(snapshot, { gross: 0 })).toThrow(RangeError);
    expect(() => creditFor(snapshot, { gross: 501, credited: { gross: 500, tax: 83 } })).toThrow(RangeError);
  });
});

describe("orderTotal", () => {
  it("sums by rate, the highest first", () => {
    const frame: TaxLine = { id: "frame", gross: 11900, kind: "frame", worksOfArt: false };
    expect(orderTotal(ask({ homeCountry: "DE", buyerCountry: "DE", lines: [print(10700), frame] }))).toEqual({
      gross: 22600,
      net: 20000,
      tax: 2600,
      byRate: [
        { basisPoints: 1900, label: "VAT 19%", net: 10000, tax: 1900, gross: 11900 },
        { basisPoints: 700, label: "VAT 7%", net: 10000, tax: 700, gross: 10700 },
      ],
    });
  });
});

describe("the rest", () => {
  it("writes rates as short as they are", () => {
    expect([2000, 550, 1925, 705, 0].map(percentText)).toEqual(["20", "5.5", "19.25", "7.05", "0"]);
  });

  it("refuses a net price that is none", () => {
    expect(() => taxOnNet("12,50", 2000, "nearest_0.01")).toThrow(RangeError);
    expect(taxOnNet("0.02", 2000, "nearest_0.01")).toBe("0.00");
    expect(taxOnNet("10", 2000, "nearest_0.01")).toBe("2.00");
  });

  it("splits every sale without loss, whatever the share", () => {
    fc.assert(
      fc.property(fc.nat(10_000_000), fc.nat(10_000), (gross, basisPoints) => {
        const tax = taxInside(gross, 2000);
        const net = commissionOn({ gross, tax }, { basisPoints, on: "net" });
        expect(net.commission + net.maker).toBe(gross - tax);
        expect(Math.min(net.commission, net.maker)).toBeGreaterThanOrEqual(0);
      }),
    );
    expect(() => commissionOn({ gross: 1, tax: 0 }, { basisPoints: 10_001, on: "net" })).toThrow(RangeError);
  });
});
