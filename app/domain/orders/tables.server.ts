import type { Database } from "db/client.server";
import { deliveryRates, taxRates, vatRegistrations } from "db/schema/schema";
import type { TaxTables } from "~/domain/pricing/tax";
import type { DeliveryRate } from "~/domain/shipping/delivery";

/** The dated tables behind `taxFor` and `quoteDelivery`, as they stand. */
export async function loadPriceTables(db: Database): Promise<{ tax: TaxTables; delivery: DeliveryRate[] }> {
  const registrations = await db.select().from(vatRegistrations);
  const rates = await db.select().from(taxRates);
  const delivery = await db.select().from(deliveryRates);
  return {
    tax: {
      registrations: registrations.map((r) => ({
        country: r.country,
        number: r.number,
        from: r.validFrom,
        to: r.validTo,
      })),
      rates: rates.map((r) => ({
        country: r.country,
        kind: r.kind,
        basisPoints: r.basisPoints,
        from: r.validFrom,
        to: r.validTo,
        source: r.source,
      })),
    },
    delivery,
  };
}
