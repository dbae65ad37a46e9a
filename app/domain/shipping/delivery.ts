/**
 * What it costs to send an order, how long that takes and how it is packed, from the studio's own dated prices.
 *
 * Simple inside, final outside: everything in an order goes in one parcel, prices go by zone and weight, and the region
 * within a country is taken along but not yet looked at.
 */

import { type IsoDay, isInForce } from "../dates";

/** A price of the studio for a zone up to a weight; both days included. `countries` are ISO 3166-1 alpha-2 codes, "*" for everywhere no other row names. */
export type DeliveryRate = {
  readonly zone: string;
  readonly countries: readonly string[];
  readonly upToGrams: number;
  /** Minor units, home tax included. */
  readonly amount: number;
  readonly currency: string;
  /** Working days from dispatch to arrival. */
  readonly daysFrom: number;
  readonly daysTo: number;
  readonly validFrom: IsoDay;
  readonly validTo: IsoDay | null;
  /** The row came with the product as an example and has not been looked at by the studio. */
  readonly example: boolean;
};

/** A sheet as it goes into the parcel. Sizes of the sheet in mm, mass without packing in grams. */
export type Piece = {
  readonly widthMm: number;
  readonly heightMm: number;
  readonly grams: number;
  /** False for brittle, friable, torn or mounted work, which is sent flat between rigid boards. */
  readonly rollable: boolean;
};

export type DeliveryQuery = {
  readonly country: string;
  readonly region?: string;
  /** The day it is asked for, in the studio's zone. */
  readonly at: IsoDay;
  readonly pieces: readonly Piece[];
  readonly method: "delivery" | "collection";
};

export type NotDelivered = "nothing_to_send" | "country_not_served" | "too_heavy";

export type DeliveryQuote =
  | {
      readonly kind: "quoted";
      /** Minor units, home tax included. */
      readonly amount: number;
      /** Working days from dispatch to arrival. */
      readonly days: { readonly from: number; readonly to: number };
      /** The parcel with its packing. */
      readonly grams: number;
      readonly packing: "flat" | "tube" | "collection";
      readonly zone: string;
      /** The price is one of the product's examples. */
      readonly example: boolean;
    }
  | { readonly kind: "not_delivered"; readonly reason: NotDelivered };

/** The largest sheet sent flat, in mm: A3 of ISO 216. Sending larger sheets rolled is common studio practice, no standard. */
export const LARGEST_FLAT = { widthMm: 297, heightMm: 420 } as const;

/**
 * What packing weighs, in grams: common practice, to be weighed by whoever packs. A flat parcel is two rigid boards a hand's
 * breadth larger than the sheet; a tube is as long as the shorter side of the longest sheet, with room for its caps.
 * Tubes of 100 to 150 mm: US National Park Service, Conserve O Gram 13/5.
 */
export const PACKING = {
  /** Two boards of about 1,500 g/m2 together, wrapping included, by the area of the sheet with the margin on each side. */
  boardGramsPerSquareMetre: 3000,
  boardMarginMm: 40,
  /** A tube of about 110 mm with a wall of 4 mm, by its length. */
  tubeGramsPerMetre: 900,
  tubeCapsMm: 80,
  /** Interleaving, sleeve, invoice, certificate. */
  insideGrams: 60,
} as const;

function fitsFlat(piece: Piece): boolean {
  const [short, long] = [Math.min(piece.widthMm, piece.heightMm), Math.max(piece.widthMm, piece.heightMm)];
  return short <= LARGEST_FLAT.widthMm && long <= LARGEST_FLAT.heightMm;
}

/** Flat where every sheet is small enough, or where one of them may not be rolled; in a tube otherwise. */
export function packingFor(pieces: readonly Piece[]): "flat" | "tube" {
  return pieces.every(fitsFlat) || pieces.some((piece) => !piece.rollable) ? "flat" : "tube";
}

/** The mass of a parcel, sheets and packing, in whole grams rounded up. */
export function parcelGrams(pieces: readonly Piece[]): number {
  const sheets = pieces.reduce((all, piece) => all + piece.grams, 0);
  return Math.ceil(Number((sheets + packingGrams(pieces)).toFixed(6)));
}

function packingGrams(pieces: readonly Piece[]): number {
  const shorts = pieces.map((piece) => Math.min(piece.widthMm, piece.heightMm));
  const longs = pieces.map((piece) => Math.max(piece.widthMm, piece.heightMm));
  const short = Math.max(...shorts);
  if (packingFor(pieces) === "tube") {
    return PACKING.insideGrams + ((short + PACKING.tubeCapsMm) / 1000) * PACKING.tubeGramsPerMetre;
  }
  const [width, height] = [short + 2 * PACKING.boardMarginMm, Math.max(...longs) + 2 * PACKING.boardMarginMm];
  return PACKING.insideGrams + ((width * height) / 1_000_000) * PACKING.boardGramsPerSquareMetre;
}

/**
 * The price of sending these pieces to a country, or why they are not sent there. Rows that name the country come before rows for
 * everywhere else; of those, the one with the lowest weight limit that the parcel keeps applies. Collecting costs nothing.
 */
export function quoteDelivery(query: DeliveryQuery, rates: readonly DeliveryRate[]): DeliveryQuote {
  if (query.method === "collection") {
    return {
      kind: "quoted",
      amount: 0,
      days: { from: 0, to: 0 },
      grams: query.pieces.length === 0 ? 0 : parcelGrams(query.pieces),
      packing: "collection",
      zone: "collection",
      example: false,
    };
  }
  if (query.pieces.length === 0) return { kind: "not_delivered", reason: "nothing_to_send" };

  const valid = rates.filter((rate) => isInForce({ from: rate.validFrom, to: rate.validTo }, query.at));
  const named = valid.filter((rate) => rate.countries.includes(query.country));
  const zone = named.length > 0 ? named : valid.filter((rate) => rate.countries.includes("*"));
  if (zone.length === 0) return { kind: "not_delivered", reason: "country_not_served" };

  const grams = parcelGrams(query.pieces);
  const rate = zone
    .filter((one) => grams <= one.upToGrams)
    .reduce<DeliveryRate | null>((best, one) => (best === null || isNearer(one, best) ? one : best), null);
  if (rate === null) return { kind: "not_delivered", reason: "too_heavy" };
  return {
    kind: "quoted",
    amount: rate.amount,
    days: { from: rate.daysFrom, to: rate.daysTo },
    grams,
    packing: packingFor(query.pieces),
    zone: rate.zone,
    example: rate.example,
  };
}

/** The lower weight limit first; of two rows for the same weight, the newer one, then the cheaper one. */
function isNearer(one: DeliveryRate, other: DeliveryRate): boolean {
  if (one.upToGrams !== other.upToGrams) return one.upToGrams < other.upToGrams;
  if (one.validFrom !== other.validFrom) return one.validFrom > other.validFrom;
  return one.amount < other.amount;
}
