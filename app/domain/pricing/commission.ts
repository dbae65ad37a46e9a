/** What a stockist keeps of a sale. */

import { divideHalfUp } from "~/platform/money";

export type CommissionTerms = {
  /** Hundredths of a per cent: 5000 is a half. */
  readonly basisPoints: number;
  /** Whether the share is reckoned on the price without its tax, or on the price as paid. The contract has to say. */
  readonly on: "net" | "gross";
};

/**
 * Splits a sale between stockist and maker, in minor units: the commission rounded half-up, the rest the maker's. `tax` is the
 * tax inside `gross`; on the net, it stays out of the split. Throws RangeError for a share outside 0 to 100 %.
 *
 * Half each is the general split, sometimes 60/40: R. Salter, memorandum to the House of Commons Culture, Media and Sport
 * Committee, 2005. The contract decides.
 */
export function commissionOn(
  sale: { readonly gross: number; readonly tax: number },
  terms: CommissionTerms,
): { commission: number; maker: number } {
  if (!Number.isSafeInteger(terms.basisPoints) || terms.basisPoints < 0 || terms.basisPoints > 10_000) {
    throw new RangeError(`${terms.basisPoints} is not a share in basis points.`);
  }
  const base = terms.on === "net" ? sale.gross - sale.tax : sale.gross;
  const commission = Number(divideHalfUp(BigInt(base) * BigInt(terms.basisPoints), 10_000n));
  return { commission, maker: base - commission };
}
