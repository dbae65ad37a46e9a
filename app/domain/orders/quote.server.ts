import { db } from "db/client.server";
import { isoDayInZone } from "~/domain/dates";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { type FormatForSale, formatsForSale, priceOfFree } from "./for-sale.server";
import { loadPriceTables } from "./tables.server";
import { orderTotals, type Totals } from "./totals";

/** A basket line with the number it would get now. `problem` says why it cannot be ordered. */
export type QuotedLine = {
  /** Position in the basket, as text: one format may stand there twice. */
  id: string;
  format: FormatForSale;
  number: number | null;
  ladderAmount: number | null;
  problem: "none_free" | "not_for_sale" | null;
};

export type Quote = {
  currency: string;
  country: string;
  lines: QuotedLine[];
  /** Ids of formats that are no longer known at all. */
  unknown: string[];
  /** Totals of the lines that can be ordered; null when none can. */
  totals: Totals | null;
};

/**
 * What a basket would cost now, delivered to `country` or collected. Two lines of one edition get the next two
 * numbers, as they would at checkout. Nothing is held.
 */
export async function quoteBasket(basket: {
  formatIds: readonly string[];
  country: string;
  method: "delivery" | "collection";
}): Promise<Quote> {
  const at = now();
  const [studio, formats, tables] = await Promise.all([
    theStudio(),
    formatsForSale(db, basket.formatIds, at),
    loadPriceTables(db),
  ]);
  const known = new Map(formats.map((f) => [f.formatId, f]));
  const taken = new Map<string, number>();
  const lines = basket.formatIds.flatMap((formatId, position): QuotedLine[] => {
    const format = known.get(formatId);
    if (format === undefined) return [];
    const id = String(position);
    if (!format.onSale) return [{ id, format, number: null, ladderAmount: null, problem: "not_for_sale" }];
    const index = taken.get(format.editionId) ?? 0;
    taken.set(format.editionId, index + 1);
    const copy = format.free[index];
    const ladderAmount = copy === undefined ? null : priceOfFree(format, copy);
    if (copy === undefined || ladderAmount === null)
      return [{ id, format, number: null, ladderAmount: null, problem: "none_free" }];
    return [{ id, format, number: copy.number, ladderAmount, problem: null }];
  });
  const orderable = lines.flatMap((l) =>
    l.ladderAmount === null ? [] : [{ ...l, ladderAmount: l.ladderAmount }],
  );
  return {
    currency: studio.currency,
    country: basket.country,
    lines,
    unknown: basket.formatIds.filter((id) => !known.has(id)),
    totals:
      orderable.length === 0
        ? null
        : orderTotals(
            {
              homeCountry: studio.country,
              country: basket.country,
              at: isoDayInZone(at, studio.zone),
              method: basket.method,
              lines: orderable.map((l) => ({
                id: l.id,
                gross: l.ladderAmount,
                worksOfArt: l.format.worksOfArt,
                sheetWidthMm: l.format.sheetWidthMm,
                sheetHeightMm: l.format.sheetHeightMm,
                grams: l.format.grams,
                pieces: l.format.pictures,
              })),
            },
            tables,
          ),
  };
}
