import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type DeliveryQuery,
  type DeliveryRate,
  type Piece,
  packingFor,
  parcelGrams,
  quoteDelivery,
} from "./delivery";

const rate = (row: Partial<DeliveryRate>): DeliveryRate => ({
  zone: "home",
  countries: ["GB"],
  upToGrams: 1000,
  amount: 900,
  currency: "GBP",
  daysFrom: 2,
  daysTo: 3,
  validFrom: "2026-01-01",
  validTo: null,
  example: false,
  ...row,
});
const rates = [
  rate({}),
  rate({ upToGrams: 5000, amount: 1500 }),
  rate({ zone: "near", countries: ["DE", "FR"], upToGrams: 5000, amount: 2400, daysFrom: 4, daysTo: 7 }),
  rate({
    zone: "far",
    countries: ["*"],
    upToGrams: 2000,
    amount: 3900,
    daysFrom: 6,
    daysTo: 14,
    example: true,
  }),
];
const small: Piece = { widthMm: 210, heightMm: 297, grams: 20, rollable: true };
const large: Piece = { widthMm: 594, heightMm: 420, grams: 78, rollable: true };
const ask = (query: Partial<DeliveryQuery>) =>
  quoteDelivery({ country: "GB", at: "2026-12-01", pieces: [small], method: "delivery", ...query }, rates);

describe("packing", () => {
  // Common practice: up to about A3 flat, larger rolled.
  it("is flat up to A3, whichever way the sheet lies, and a tube above", () => {
    expect(packingFor([{ ...small, widthMm: 420, heightMm: 297 }])).toBe("flat");
    expect(packingFor([{ ...small, widthMm: 298, heightMm: 420 }])).toBe("tube");
    expect(packingFor([small, large])).toBe("tube");
  });

  it("is flat for whatever may not be rolled", () => {
    expect(packingFor([{ ...large, rollable: false }])).toBe("flat");
    expect(packingFor([large, { ...small, rollable: false }])).toBe("flat");
  });

  it("weighs more than what is in it, and never less with a sheet more", () => {
    const anyPiece = fc.record({
      widthMm: fc.integer({ min: 50, max: 1500 }),
      heightMm: fc.integer({ min: 50, max: 1500 }),
      grams: fc.integer({ min: 1, max: 500 }),
      rollable: fc.constant(true),
    });
    fc.assert(
      fc.property(fc.array(anyPiece, { minLength: 1, maxLength: 6 }), anyPiece, (pieces, more) => {
        const grams = parcelGrams(pieces);
        expect(Number.isInteger(grams)).toBe(true);
        expect(grams).toBeGreaterThan(pieces.reduce((all, piece) => all + piece.grams, 0));
        if (packingFor(pieces) === packingFor([...pieces, more])) {
          expect(parcelGrams([...pieces, more])).toBeGreaterThanOrEqual(grams + 1);
        }
      }),
    );
  });

  it("is reckoned from the sheets", () => {
    // Boards of 290 x 377 mm at 3,000 g/m2 are 327.99 g; 60 g inside; the sheet 20 g.
    expect(parcelGrams([small])).toBe(408);
    // A tube of 500 mm at 900 g/m is 450 g; 60 g inside; the sheet 78 g.
    expect(parcelGrams([large])).toBe(588);
  });
});

describe("quoteDelivery", () => {
  it("takes the lowest weight limit that holds the parcel", () => {
    expect(ask({})).toEqual({
      kind: "quoted",
      amount: 900,
      days: { from: 2, to: 3 },
      grams: 408,
      packing: "flat",
      zone: "home",
      example: false,
    });
    expect(ask({ pieces: Array.from({ length: 8 }, () => large) })).toMatchObject({
      amount: 1500,
      packing: "tube",
    });
  });

  it("puts a row that names the country before the row for everywhere else", () => {
    expect(ask({ country: "DE" })).toMatchObject({ zone: "near", amount: 2400 });
    expect(ask({ country: "US" })).toMatchObject({ zone: "far", amount: 3900, example: true });
    expect(ask({ pieces: [{ ...small, grams: 6000 }] })).toEqual({
      kind: "not_delivered",
      reason: "too_heavy",
    });
  });

  it("says why it does not deliver", () => {
    expect(ask({ pieces: [] })).toEqual({ kind: "not_delivered", reason: "nothing_to_send" });
    expect(ask({ country: "US", pieces: [{ ...small, grams: 3000 }] })).toEqual({
      kind: "not_delivered",
      reason: "too_heavy",
    });
    expect(ask({ at: "2025-12-31" })).toEqual({ kind: "not_delivered", reason: "country_not_served" });
  });

  it("goes by the prices of the day", () => {
    const dated = [
      rate({ amount: 800, validFrom: "2025-01-01", validTo: "2026-11-30" }),
      rate({ amount: 950, validFrom: "2026-12-01" }),
    ];
    const on = (at: string) =>
      quoteDelivery({ country: "GB", at, pieces: [small], method: "delivery" }, dated);
    expect(on("2026-11-30")).toMatchObject({ amount: 800 });
    expect(on("2026-12-01")).toMatchObject({ amount: 950 });
  });

  it("takes the newer of two rows that both hold", () => {
    const both = [
      rate({ amount: 950, validFrom: "2026-12-01" }),
      rate({ amount: 800, validFrom: "2025-01-01" }),
    ];
    const query: DeliveryQuery = { country: "GB", at: "2026-12-05", pieces: [small], method: "delivery" };
    expect(quoteDelivery(query, both)).toMatchObject({ amount: 950 });
    expect(quoteDelivery(query, both.reverse())).toMatchObject({ amount: 950 });
  });

  it("costs nothing to collect", () => {
    expect(ask({ method: "collection", country: "AQ" })).toMatchObject({
      kind: "quoted",
      amount: 0,
      packing: "collection",
      days: { from: 0, to: 0 },
    });
  });
});
