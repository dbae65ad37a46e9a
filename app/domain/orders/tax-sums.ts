/** The tax inside an order, by rate, as its slip and its e-mails say it. */

export type TaxPart = {
  /** Minor units. */
  tax: number;
  snapshot: { treatment: string; basisPoints: number; label: string };
};

export type TaxSum = { label: string; treatment: string; basisPoints: number; tax: number };

/**
 * One sum for each rate, in the order met. Nothing at all where the studio was not registered: such an order says
 * nothing of tax. A rate of 0 % (an export) is kept, with nothing in it.
 */
export function taxSums(parts: readonly TaxPart[]): TaxSum[] {
  const sums = new Map<string, TaxSum>();
  for (const { tax, snapshot } of parts) {
    const { treatment, basisPoints, label } = snapshot;
    if (treatment === "unregistered") continue;
    const key = `${treatment} ${basisPoints} ${label}`;
    const sum = sums.get(key) ?? { label, treatment, basisPoints, tax: 0 };
    sums.set(key, { ...sum, tax: sum.tax + tax });
  }
  return [...sums.values()];
}
