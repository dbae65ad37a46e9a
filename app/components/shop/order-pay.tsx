import { Form, href, Link } from "react-router";
import { useBusy } from "~/components/form/use-busy";
import { price } from "~/components/shop/edition-view";
import { OrderHold } from "~/components/shop/order-hold";
import { OrderedSlip } from "~/components/shop/order-sheet";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { Window } from "~/components/ui/window";
import { formatInstant } from "~/domain/dates";
import type { BuyersOrder } from "~/domain/orders/order-page.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";

export type PayPageProps = {
  order: BuyersOrder;
  seenAt: Date;
  /** The hold has ended, or was given up. */
  over: boolean;
  /** Back from the payment page without having paid. */
  left: boolean;
  unavailable: boolean;
  /** Ladder prices the buyer had seen, minor units. */
  seen: number[];
  problem: "unavailable" | "not_yet" | null;
  token: string;
};

/** Between ordering and paying: the numbers are held, and one press leads on. */
export function PayPage(props: PayPageProps) {
  const { order, token } = props;
  const { pay } = useMessages().checkout;
  const language = useLanguage();
  const lang = segmentOf(language);
  const title = props.over ? (order.state === "cancelled" ? pay.cancelledTitle : pay.endedTitle) : pay.title;
  return (
    <>
      <title>{title}</title>
      <meta name="robots" content="noindex, nofollow" />
      <meta name="referrer" content="no-referrer" />
      <div className="counter">
        <Window>
          <div className="flow">
            <h1>{title}</h1>
            <p className="lead">{order.lines.map((line) => `${line.mark} ${line.title}`).join(", ")}</p>
            {props.over ? <Over order={order} /> : <Held {...props} />}
            <p>
              <Link to={href("/:lang?/orders/:token", { lang, token })}>{pay.toOrder}</Link>
            </p>
          </div>
        </Window>
        <OrderedSlip order={order} />
      </div>
    </>
  );
}

function Over({ order }: { order: BuyersOrder }) {
  const { pay } = useMessages().checkout;
  return (
    <>
      <p>{order.state === "cancelled" ? pay.cancelledText : pay.endedText}</p>
      <Form method="post">
        <Press name="intent" value="refill">
          {pay.refill}
        </Press>
      </Form>
      <p className="note">{pay.refillText}</p>
    </>
  );
}

function Held({ order, seenAt, left, unavailable, seen, problem }: PayPageProps) {
  const { pay } = useMessages().checkout;
  const language = useLanguage();
  const paying = useBusy("pay");
  const accepting = useBusy("accept");
  const total = price(order.totalAmount, { language, currency: order.currency });
  const silent = problem === "unavailable" || (unavailable && problem === null);
  const until =
    order.holdUntil === null
      ? null
      : formatInstant(order.holdUntil, order.studio.zone, LANGUAGE_TAG[language]);
  return (
    <>
      {silent ? (
        <Notice kind="attention" title={pay.unavailableTitle} role="alert">
          <p>{until === null ? pay.unavailableNoEnd : fill(pay.unavailableText, { time: until })}</p>
        </Notice>
      ) : null}
      {problem === "not_yet" ? (
        <Notice kind="attention" title={pay.notYetTitle} role="alert">
          <p>{pay.notYetText}</p>
        </Notice>
      ) : null}
      {left && !silent && problem === null ? (
        <Notice kind="note" title={pay.leftTitle}>
          <p>{pay.leftText}</p>
        </Notice>
      ) : null}
      {order.holdUntil === null ? (
        <p>{pay.untilPaid}</p>
      ) : (
        <OrderHold until={order.holdUntil} from={order.createdAt} seenAt={seenAt} zone={order.studio.zone} />
      )}
      {order.pricesToAccept ? <Prices order={order} seen={seen} /> : null}
      <Form method="post" className="flow">
        {order.pricesToAccept ? (
          <Press name="intent" value="accept" busy={accepting}>
            {fill(pay.priceYes, { total })}
          </Press>
        ) : (
          <Press name="intent" value="pay" busy={paying}>
            {fill(silent ? pay.tryAgain : pay.press, { total })}
          </Press>
        )}
        <p className="note">{pay.pressText}</p>
      </Form>
      <Form method="post" className="flow">
        <Press variant="outlined" name="intent" value="give-up">
          {order.pricesToAccept ? pay.priceNo : pay.giveUp}
        </Press>
        <p className="note">{pay.giveUpText}</p>
      </Form>
    </>
  );
}

/** The prices of the numbers that are held, beside those that were seen. */
function Prices({ order, seen }: { order: BuyersOrder; seen: number[] }) {
  const { pay } = useMessages().checkout;
  const language = useLanguage();
  const shown = { language, currency: order.currency };
  return (
    <Notice kind="attention" title={pay.pricesTitle}>
      <p>{pay.pricesText}</p>
      <ul>
        {order.lines.map((line, at) => {
          const old = seen[at];
          if (old !== undefined && old >= line.ladderAmount) return null;
          return (
            <li key={line.id}>
              {fill(old === undefined ? pay.priceIs : pay.priceWas, {
                title: line.title,
                mark: line.mark,
                old: old === undefined ? "" : price(old, shown),
                new: price(line.ladderAmount, shown),
              })}
            </li>
          );
        })}
      </ul>
    </Notice>
  );
}
