import { useEffect, useState } from "react";
import { href, Link, useLocation, useRevalidator } from "react-router";
import { OrderBuyer } from "~/components/shop/order-buyer";
import { OrderOffers } from "~/components/shop/order-offers";
import { OrderHistory, OrderRefunds, OrderWhere } from "~/components/shop/order-parts";
import { OrderedSlip } from "~/components/shop/order-sheet";
import { MarginLine } from "~/components/ui/margin-line";
import { Notice } from "~/components/ui/notice";
import { Picture } from "~/components/ui/picture";
import { PressLink } from "~/components/ui/press";
import { Part, Window } from "~/components/ui/window";
import { formatInstant } from "~/domain/dates";
import type { BuyersOrder } from "~/domain/orders/order-page.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";
import type { FormProblem } from "~/platform/form-fields";

export type OrderPageProps = {
  order: BuyersOrder;
  /** The payment service has not told us of the payment yet. */
  hearing: boolean;
  corrected: boolean;
  signedIn: boolean;
  seenAt: Date;
  problem: FormProblem | undefined;
  token: string;
};

/** Everything its buyer may know of an order. */
export function OrderPage({ order, hearing, corrected, signedIn, problem, token }: OrderPageProps) {
  const { order: words } = useMessages().checkout;
  const lang = segmentOf(useLanguage());
  const title = fill(words.title, { number: order.number });
  const sold = order.lines.filter((l) => l.state === "sold");
  return (
    <>
      <title>{title}</title>
      <meta name="robots" content="noindex, nofollow" />
      <meta name="referrer" content="no-referrer" />
      <div className="counter">
        <Window>
          <div className="flow">
            <h1>{title}</h1>
            <p className="order-stands" role="status">
              {standsWords(order, words)}
            </p>
            {hearing ? <Hearing /> : null}
            {corrected && order.buyer?.email ? (
              <Notice kind="done" title={fill(words.corrected, { email: order.buyer.email })} role="status" />
            ) : null}
            {order.state === "paid" && sold.length === order.lines.length ? <p>{words.thanks}</p> : null}
            {order.state === "awaiting_payment" && !hearing ? <ToPay order={order} token={token} /> : null}
            <OrderOffers order={order} problem={problem} />
            <h2>{words.yourNumbers}</h2>
            <ul className="order-copies">
              {order.lines.map((line) => (
                <Copy key={line.id} line={line} signature={order.studio.signature} />
              ))}
            </ul>
            <p className="note">{words.keep}</p>
          </div>
        </Window>
        <OrderedSlip order={order} />
      </div>
      <Window labelledBy="where">
        <Part headingId="where" title={words.where}>
          <div className="flow">
            <OrderWhere order={order} />
            <OrderRefunds order={order} />
          </div>
        </Part>
      </Window>
      <Window labelledBy="buyer">
        <Part headingId="buyer" title={words.buyer}>
          <OrderBuyer order={order} problem={problem} />
        </Part>
      </Window>
      <Window labelledBy="history">
        <Part headingId="history" title={words.historyTitle}>
          <OrderHistory order={order} />
        </Part>
      </Window>
      {order.state === "paid" && order.access === "paid" && !signedIn ? (
        <Window labelledBy="account">
          <Part headingId="account" title={words.accountTitle} intro={words.accountText}>
            <PressLink to={href("/:lang?/sign-up", { lang })}>{words.accountPress}</PressLink>
          </Part>
        </Window>
      ) : null}
    </>
  );
}

function standsWords(
  order: BuyersOrder,
  words: {
    stands: Record<BuyersOrder["stands"], string>;
    standsCollect: string;
    standsHanded: string;
  },
): string {
  const inPerson = order.deliveryMethod !== "delivery";
  if (inPerson && order.stands === "signed") return words.standsCollect;
  if (inPerson && (order.stands === "arrived" || order.stands === "sent")) return words.standsHanded;
  return words.stands[order.stands];
}

/** One number, drawn with its margin line. */
function Copy({ line, signature }: { line: BuyersOrder["lines"][number]; signature: string }) {
  const { order: words } = useMessages().checkout;
  const lang = segmentOf(useLanguage());
  return (
    <li className="order-copy">
      <div className="sheet">
        {line.proofs.length === 0 ? null : (
          <Picture proofs={line.proofs} alt="" sizes="(min-width: 62rem) 22rem, 80vw" />
        )}
        <MarginLine
          number={line.mark}
          title={line.title}
          signature={`${signature} ${line.year ?? ""}`.trim()}
        />
      </div>
      <p>
        {words.lineState[line.state]}
        {line.checkCode === null ? null : (
          <>
            {" "}
            {words.checkCode} <span className="fig nowrap">{line.checkCode}</span>.{" "}
            <Link to={href("/:lang?/check/:code", { lang, code: line.checkCode })}>
              {fill(words.checkLink, { mark: line.mark })}
            </Link>
          </>
        )}
      </p>
    </li>
  );
}

function ToPay({ order, token }: { order: BuyersOrder; token: string }) {
  const { order: words } = useMessages().checkout;
  const language = useLanguage();
  return (
    <>
      <p>
        {order.holdUntil === null
          ? words.payOpen
          : fill(words.payText, {
              time: formatInstant(order.holdUntil, order.studio.zone, LANGUAGE_TAG[language]),
            })}
      </p>
      <p>
        <PressLink
          variant="filled"
          to={href("/:lang?/orders/:token/pay", { lang: segmentOf(language), token })}
        >
          {words.payNow}
        </PressLink>
      </p>
    </>
  );
}

const LOOK_EVERY = 2_000;
/** After so many looks the page stops asking by itself; the confirmation comes by e-mail in any case. */
const MOST_LOOKS = 60;

/** Looks again by itself: with script every two seconds, without by reloading. */
function Hearing() {
  const { order: words } = useMessages().checkout;
  const { revalidate, state } = useRevalidator();
  const { pathname, search } = useLocation();
  const [looks, setLooks] = useState(0);
  const waiting = state === "idle" && looks < MOST_LOOKS;
  useEffect(() => {
    if (!waiting) return;
    const timer = setTimeout(() => {
      setLooks((n) => n + 1);
      void revalidate();
    }, LOOK_EVERY);
    return () => clearTimeout(timer);
  }, [waiting, revalidate]);
  return (
    <Notice kind="note" title={words.hearingTitle} role="status">
      <p>{looks < MOST_LOOKS ? words.hearingText : words.hearingLong}</p>
      <p>
        <Link to={pathname + search} reloadDocument>
          {words.hearingReload}
        </Link>
      </p>
    </Notice>
  );
}
