import { href } from "react-router";
import { orderAmount } from "~/components/shop/order-words";
import { formatInstant } from "~/domain/dates";
import { orderView } from "~/domain/orders/order-view.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailFacts, EmailLayout, EmailPress, EmailText } from "./layout";
import { EmailNumbers, sumFacts } from "./order-facts.server";
import { emailStudio, pageAddress } from "./studio.server";

/** To a buyer for whom the studio has made an order: the numbers, the sums, until when, and where to pay. */
export const payLink: EmailBuilder<"pay-link"> = async ({ orderId }, language) => {
  const order = await orderView(orderId);
  if (order === null || order.state !== "awaiting_payment") return null;
  const { payLink: w, order: o } = messagesOf(language).emails;
  const studio = await emailStudio();
  const { zone, signature } = await theStudio();
  const time = order.holdUntil === null ? null : formatInstant(order.holdUntil, zone, LANGUAGE_TAG[language]);
  const values = {
    number: order.number,
    studio: studio.name,
    total: orderAmount(order.totalAmount, order.currency, language),
    time: time ?? "",
  };
  const token = linkToken("order", order.tokenSeed);
  return {
    subject: fill(w.subject, values),
    replyTo: studio.email,
    body: (
      <EmailLayout
        language={language}
        title={w.title}
        preview={fill(time === null ? w.previewOpen : w.preview, values)}
        studio={studio}
        reason={fill(w.reason, values)}
      >
        <EmailText>{fill(time === null ? w.textOpen : w.text, values)}</EmailText>
        <EmailNumbers lines={order.lines} signature={signature} />
        <EmailFacts
          items={[{ term: o.number, detail: String(order.number) }, ...(await sumFacts(order, language))]}
        />
        <EmailPress to={pageAddress(href("/:lang?/orders/:token/pay", { lang: segmentOf(language), token }))}>
          {fill(w.press, values)}
        </EmailPress>
        <EmailText quiet>{w.after}</EmailText>
      </EmailLayout>
    ),
  };
};
