import { orderAmount } from "~/components/shop/order-words";
import { orderAddress } from "~/domain/orders/links.server";
import { orderView } from "~/domain/orders/order-view.server";
import { theStudio } from "~/domain/studio/studio.server";
import { count, fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailFacts, EmailLayout, EmailPress, EmailText } from "./layout";
import { EmailNumbers, marksOf, sumFacts } from "./order-facts.server";
import { emailStudio } from "./studio.server";

/** To the buyer, once the order is paid: the numbers that are theirs, the sums, and the link to the order's page. */
export const orderConfirmation: EmailBuilder<"order-confirmation"> = async ({ orderId }, language) => {
  const order = await orderView(orderId);
  if (order === null || order.paidAt === null) return null;
  const { orderConfirmation: w, order: o } = messagesOf(language).emails;
  const studio = await emailStudio();
  const { signature } = await theStudio();
  const total = orderAmount(order.totalAmount, order.currency, language);
  const bought = order.lines.filter((l) => l.state === "sold");
  const values = { number: order.number, total, marks: marksOf(bought.length > 0 ? bought : order.lines) };
  const address = order.deliveryAddress;
  return {
    subject: fill(w.subject, values),
    replyTo: studio.email,
    body: (
      <EmailLayout
        language={language}
        title={count(language, w.title, Math.max(1, bought.length))}
        preview={fill(w.preview, values)}
        studio={studio}
        reason={fill(o.reason, values)}
      >
        <EmailText>{fill(w.text, values)}</EmailText>
        <EmailNumbers lines={bought} signature={signature} />
        {order.lines
          .filter((l) => l.state === "offered")
          .map((line) => (
            <EmailText key={line.id}>{fill(w.offered, { mark: marksOf([line]) })}</EmailText>
          ))}
        {order.lines
          .filter((l) => l.state === "refunded")
          .map((line) => (
            <EmailText key={line.id}>{fill(w.refunded, { mark: marksOf([line]) })}</EmailText>
          ))}
        <EmailFacts
          items={[
            { term: o.number, detail: String(order.number) },
            ...(await sumFacts(order, language)),
            // In short: whoever reads over a shoulder need not learn the street.
            address === null
              ? { term: o.collected, detail: studio.address.join(", ") }
              : {
                  term: o.sentTo,
                  detail: [address.name, address.city, address.postcode].filter(Boolean).join(", "),
                },
          ]}
        />
        <EmailText>{order.deliveryMethod === "delivery" ? w.next : w.nextCollect}</EmailText>
        <EmailPress to={orderAddress(language, linkToken("order", order.tokenSeed))}>{o.press}</EmailPress>
        <EmailText quiet>{o.keep}</EmailText>
        <EmailText quiet>{w.withdrawal}</EmailText>
      </EmailLayout>
    ),
  };
};
