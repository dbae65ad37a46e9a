import { href, Link } from "react-router";
import { EmptyState } from "~/components/ui/empty-state";
import { CopyNumber, Money } from "~/components/ui/money";
import { Table } from "~/components/ui/table";
import { Window } from "~/components/ui/window";
import { languageContext, signedInContext } from "~/context";
import { formatInstant } from "~/domain/dates";
import { ownOrders } from "~/domain/people/own-orders.server";
import { theStudio } from "~/domain/studio/studio.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, useMessages } from "~/languages/messages";
import { currencyCode, formatMoney } from "~/platform/money";
import type { Route } from "./+types/orders";

export async function loader({ context }: Route.LoaderArgs) {
  const own = context.get(signedInContext);
  const tag = LANGUAGE_TAG[context.get(languageContext)];
  const [orders, { zone }] = await Promise.all([ownOrders(own), theStudio()]);
  return {
    emailVerified: own.emailVerified,
    orders: orders.map(({ number, state, token, lines, createdAt, totalAmount, currency }) => ({
      number,
      state,
      token,
      lines,
      madeOn: formatInstant(createdAt, zone, tag),
      total: formatMoney({ amount: totalAmount, currency: currencyCode(currency) }, tag),
    })),
  };
}

export default function Orders({
  loaderData: { orders, emailVerified },
  params: { lang },
}: Route.ComponentProps) {
  const words = useMessages().account.orders;
  return (
    <div className="flow">
      <title>{words.title}</title>
      <h1>{words.title}</h1>
      {emailVerified ? null : <p className="quiet">{words.unverified}</p>}
      <Window>
        <Table
          caption={words.title}
          rows={orders}
          rowKey={(order) => order.number}
          empty={<EmptyState>{words.none}</EmptyState>}
          columns={[
            {
              key: "number",
              head: words.number,
              names: true,
              place: "main",
              cell: (order) => (
                <Link to={href("/:lang?/orders/:token", { lang, token: order.token })}>
                  {fill(words.order, { number: order.number })}
                </Link>
              ),
            },
            {
              key: "copies",
              head: words.copies,
              cell: (order) =>
                order.lines.map((line) => (
                  <div key={`${line.title} ${line.mark}`}>
                    <CopyNumber>{line.mark}</CopyNumber> {line.title}
                  </div>
                )),
            },
            { key: "date", head: words.date, cell: (order) => order.madeOn },
            { key: "state", head: words.state, cell: (order) => words.states[order.state] },
            {
              key: "total",
              head: words.total,
              numeric: true,
              place: "sum",
              cell: (order) => <Money>{order.total}</Money>,
            },
          ]}
        />
      </Window>
      <p>
        <Link to={href("/:lang?/account", { lang })}>{words.toAccount}</Link>
      </p>
    </div>
  );
}
