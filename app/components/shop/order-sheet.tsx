import { price } from "~/components/shop/edition-view";
import { OrderSlip } from "~/components/shop/order-slip";
import { lineWords, orderSums } from "~/components/shop/order-words";
import { Window } from "~/components/ui/window";
import type { BuyersOrder } from "~/domain/orders/order-page.server";
import { useLanguage, useMessages } from "~/languages/messages";

/** The slip of an order that has been made: its numbers, and what it comes to. */
export function OrderedSlip({ order }: { order: BuyersOrder }) {
  const { checkout } = useMessages();
  const language = useLanguage();
  const shown = { language, currency: order.currency };
  return (
    <Window as="aside" pad="slip" labelledBy="slip">
      <h2 id="slip">{order.state === "awaiting_payment" ? checkout.slip : checkout.order.sums}</h2>
      <OrderSlip
        lines={order.lines.map((line) => ({
          key: line.id,
          picture: { proofs: line.proofs, width: line.sheet.width, height: line.sheet.height },
          number: line.mark,
          title: line.title,
          words: lineWords(line, language),
          sum: price(line.amount, shown),
        }))}
        sums={orderSums(
          {
            count: order.lines.length,
            lines: order.totalAmount - order.deliveryAmount,
            method: order.deliveryMethod,
            country: order.deliveryCountry,
            delivery: order.deliveryAmount,
            taxes: order.taxes,
            total: order.totalAmount,
          },
          shown,
        ).map((sum) =>
          sum.kind === "total" && order.state !== "awaiting_payment"
            ? { ...sum, label: checkout.order.totalTerm }
            : sum,
        )}
      />
    </Window>
  );
}
