import { Form } from "react-router";
import { Wrong } from "~/components/form/field-frame";
import { price } from "~/components/shop/edition-view";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { formatInstant } from "~/domain/dates";
import type { BuyersOrder } from "~/domain/orders/order-page.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";
import type { FormProblem } from "~/platform/form-fields";

/** Numbers offered in place of ones that had gone, each to be taken or declined. */
export function OrderOffers({ order, problem }: { order: BuyersOrder; problem: FormProblem | undefined }) {
  const { order: words } = useMessages().checkout;
  const language = useLanguage();
  const shown = { language, currency: order.currency };
  const wrong = problem?.errors.offer?.[0];
  return (
    <>
      {wrong === undefined ? null : <Wrong>{wrong}</Wrong>}
      {order.offers.map((offer) => {
        const number = offer.mark;
        const difference = offer.paid - offer.amount;
        return (
          <Notice kind="attention" title={words.offerTitle} key={offer.offerId}>
            <p>
              {fill(words.offerText, {
                was: offer.was,
                title: offer.title,
                number,
                time: formatInstant(offer.until, order.studio.zone, LANGUAGE_TAG[language]),
              })}{" "}
              {difference > 0
                ? fill(words.offerLess, {
                    price: price(offer.amount, shown),
                    difference: price(difference, shown),
                  })
                : words.offerSame}
            </p>
            <Form method="post" className="acts">
              <input type="hidden" name="offer" value={offer.offerId} />
              <Press name="intent" value="accept">
                {fill(words.offerAccept, { number })}
              </Press>
              <Press variant="outlined" name="intent" value="decline">
                {fill(words.offerDecline, { amount: price(offer.paid, shown) })}
              </Press>
            </Form>
          </Notice>
        );
      })}
    </>
  );
}
