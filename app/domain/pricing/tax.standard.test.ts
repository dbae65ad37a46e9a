import { describe, expect, it } from "vitest";
import { commissionOn } from "./commission";
import { creditFor, type TaxLine, type TaxTables, taxFor, taxInside, taxOnNet } from "./tax";
import { orderTotal } from "./total";

const uk: TaxTables = {
  registrations: [{ country: "GB", number: "GB000000000", from: "2024-01-01", to: null }],
  rates: [
    {
      country: "GB",
      kind: "standard",
      basisPoints: 2000,
      from: "2011-01-04",
      to: null,
      source: "VATA 1994 s. 2",
    },
  ],
};
const line = (id: string, gross: number, kind: TaxLine["kind"] = "print"): TaxLine => ({
  id,
  gross,
  kind,
  worksOfArt: true,
});
const atHome = (lines: TaxLine[]) =>
  taxFor({ homeCountry: "GB", buyerCountry: "GB", buyerKind: "consumer", at: "2026-12-01", lines }, uk);

// HMRC, calculating VAT from an inclusive price: 20 % is a sixth of it, 5 % a twenty-first. HMRC's published examples.
describe("VAT in an inclusive price", () => {
  it("is a sixth at 20 %: 24.00 has 4.00 in it, 60.00 has 10.00", () => {
    expect([2400, 6000].map((gross) => taxInside(gross, 2000))).toEqual([400, 1000]);
  });
  it("is a twenty-first at 5 %", () => {
    expect(taxInside(2100, 500)).toBe(100);
  });
});

// VAT Notice 700 section 17.6, HMRC VATREC12020: a retailer with inclusive prices may not round down; to the nearest
// penny, up and down, is allowed. The figures are worked out from that rule.
describe("rounding for a retailer", () => {
  it.each([
    [39500, 6583],
    [45000, 7500],
    [19999, 3333],
    [8500, 1417],
    [1495, 249],
    [4479, 747],
    [3, 1],
  ])("%i pence have %i in them", (gross, tax) => {
    expect(taxInside(gross, 2000)).toBe(tax);
  });

  it("is done line by line: three of 14.95 have 7.47, where one of 44.85 would have 7.48", () => {
    expect(orderTotal(atHome([line("a", 1495), line("b", 1495), line("c", 1495)])).tax).toBe(747);
    expect(taxInside(4485, 2000)).toBe(748);
  });
});

// VAT Notice 700 section 17.5, HMRC VATREC12010: invoice traders with net prices may go to 0.1p down, or to the nearest penny.
describe("rounding for an invoice from net prices", () => {
  it("12.4275 at 20 % is 2.485 or 2.49", () => {
    expect(taxOnNet("12.4275", 2000, "down_0.001")).toBe("2.485");
    expect(taxOnNet("12.4275", 2000, "nearest_0.01")).toBe("2.49");
  });
});

// VAT Notice 700/24 (from memory): delivery charged with goods follows the goods.
describe("delivery", () => {
  it("is taxed as the goods are: 450.00 and 15.00 have 77.50", () => {
    expect(orderTotal(atHome([line("print", 45000), line("post", 1500, "delivery")])).tax).toBe(7750);
  });
});

// R. Salter, memorandum to the House of Commons Culture, Media and Sport Committee, 2005: half each is general; the contract
// must say whether on the net or on the gross.
describe("a stockist's half of 600.00", () => {
  it("is 250.00 on the net and 300.00 on the gross", () => {
    const sale = { gross: 60000, tax: taxInside(60000, 2000) };
    expect(commissionOn(sale, { basisPoints: 5000, on: "net" })).toEqual({ commission: 25000, maker: 25000 });
    expect(commissionOn(sale, { basisPoints: 5000, on: "gross" })).toEqual({
      commission: 30000,
      maker: 30000,
    });
  });
});

// Common practice, following from VATREC12020: a credit takes back what was charged, line by line.
describe("a refund in full", () => {
  it("is the sale's own figures below zero", () => {
    const sold = atHome([line("a", 1495), line("b", 1495), line("c", 1495)]);
    const credits = sold.map((snapshot) => creditFor(snapshot, "whole"));
    expect(credits.map((credit) => [credit.gross, credit.net, credit.tax])).toEqual([
      [-1495, -1246, -249],
      [-1495, -1246, -249],
      [-1495, -1246, -249],
    ]);
    expect(orderTotal(credits).tax).toBe(-747);
  });
});
