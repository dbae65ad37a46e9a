/**
 * Value added tax on what a buyer pays. Ladder prices and delivery prices include the home tax; this module says how
 * much of a price that is, or takes it off where it is not due.
 *
 * Simple inside, on purpose, and final outside:
 * - no registration in the home country on that day: no tax, and nothing on paper that mentions one;
 * - "home": the buyer is in the home country, or both are in the EU: the home rate is inside the price;
 * - "export": the buyer is anywhere else: the home tax comes off, and the buyer pays the net.
 *
 * Sales within the EU are taxed at home, which is right for consumers while the seller stays under the threshold of Art. 59c
 * of Directive 2006/112/EC (10,000 EUR a year, from memory), and cautious for businesses, whose number is not asked for
 * yet. Parts of a country outside its tax territory are known only where they have a country code of their own.
 * These figures are a guide: a studio asks its accountant before it relies on a rate or a scheme.
 */

import { divideHalfUp } from "~/platform/money";
import { type IsoDay, isInForce } from "../dates";
import { isInEu } from "../people/countries";

export type { IsoDay };

/** A period in which the studio is registered for VAT in a country; both days included, no end for "until further notice". */
export type VatRegistration = {
  readonly country: string;
  readonly number: string;
  readonly from: IsoDay;
  readonly to: IsoDay | null;
};

/** The rate for goods in general, and the reduced one that some countries have for the maker's own works of art. */
export type RateKind = "standard" | "reduced_art";

/** A rate and its period; both days included. `basisPoints` are hundredths of a per cent: 2000 is 20 %. */
export type TaxRate = {
  readonly country: string;
  readonly kind: RateKind;
  readonly basisPoints: number;
  readonly from: IsoDay;
  readonly to: IsoDay | null;
  /** Where the rate is laid down. */
  readonly source: string;
};

export type TaxTables = {
  readonly registrations: readonly VatRegistration[];
  readonly rates: readonly TaxRate[];
};

export type TaxLine = {
  readonly id: string;
  /** What the book asks, in minor units, home tax included. */
  readonly gross: number;
  readonly kind: "print" | "delivery" | "frame" | "mount";
  /** All copies of the picture are within the cap, signed and numbered. Looked at for prints alone. */
  readonly worksOfArt: boolean;
};

export type TaxQuery = {
  readonly homeCountry: string;
  readonly buyerCountry: string;
  readonly buyerKind: "consumer" | "business";
  /** The tax point, as a day in the studio's zone. */
  readonly at: IsoDay;
  readonly lines: readonly TaxLine[];
};

/** What was decided about a line, to be kept with it for good. `net + tax = gross`, always. */
export type TaxSnapshot = {
  readonly id: string;
  /** What the book asked, home tax included. */
  readonly listed: number;
  /** What the buyer pays: `listed`, less the home tax on an export. */
  readonly gross: number;
  readonly net: number;
  readonly tax: number;
  readonly basisPoints: number;
  /** Whose tax it is; null when none is charged because the studio is not registered. */
  readonly country: string | null;
  readonly kind: RateKind | "none";
  /** "unregistered" prints no tax line at all. */
  readonly treatment: "home" | "export" | "unregistered";
  /** For a document in English: "VAT 20%", "VAT 0% (export)", or "" when no tax is mentioned. */
  readonly label: string;
  /** Why it is so, for the studio. */
  readonly note: string;
  /** Where the rate is laid down; "" when there is none. */
  readonly source: string;
};

/** The studio is registered on a day for which its tables name no standard rate. The settings have to be put right. */
export class MissingTaxRate extends Error {
  override readonly name = "MissingTaxRate";
  constructor(country: string, at: IsoDay) {
    super(
      `The studio is registered for VAT in ${country} on ${at}, but its tables name no standard rate for that day.`,
    );
  }
}

/**
 * The tax inside a price, in minor units, ties away from zero: gross x rate / (100 % + rate).
 *
 * A retailer's inclusive prices may not be rounded down (VAT Notice 700 section 17.6; HMRC VATREC12020); rounding up and down to
 * the nearest penny is one of the ways allowed. It is done line by line, always, and the sum of the lines is the total.
 */
export function taxInside(gross: number, basisPoints: number): number {
  if (!Number.isSafeInteger(basisPoints) || basisPoints < 0) {
    throw new RangeError(`${basisPoints} is not a rate in basis points.`);
  }
  return Number(divideHalfUp(BigInt(gross) * BigInt(basisPoints), 10_000n + BigInt(basisPoints))) || 0;
}

/**
 * The tax on a net price, for invoices made out from net prices (never for the shop's own). `net` is a decimal text in major
 * units ("12.4275"), the result a decimal text: to the nearest hundredth, or to a tenth of a hundredth cut down.
 *
 * Source: VAT Notice 700 section 17.5; HMRC VATREC12010.
 */
export function taxOnNet(net: string, basisPoints: number, rounding: "nearest_0.01" | "down_0.001"): string {
  const match = /^(\d+)(?:\.(\d{1,12}))?$/.exec(net);
  if (match === null) throw new RangeError(`"${net}" is not a net price.`);
  const [, whole = "", decimals = ""] = match;
  const exact = BigInt(whole + decimals) * BigInt(basisPoints);
  const unit = 10n ** BigInt(decimals.length) * 10_000n;
  const places = rounding === "nearest_0.01" ? 2 : 3;
  const scaled = exact * 10n ** BigInt(places);
  const digits = String(rounding === "nearest_0.01" ? divideHalfUp(scaled, unit) : scaled / unit).padStart(
    places + 1,
    "0",
  );
  return `${digits.slice(0, -places)}.${digits.slice(-places)}`;
}

/** Places whose sales count as a neighbour's for VAT: the Isle of Man as the UK (VATA 1994 and the 1979 agreement), Monaco as France (Directive 2006/112/EC Art. 7). From memory. */
const COUNTS_AS: Readonly<Record<string, string>> = { IM: "GB", MC: "FR" };

function territory(country: string): string {
  const taxed = COUNTS_AS[country] ?? country;
  return isInEu(taxed) ? "EU" : taxed;
}

function rateInForce(tables: TaxTables, country: string, kind: RateKind, at: IsoDay): TaxRate | null {
  return tables.rates
    .filter((rate) => rate.country === country && rate.kind === kind && isInForce(rate, at))
    .reduce<TaxRate | null>(
      (latest, rate) => (latest === null || rate.from > latest.from ? rate : latest),
      null,
    );
}

/** Basis points as per cent without needless zeros: 2000 is "20", 550 is "5.5". */
export function percentText(basisPoints: number): string {
  const [whole, hundredths] = [Math.floor(basisPoints / 100), basisPoints % 100];
  return hundredths === 0
    ? String(whole)
    : `${whole}.${String(hundredths).padStart(2, "0").replace(/0$/, "")}`;
}

/**
 * Decides the tax of every line, and returns one snapshot for each, in their order.
 *
 * A print that is a work of art takes the reduced rate where the home country has one; frames and mounts sold beside it
 * never do. Delivery goes with the goods it carries (VAT Notice 700/24, from memory): it takes their rate, and the highest where
 * they have several. Throws MissingTaxRate when the studio is registered and the tables name no rate.
 */
export function taxFor(query: TaxQuery, tables: TaxTables): TaxSnapshot[] {
  const registration = tables.registrations.find(
    (one) => one.country === query.homeCountry && isInForce(one, query.at),
  );
  if (registration === undefined) return query.lines.map(unregistered);

  const standard = rateInForce(tables, query.homeCountry, "standard", query.at);
  if (standard === null) throw new MissingTaxRate(query.homeCountry, query.at);
  const reduced = rateInForce(tables, query.homeCountry, "reduced_art", query.at);
  const rateOfGoods = (line: TaxLine) =>
    line.kind === "print" && line.worksOfArt && reduced !== null ? reduced : standard;
  const goods = query.lines.filter((line) => line.kind !== "delivery").map(rateOfGoods);
  const rateOfDelivery = goods.reduce<TaxRate | null>(
    (highest, rate) => (highest === null || rate.basisPoints > highest.basisPoints ? rate : highest),
    null,
  );

  const treatment =
    territory(query.homeCountry) === territory(query.buyerCountry) ? ("home" as const) : ("export" as const);
  return query.lines.map((line) => {
    const rate = line.kind === "delivery" ? (rateOfDelivery ?? standard) : rateOfGoods(line);
    const inside = taxInside(line.gross, rate.basisPoints);
    const net = line.gross - inside;
    if (treatment === "export") {
      return {
        id: line.id,
        listed: line.gross,
        gross: net,
        net,
        tax: 0,
        basisPoints: 0,
        country: query.homeCountry,
        kind: rate.kind,
        treatment,
        label: "VAT 0% (export)",
        note: `Sent outside the VAT territory of ${query.homeCountry}: the home tax of ${percentText(rate.basisPoints)}% has been taken off the price.`,
        source: rate.source,
      };
    }
    return {
      id: line.id,
      listed: line.gross,
      gross: line.gross,
      net,
      tax: inside,
      basisPoints: rate.basisPoints,
      country: query.homeCountry,
      kind: rate.kind,
      treatment,
      label: `VAT ${percentText(rate.basisPoints)}%`,
      note: noteOf(query, line, rate),
      source: rate.source,
    };
  });
}

function unregistered(line: TaxLine): TaxSnapshot {
  return {
    id: line.id,
    listed: line.gross,
    gross: line.gross,
    net: line.gross,
    tax: 0,
    basisPoints: 0,
    country: null,
    kind: "none",
    treatment: "unregistered",
    label: "",
    note: "The studio was not registered for VAT on that day.",
    source: "",
  };
}

function noteOf(query: TaxQuery, line: TaxLine, rate: TaxRate): string {
  const what =
    line.kind === "delivery"
      ? "Delivery takes the rate of the goods it carries."
      : rate.kind === "reduced_art"
        ? "Reduced rate for the maker's own works of art."
        : "Standard rate.";
  if (territory(query.homeCountry) !== "EU" || query.homeCountry === query.buyerCountry) return what;
  return query.buyerKind === "consumer"
    ? `${what} Sold within the EU and taxed at home, under the threshold of Art. 59c of Directive 2006/112/EC.`
    : `${what} Sold to a business within the EU and taxed at home, since no VAT number of the buyer is recorded.`;
}

/** The figures of a credit: those of the line it takes back, below zero. */
export type TaxCredit = Pick<
  TaxSnapshot,
  "id" | "gross" | "net" | "tax" | "basisPoints" | "country" | "kind" | "treatment" | "label"
>;

/** A part of a line to be credited, and what earlier credits of the same line have taken back. All in minor units, above zero. */
export type CreditPart = {
  readonly gross: number;
  readonly credited?: { readonly gross: number; readonly tax: number };
};

/**
 * The credit of a line, from the figures kept with it and never from a rate: "whole" is exactly the line, negated. A part takes
 * its share of the line's tax, reckoned with all that has been credited before, so that parts which add up to the
 * line add up to its tax as well. Throws RangeError for a part that is not a whole amount above zero or is more than
 * is left.
 */
export function creditFor(snapshot: TaxSnapshot, part: "whole" | CreditPart): TaxCredit {
  const { id, basisPoints, country, kind, treatment, label } = snapshot;
  const figures = part === "whole" ? snapshot : partOf(snapshot, part);
  const back = (amount: number) => (amount === 0 ? 0 : -amount);
  return {
    id,
    basisPoints,
    country,
    kind,
    treatment,
    label,
    gross: back(figures.gross),
    net: back(figures.net),
    tax: back(figures.tax),
  };
}

function partOf(snapshot: TaxSnapshot, part: CreditPart): { gross: number; net: number; tax: number } {
  const before = part.credited ?? { gross: 0, tax: 0 };
  const through = before.gross + part.gross;
  if (!Number.isSafeInteger(part.gross) || part.gross <= 0 || through > snapshot.gross) {
    throw new RangeError(`${part.gross} is not a part of what is left of the line.`);
  }
  const taxThrough = Number(divideHalfUp(BigInt(snapshot.tax) * BigInt(through), BigInt(snapshot.gross)));
  const tax = taxThrough - before.tax;
  return { gross: part.gross, net: part.gross - tax, tax };
}
