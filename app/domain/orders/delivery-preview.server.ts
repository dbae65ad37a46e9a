import { quoteBasket } from "./quote.server";

/** What delivery of one copy in a format costs to a country now, and what the copy's price is there. */
export async function previewDelivery(formatId: string, country: string) {
  const quote = await quoteBasket({ formatIds: [formatId], country, method: "delivery" });
  const [line] = quote.lines;
  const [priced] = quote.totals?.lines ?? [];
  const delivery = quote.totals?.delivery;
  return {
    delivery:
      delivery?.kind === "quoted"
        ? { amount: delivery.amount, daysFrom: delivery.daysFrom, daysTo: delivery.daysTo }
        : null,
    /** Minor units; null when nothing is free, or the listed price holds there too. */
    amountThere:
      priced !== undefined && line?.ladderAmount != null && priced.amount !== line.ladderAmount
        ? priced.amount
        : null,
  };
}
