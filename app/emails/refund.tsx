import { orderAmount } from "~/components/shop/order-words";
import { orderAddress } from "~/domain/orders/links.server";
import { orderView } from "~/domain/orders/order-view.server";
import { fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailFacts, EmailLayout, EmailPress, EmailText } from "./layout";
import { marksOf } from "./order-facts.server";
import { emailStudio } from "./studio.server";

/** To the buyer, when money has gone back: how much, for what, and why. */
export const refund: EmailBuilder<"refund"> = async ({ orderId, refundId }, language) => {
  const order = await orderView(orderId);
  const found = order?.refunds.find((r) => r.id === refundId);
  if (order === null || found === undefined || found.state !== "succeeded") return null;
  const { refund: w, order: o } = messagesOf(language).emails;
  const { checkout } = messagesOf(language);
  const studio = await emailStudio();
  const amount = orderAmount(found.amount, order.currency, language);
  const values = { number: order.number, amount };
  const reasons: Record<string, string> = w.reasons;
  const reason = Object.hasOwn(reasons, found.reason) ? reasons[found.reason] : undefined;
  const line = order.lines.find((l) => l.id === found.orderLineId);
  const whole = found.amount === order.deliveryAmount && found.orderLineId === null;
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
        <EmailText>
          {fill({ card: w.text, transfer: w.textTransfer, cash: w.textCash }[found.method], values)}
        </EmailText>
        <EmailFacts
          items={[
            { term: o.number, detail: String(order.number) },
            {
              term: w.what,
              detail: line !== undefined ? marksOf([line]) : whole ? checkout.delivery : marksOf(order.lines),
            },
            ...(reason === undefined ? [] : [{ term: w.why, detail: reason }]),
            { term: w.amount, detail: amount, total: true },
          ]}
        />
        <EmailPress to={orderAddress(language, linkToken("order", order.tokenSeed))}>{o.press}</EmailPress>
      </EmailLayout>
    ),
  };
};
