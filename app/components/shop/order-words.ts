import { price, type Shown } from "~/components/shop/edition-view";
import type { SlipSum } from "~/components/shop/order-slip";
import type { TaxSum } from "~/domain/orders/tax-sums";
import type { Address } from "~/domain/people/address";
import { countryName } from "~/domain/people/countries";
import { LANGUAGE_TAG, type Language } from "~/languages/language";
import { count, fill, messagesOf } from "~/languages/messages";
import { currencyCode, formatMoney } from "~/platform/money";

type Money = Pick<Shown, "language" | "currency">;

/** "VAT 20%", "MwSt. 20 %", "VAT 0% (export)" */
export function taxName(tax: TaxSum, language: Language): string {
  const { checkout } = messagesOf(language);
  if (tax.treatment === "export") return checkout.exportTax;
  const rate = new Intl.NumberFormat(LANGUAGE_TAG[language], {
    style: "percent",
    maximumFractionDigits: 2,
  }).format(tax.basisPoints / 10_000);
  return fill(checkout.taxName, { rate });
}

/** "Delivery to Norway", "Collected at the studio" */
export function deliveryName(method: string, country: string, language: Language): string {
  const { checkout } = messagesOf(language);
  return method === "delivery"
    ? fill(checkout.deliveryTo, { country: countryName(country, LANGUAGE_TAG[language]) })
    : checkout.collected;
}

/** The sums of an order: its prints, its delivery, the tax inside, and what is to pay. Amounts in minor units. */
export function orderSums(
  order: {
    count: number;
    lines: number;
    method: string;
    country: string;
    /** null where it cannot be delivered. */
    delivery: number | null;
    taxes: readonly TaxSum[];
    total: number;
  },
  shown: Money,
): SlipSum[] {
  const { language } = shown;
  const { checkout } = messagesOf(language);
  return [
    { label: count(language, checkout.sheets, order.count), sum: price(order.lines, shown) },
    {
      label: deliveryName(order.method, order.country, language),
      sum: order.delivery === null ? checkout.deliveryOpen : price(order.delivery, shown),
    },
    ...order.taxes.map(
      (tax): SlipSum => ({
        label: fill(checkout.taxIncluded, { label: taxName(tax, language) }),
        sum: price(tax.tax, shown),
        kind: "quiet",
      }),
    ),
    { label: checkout.total, sum: price(order.total, shown), kind: "total" },
  ];
}

/** "Smooth matt cotton, sheet 500 × 420 mm" */
export function lineWords(
  line: { paper: string; sheet: { width: number; height: number } },
  language: Language,
): string {
  return fill(messagesOf(language).checkout.lineWords, { paper: line.paper, ...line.sheet });
}

/** "One print", "2 prints" */
export function numberOfCopies(n: number, language: Language): string {
  return count(language, messagesOf(language).checkout.sheets, n);
}

/** A sum of an order as a letter writes it, always with its decimals: it is a receipt. */
export function orderAmount(amount: number, currency: string, language: Language): string {
  return formatMoney({ amount, currency: currencyCode(currency) }, LANGUAGE_TAG[language]);
}

/** Countries that write the town before the postcode. From memory of the Universal Postal Union's addressing systems. */
const TOWN_FIRST: ReadonlySet<string> = new Set("AU CA GB IE IN KR NZ SG US".split(" "));

/** A postal address in lines, as its country writes town and postcode, with the country's name. */
export function addressLines(address: Address, languageTag: string): string[] {
  const town = TOWN_FIRST.has(address.country)
    ? [address.city, address.region, address.postcode]
    : [address.postcode, address.city];
  const region = TOWN_FIRST.has(address.country) ? undefined : address.region;
  return [
    address.name,
    address.line1,
    address.line2,
    town.filter(Boolean).join(" "),
    region,
    countryName(address.country, languageTag),
  ].flatMap((line) => (line === undefined || line === "" ? [] : [line]));
}
