import { price } from "~/components/shop/edition-view";
import { formatInstant } from "~/domain/dates";
import type { BuyersOrder } from "~/domain/orders/order-page.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";

/** Parcels on their way, or where it is to be collected. */
export function OrderWhere({ order }: { order: BuyersOrder }) {
  const { order: words } = useMessages().checkout;
  const tag = LANGUAGE_TAG[useLanguage()];
  const time = (at: Date) => formatInstant(at, order.studio.zone, tag);
  if (order.dispatches.length === 0) return <p>{words.stands[order.stands]}.</p>;
  return (
    <ul className="order-history">
      {order.dispatches.map((d) => (
        <li key={d.sentAt.getTime()}>
          {order.deliveryMethod === "delivery"
            ? fill(words.sentWith, { carrier: d.carrier, time: time(d.sentAt) })
            : fill(words.handedOver, { time: time(d.sentAt) })}
          {d.reference === "" ? null : (
            <>
              <br />
              {fill(words.reference, { reference: d.reference })}
            </>
          )}
          {d.deliveredAt === null || order.deliveryMethod !== "delivery" ? null : (
            <>
              <br />
              {fill(words.arrivedOn, { time: time(d.deliveredAt) })}
            </>
          )}
        </li>
      ))}
    </ul>
  );
}

function has<T extends object>(table: T, key: string): key is Extract<keyof T, string> {
  return Object.hasOwn(table, key);
}

/** Money that goes back, sum by sum, with its reason. Draws nothing when there is none. */
export function OrderRefunds({ order }: { order: BuyersOrder }) {
  const { order: words } = useMessages().checkout;
  const language = useLanguage();
  const tag = LANGUAGE_TAG[language];
  if (order.refunds.length === 0) return null;
  return (
    <>
      <h3>{words.refunds}</h3>
      <ul className="order-history">
        {order.refunds.map((refund) => (
          <li key={refund.id}>
            {has(words.refundReasons, refund.reason) ? `${words.refundReasons[refund.reason]}: ` : null}
            {fill(refund.done ? words.refundDone : words.refundPending, {
              amount: price(refund.amount, { language, currency: order.currency }),
              time: formatInstant(refund.at, order.studio.zone, tag),
            })}
          </li>
        ))}
      </ul>
    </>
  );
}

/** What happened, newest first; only what concerns the buyer. */
export function OrderHistory({ order }: { order: BuyersOrder }) {
  const { order: words } = useMessages().checkout;
  const language = useLanguage();
  const tag = LANGUAGE_TAG[language];
  return (
    <ul className="order-history">
      {order.history.map((event) =>
        has(words.history, event.kind) ? (
          <li key={event.id}>
            <time dateTime={event.at.toISOString()}>{formatInstant(event.at, order.studio.zone, tag)}</time>
            <br />
            {fill(words.history[event.kind], {
              number: event.number,
              carrier: event.carrier,
              amount:
                event.amount === null ? "" : price(event.amount, { language, currency: order.currency }),
            })}
          </li>
        ) : null,
      )}
    </ul>
  );
}
