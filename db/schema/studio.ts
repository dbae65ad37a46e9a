import { sql } from "drizzle-orm";
import {
  bigint,
  boolean,
  check,
  date,
  doublePrecision,
  integer,
  pgEnum,
  pgTable,
  text,
} from "drizzle-orm/pg-core";
import { id, recordedAt } from "./columns";

export const taxKind = pgEnum("tax_kind", ["standard", "reduced_art"]);

/** The studio's own list of papers. White point and density are as measured by the studio. */
export const papers = pgTable(
  "papers",
  {
    id: id(),
    name: text().notNull(),
    base: text().notNull().default(""),
    surface: text().notNull().default(""),
    grammage: integer().notNull(),
    description: text().notNull().default(""),
    /** CIELAB, D50. */
    whiteL: doublePrecision(),
    whiteA: doublePrecision(),
    whiteB: doublePrecision(),
    maximumDensity: doublePrecision(),
    measured: boolean().notNull().default(false),
    retired: boolean().notNull().default(false),
    position: integer().notNull().default(0),
    createdAt: recordedAt(),
  },
  (t) => [check("paper_grammage", sql`${t.grammage} between 20 and 2000`)],
);

/** When, if at all, the studio is registered for VAT, as dated periods (days in the studio's zone). */
export const vatRegistrations = pgTable("vat_registrations", {
  id: id(),
  country: text().notNull(),
  number: text().notNull(),
  validFrom: date({ mode: "string" }).notNull(),
  validTo: date({ mode: "string" }),
});

export const taxRates = pgTable("tax_rates", {
  id: id(),
  country: text().notNull(),
  kind: taxKind().notNull(),
  basisPoints: integer().notNull(),
  validFrom: date({ mode: "string" }).notNull(),
  validTo: date({ mode: "string" }),
  source: text().notNull(),
});

/** The studio's own delivery prices: the first row of a zone whose weight limit is not exceeded applies. */
export const deliveryRates = pgTable(
  "delivery_rates",
  {
    id: id(),
    zone: text().notNull(),
    /** ISO 3166-1 alpha-2 codes; `*` stands for everywhere else. */
    countries: text().array().notNull(),
    upToGrams: integer().notNull(),
    amount: bigint({ mode: "number" }).notNull(),
    currency: text().notNull(),
    daysFrom: integer().notNull(),
    daysTo: integer().notNull(),
    validFrom: date({ mode: "string" }).notNull(),
    validTo: date({ mode: "string" }),
    example: boolean().notNull().default(false),
  },
  (t) => [
    check("delivery_days", sql`${t.daysFrom} between 0 and ${t.daysTo}`),
    check("delivery_amount", sql`${t.amount} >= 0`),
  ],
);
