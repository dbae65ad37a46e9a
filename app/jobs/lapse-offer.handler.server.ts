import { decideOffer, overdueOffers } from "~/domain/orders/offers.server";
import { handle } from "./job";
import { lapseOfferJob } from "./lapse-offer.job";

export const handler = handle(lapseOfferJob, async ({ offerId }) => {
  const offer = (await overdueOffers()).find((o) => o.offerId === offerId);
  if (offer !== undefined) await decideOffer(offer.offerId, offer.orderId, "lapsed");
});
