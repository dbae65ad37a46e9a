import { deliveryName, numberOfCopies, orderAmount, taxName } from "~/components/shop/order-words";
import { taxesOf } from "~/domain/orders/order-page.server";
import type { OrderView } from "~/domain/orders/order-view.server";
import type { Language } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";
import { EmailMarginLine } from "./layout";

type Line = OrderView["lines"][number];

/** "7/25 Pell Wood, 2/15 Hag Down" */
export function marksOf(lines: readonly Pick<Line, "mark" | "title">[]): string {
  return lines.map((line) => `${line.mark} ${line.title}`).join(", ");
}

/** The lines as prints are signed: number, title, signature and year. */
export function EmailNumbers({ lines, signature }: { lines: readonly Line[]; signature: string }) {
  return lines.map((line) => (
    <EmailMarginLine
      key={line.id}
      number={line.mark}
      title={line.title}
      signature={`${signature} ${line.year ?? ""}`.trim()}
    />
  ));
}

/** The sums of an order as terms: prints, delivery, tax inside, total. */
export async function sumFacts(order: OrderView, language: Language) {
  const { order: w } = messagesOf(language).emails;
  const amount = (sum: number) => orderAmount(sum, order.currency, language);
  return [
    {
      term: numberOfCopies(order.lines.length, language),
      detail: amount(order.totalAmount - order.deliveryAmount),
    },
    {
      term: deliveryName(order.deliveryMethod, order.deliveryCountry, language),
      detail: amount(order.deliveryAmount),
    },
    ...(await taxesOf(order)).map((tax) => ({
      term: fill(w.taxIncluded, { label: taxName(tax, language) }),
      detail: amount(tax.tax),
    })),
    { term: w.total, detail: amount(order.totalAmount), total: true },
  ];
}
