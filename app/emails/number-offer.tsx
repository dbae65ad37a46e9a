import { orderAmount } from "~/components/shop/order-words";
import { formatInstant } from "~/domain/dates";
import { orderAddress } from "~/domain/orders/links.server";
import { offersOf } from "~/domain/orders/order-page.server";
import { orderView } from "~/domain/orders/order-view.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailFacts, EmailLayout, EmailMarginLine, EmailPress, EmailText } from "./layout";
import { emailStudio } from "./studio.server";

/** To a buyer whose payment came for a number that had gone: another one, until when, and what each answer means. */
export const numberOffer: EmailBuilder<"number-offer"> = async ({ orderId, offerId }, language) => {
  const order = await orderView(orderId);
  if (order === null) return null;
  const offer = (await offersOf(order)).find((o) => o.offerId === offerId);
  // Answered meanwhile, or run out: a letter about it would only confuse.
  if (offer === undefined) return null;
  const { numberOffer: w, order: o } = messagesOf(language).emails;
  const studio = await emailStudio();
  const { zone, signature } = await theStudio();
  const amount = (sum: number) => orderAmount(sum, order.currency, language);
  const year = order.lines.find((l) => l.title === offer.title)?.year ?? "";
  const values = {
    number: order.number,
    was: offer.was,
    title: offer.title,
    mark: offer.mark,
    time: formatInstant(offer.until, zone, LANGUAGE_TAG[language]),
  };
  return {
    subject: fill(w.subject, values),
    replyTo: studio.email,
    body: (
      <EmailLayout
        language={language}
        title={w.title}
        preview={fill(w.preview, values)}
        studio={studio}
        reason={fill(o.reason, values)}
      >
        <EmailText>{fill(w.text, values)}</EmailText>
        <EmailMarginLine number={offer.mark} title={offer.title} signature={`${signature} ${year}`.trim()} />
        <EmailFacts
          items={[
            { term: w.paid, detail: amount(offer.paid) },
            { term: w.price, detail: amount(offer.amount) },
            ...(offer.amount < offer.paid
              ? [{ term: w.back, detail: amount(offer.paid - offer.amount), total: true }]
              : []),
          ]}
        />
        <EmailText>{w.choose}</EmailText>
        <EmailPress to={orderAddress(language, linkToken("order", order.tokenSeed))}>{w.press}</EmailPress>
      </EmailLayout>
    ),
  };
};
