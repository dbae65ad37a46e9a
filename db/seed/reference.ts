import { EU_MEMBERS } from "~/domain/people/countries";
import { newId } from "~/platform/ids.server";
import { minorUnits } from "~/platform/money";
import type { Tx } from "../client.server";
import { deliveryRates, papers, taxRates } from "../schema/schema";

/*
 * The tables a new studio begins with: made by /setup and by the demo's seed. They are a start, not advice: rates
 * change with every budget, and the studio looks them up before it relies on them.
 */

type Rate = {
  country: string;
  kind: "standard" | "reduced_art";
  basisPoints: number;
  from: string;
  to?: string;
  source: string;
};

/**
 * Rates of value added tax, by the law that sets them. All from memory of those laws unless marked; a studio asks its
 * accountant. Countries that are not here are asked for their rate at set-up.
 */
export const TAX_RATES: readonly Rate[] = [
  {
    country: "GB",
    kind: "standard",
    basisPoints: 2000,
    from: "2011-01-04",
    source: "Value Added Tax Act 1994 s. 2(1), as amended by Finance (No. 2) Act 2010 s. 3",
  },
  {
    country: "DE",
    kind: "standard",
    basisPoints: 1900,
    from: "2007-01-01",
    to: "2020-06-30",
    source: "UStG § 12 Abs. 1, Haushaltsbegleitgesetz 2006",
  },
  {
    country: "DE",
    kind: "standard",
    basisPoints: 1600,
    from: "2020-07-01",
    to: "2020-12-31",
    source: "UStG § 28 Abs. 1, Zweites Corona-Steuerhilfegesetz 2020",
  },
  { country: "DE", kind: "standard", basisPoints: 1900, from: "2021-01-01", source: "UStG § 12 Abs. 1" },
  {
    country: "DE",
    kind: "reduced_art",
    basisPoints: 700,
    from: "2025-01-01",
    source: "UStG § 12 Abs. 2, Jahressteuergesetz 2024",
  },
  { country: "FR", kind: "standard", basisPoints: 2000, from: "2014-01-01", source: "CGI art. 278" },
  { country: "FR", kind: "reduced_art", basisPoints: 550, from: "2014-01-01", source: "CGI art. 278-0 bis" },
  {
    country: "IE",
    kind: "standard",
    basisPoints: 2300,
    from: "2021-03-01",
    source: "Value-Added Tax Consolidation Act 2010 s. 46",
  },
  {
    country: "NL",
    kind: "standard",
    basisPoints: 2100,
    from: "2012-10-01",
    source: "Wet op de omzetbelasting 1968 art. 9",
  },
  { country: "BE", kind: "standard", basisPoints: 2100, from: "1996-01-01", source: "KB nr. 20 art. 1" },
  { country: "AT", kind: "standard", basisPoints: 2000, from: "1995-01-01", source: "UStG 1994 § 10 Abs. 1" },
  { country: "ES", kind: "standard", basisPoints: 2100, from: "2012-09-01", source: "Ley 37/1992 art. 90" },
  { country: "IT", kind: "standard", basisPoints: 2200, from: "2013-10-01", source: "DPR 633/1972 art. 16" },
  {
    country: "SE",
    kind: "standard",
    basisPoints: 2500,
    from: "2024-01-01",
    source: "Mervärdesskattelag (2023:200)",
  },
];

/** Whether the tables know a standard rate of a country that is in force on a day. */
export function knowsStandardRate(country: string, day: string): boolean {
  return TAX_RATES.some(
    (rate) =>
      rate.country === country &&
      rate.kind === "standard" &&
      rate.from <= day &&
      (rate.to === undefined || day <= rate.to),
  );
}

/** Weights and surfaces as they are common in the trade; names are descriptions, not products. Nothing is measured yet. */
const PAPERS = [
  {
    name: "Smooth cotton",
    base: "cotton rag",
    surface: "smooth, matt",
    grammage: 310,
    description: "Without brighteners. For pigment prints with quiet blacks.",
  },
  {
    name: "Baryta gloss",
    base: "alpha cellulose with baryta",
    surface: "gloss, air-dried",
    grammage: 315,
    description: "For pigment prints with deep blacks.",
  },
  {
    name: "Fibre-based silver gelatin",
    base: "fibre",
    surface: "gloss, air-dried",
    grammage: 255,
    description: "For prints made in the darkroom.",
  },
];

/** Examples in whole currency units, to be replaced by what the studio's carriers ask. */
const DELIVERY = {
  home: [
    { upToGrams: 2_000, units: 12, days: [2, 4] },
    { upToGrams: 10_000, units: 22, days: [2, 4] },
  ],
  near: [
    { upToGrams: 2_000, units: 24, days: [4, 9] },
    { upToGrams: 10_000, units: 46, days: [4, 9] },
  ],
  far: [
    { upToGrams: 2_000, units: 42, days: [7, 18] },
    { upToGrams: 10_000, units: 88, days: [7, 18] },
  ],
} as const;

const NEIGHBOURS = ["CH", "GB", "IS", "LI", "NO"];

function zones(country: string) {
  const near = [...EU_MEMBERS, ...NEIGHBOURS].filter((code) => code !== country).sort();
  return [
    { zone: "At home", countries: [country], rows: DELIVERY.home },
    ...(EU_MEMBERS.has(country) || NEIGHBOURS.includes(country)
      ? [{ zone: "Europe", countries: near, rows: DELIVERY.near }]
      : []),
    { zone: "Everywhere else", countries: ["*"], rows: DELIVERY.far },
  ];
}

/**
 * Inserts tax rates, delivery prices (marked as examples) and papers. Part of the caller's transaction.
 *
 * @param from first day of the delivery prices, in the studio's zone.
 */
export async function insertReference(
  tx: Tx,
  { country, currency, from }: { country: string; currency: string; from: string },
): Promise<void> {
  await tx.db.insert(taxRates).values(
    TAX_RATES.map(({ from: validFrom, to, ...rate }) => ({
      id: newId(),
      validFrom,
      validTo: to ?? null,
      ...rate,
    })),
  );
  // Where the unit of the currency is a small coin, the examples would be absurd; its hundredfold is near enough.
  const unit = minorUnits(currency) === 0 ? 100 : 10 ** minorUnits(currency);
  await tx.db.insert(deliveryRates).values(
    zones(country).flatMap(({ zone, countries, rows }) =>
      rows.map(({ upToGrams, units, days: [daysFrom, daysTo] }) => ({
        id: newId(),
        zone,
        countries,
        upToGrams,
        amount: units * unit,
        currency,
        daysFrom,
        daysTo,
        validFrom: from,
        example: true,
      })),
    ),
  );
  await tx.db
    .insert(papers)
    .values(PAPERS.map((paper, position) => ({ id: newId(), position, measured: false, ...paper })));
}
