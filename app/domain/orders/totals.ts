import { type IsoDay, type TaxSnapshot, type TaxTables, taxFor } from "~/domain/pricing/tax";
import { type DeliveryRate, quoteDelivery } from "~/domain/shipping/delivery";

/** What the totals of an order are computed from. Amounts are minor units of the studio's currency, home tax included. */
export type TotalsQuery = {
  homeCountry: string;
  /** Where the order goes: decides tax and delivery. */
  country: string;
  region?: string;
  /** Day in the studio's zone. */
  at: IsoDay;
  method: "delivery" | "collection";
  lines: {
    id: string;
    /** Ladder price less any reduction. */
    gross: number;
    worksOfArt: boolean;
    sheetWidthMm: number;
    sheetHeightMm: number;
    grams: number;
    pieces: number;
  }[];
};

export type PricedLine = { id: string; amount: number; net: number; tax: number; snapshot: TaxSnapshot };

export type Totals = {
  lines: PricedLine[];
  delivery:
    | {
        kind: "quoted";
        amount: number;
        net: number;
        tax: number;
        snapshot: TaxSnapshot;
        daysFrom: number;
        daysTo: number;
        packing: "flat" | "tube" | "collection";
        zone: string;
      }
    | { kind: "not_delivered"; reason: string };
  /** Lines and delivery together, tax included; delivery counts nothing while it is not possible. */
  total: number;
  tax: number;
};

/** Prices lines and delivery for a country: the one computation behind basket, checkout, order and studio. */
export function orderTotals(
  query: TotalsQuery,
  tables: { tax: TaxTables; delivery: DeliveryRate[] },
): Totals {
  const quote = quoteDelivery(
    {
      country: query.country,
      ...(query.region === undefined ? {} : { region: query.region }),
      at: query.at,
      method: query.method,
      pieces: query.lines.map((l) => ({
        widthMm: l.sheetWidthMm,
        heightMm: l.sheetHeightMm,
        grams: l.grams,
        rollable: true,
      })),
    },
    tables.delivery,
  );
  const deliveryGross = quote.kind === "quoted" ? quote.amount : 0;
  const DELIVERY = "delivery";
  const taxed = taxFor(
    {
      homeCountry: query.homeCountry,
      // What is collected changes hands at the studio: it is taxed there, wherever the buyer lives.
      buyerCountry: query.method === "collection" ? query.homeCountry : query.country,
      buyerKind: "consumer",
      at: query.at,
      lines: [
        ...query.lines.map((l) => ({
          id: l.id,
          gross: l.gross,
          kind: "print" as const,
          worksOfArt: l.worksOfArt,
        })),
        {
          id: DELIVERY,
          gross: deliveryGross,
          kind: "delivery" as const,
          worksOfArt: query.lines.every((l) => l.worksOfArt),
        },
      ],
    },
    tables.tax,
  );
  const of = (id: string): PricedLine => {
    const snapshot = taxed.find((t) => t.id === id);
    if (snapshot === undefined) throw new Error(`no tax for line ${id}`);
    return { id, amount: snapshot.net + snapshot.tax, net: snapshot.net, tax: snapshot.tax, snapshot };
  };
  const lines = query.lines.map((l) => of(l.id));
  const delivery = of(DELIVERY);
  const all = [...lines, delivery];
  return {
    lines,
    delivery:
      quote.kind === "quoted"
        ? {
            kind: "quoted",
            amount: delivery.amount,
            net: delivery.net,
            tax: delivery.tax,
            snapshot: delivery.snapshot,
            daysFrom: quote.days.from,
            daysTo: quote.days.to,
            packing: quote.packing,
            zone: quote.zone,
          }
        : quote,
    total: all.reduce((sum, l) => sum + l.amount, 0),
    tax: all.reduce((sum, l) => sum + l.tax, 0),
  };
}
