import { href } from "react-router";
import { orderAmount } from "~/components/shop/order-words";
import { orderView } from "~/domain/orders/order-view.server";
import { countryName } from "~/domain/people/countries";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import type { EmailBuilder } from "./built-email";
import { EmailFacts, EmailLayout, EmailPress, EmailText } from "./layout";
import { marksOf } from "./order-facts.server";
import { emailStudio, pageAddress } from "./studio.server";

/** To the studio: what is to be printed. Who bought it stands behind the link, not in the post. */
export const newOrder: EmailBuilder<"new-order"> = async ({ orderId }, language) => {
  const order = await orderView(orderId);
  if (order === null) return null;
  const { newOrder: w, order: o } = messagesOf(language).emails;
  const studio = await emailStudio();
  const total = orderAmount(order.totalAmount, order.currency, language);
  const values = { number: order.number, total, marks: marksOf(order.lines) };
  const country = countryName(order.deliveryCountry, LANGUAGE_TAG[language]);
  return {
    subject: fill(w.subject, values),
    body: (
      <EmailLayout
        language={language}
        title={w.title}
        preview={fill(w.preview, values)}
        studio={studio}
        reason={w.reason}
      >
        <EmailText>{fill(w.text, values)}</EmailText>
        <EmailFacts
          items={[
            ...order.lines.map((line) => ({
              term: `${line.mark} ${line.title}`,
              detail: `${line.paper}, ${line.sheet.width} × ${line.sheet.height} mm`,
            })),
            {
              term: w.to,
              detail: { delivery: country, collection: w.collect, handed_over: w.handed }[
                order.deliveryMethod
              ],
            },
            { term: o.total, detail: total, total: true },
          ]}
        />
        {order.buyerNote === "" ? null : <EmailText>{w.note}</EmailText>}
        <EmailPress to={pageAddress(href("/studio/orders/:orderId", { orderId }))}>{w.press}</EmailPress>
      </EmailLayout>
    ),
  };
};
