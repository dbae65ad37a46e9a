import { orderAddress } from "~/domain/orders/links.server";
import { orderView } from "~/domain/orders/order-view.server";
import { theStudio } from "~/domain/studio/studio.server";
import { count, fill, messagesOf } from "~/languages/messages";
import { linkToken } from "~/platform/ids.server";
import type { EmailBuilder } from "./built-email";
import { EmailFacts, EmailLayout, EmailPress, EmailText } from "./layout";
import { EmailNumbers } from "./order-facts.server";
import { emailStudio } from "./studio.server";

/** To the buyer, when the parcel has left: with whom, and by what reference it can be followed. */
export const dispatch: EmailBuilder<"dispatch"> = async ({ orderId, dispatchId }, language) => {
  const order = await orderView(orderId);
  const sent = order?.dispatches.find((d) => d.id === dispatchId);
  if (order === null || sent === undefined) return null;
  const { dispatch: w, order: o } = messagesOf(language).emails;
  const studio = await emailStudio();
  const { signature } = await theStudio();
  const lines = order.lines.filter((l) => l.state === "sold");
  const values = { number: order.number, carrier: sent.carrier };
  const { deliveryDaysFrom: from, deliveryDaysTo: to } = order;
  return {
    subject: fill(w.subject, values),
    replyTo: studio.email,
    body: (
      <EmailLayout
        language={language}
        title={count(language, w.title, Math.max(1, lines.length))}
        preview={fill(w.preview, values)}
        studio={studio}
        reason={fill(o.reason, values)}
      >
        <EmailText>{w.text}</EmailText>
        <EmailNumbers lines={lines} signature={signature} />
        <EmailFacts
          items={[
            { term: w.carrier, detail: sent.carrier },
            ...(sent.reference === "" ? [] : [{ term: w.reference, detail: sent.reference }]),
            ...(from === null || to === null
              ? []
              : [{ term: w.days, detail: fill(w.daysText, { from, to }) }]),
          ]}
        />
        <EmailText>{w.care}</EmailText>
        <EmailPress to={orderAddress(language, linkToken("order", order.tokenSeed))}>{o.press}</EmailPress>
      </EmailLayout>
    ),
  };
};
