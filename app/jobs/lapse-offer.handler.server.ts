import { decideOffer, overdueOffers } from "~/domain/orders/offers.server";
import { lapseOffer } from "./lapse-offer.job";

export async function handle(data: unknown): Promise<void> {
  const { offerId } = lapseOffer.parse(data);
  const offer = (await overdueOffers()).find((o) => o.offerId === offerId);
  if (offer !== undefined) await decideOffer(offer.offerId, offer.orderId, "lapsed");
}
