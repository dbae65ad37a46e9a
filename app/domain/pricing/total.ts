/** Sums over the lines of an order, from the figures kept with them. */

import type { TaxSnapshot } from "./tax";

/** One row of the tax table on an invoice: what was taxed at one rate, and how much that came to. Minor units. */
export type TaxSum = {
  readonly basisPoints: number;
  readonly label: string;
  readonly net: number;
  readonly tax: number;
  readonly gross: number;
};

export type OrderTotal = {
  readonly gross: number;
  readonly net: number;
  readonly tax: number;
  /** By rate, the highest first; empty when the studio was not registered and no tax may be mentioned. */
  readonly byRate: readonly TaxSum[];
};

/** What a sum needs of a line; snapshots and credits have it. */
export type SummedLine = Pick<TaxSnapshot, "gross" | "net" | "tax" | "basisPoints" | "treatment" | "label">;

/** The totals of an order, an invoice or a credit. Adds up what the lines say and recomputes nothing. */
export function orderTotal(lines: readonly SummedLine[]): OrderTotal {
  const rows = new Map<string, TaxSum>();
  for (const line of lines) {
    if (line.treatment === "unregistered") continue;
    const row = rows.get(line.label) ?? {
      basisPoints: line.basisPoints,
      label: line.label,
      net: 0,
      tax: 0,
      gross: 0,
    };
    rows.set(line.label, {
      ...row,
      net: row.net + line.net,
      tax: row.tax + line.tax,
      gross: row.gross + line.gross,
    });
  }
  const sumOf = (key: "gross" | "net" | "tax") => lines.reduce((all, line) => all + line[key], 0);
  return {
    gross: sumOf("gross"),
    net: sumOf("net"),
    tax: sumOf("tax"),
    byRate: [...rows.values()].sort((a, b) => b.basisPoints - a.basisPoints),
  };
}
