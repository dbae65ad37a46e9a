import { db } from "db/client.server";
import { type AddressJson, copies, editions, orderLines, orders, parties } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { markOf } from "~/domain/editions/ledger.server";
import { theStudio } from "~/domain/studio/studio.server";
import { now } from "~/platform/clock";
import { type Access, type Asking, accessToOrder } from "./buyer-access";
import { formatsForSale, priceOfFree } from "./for-sale.server";
import { openOffers } from "./offers.server";
import { type OrderStands, type OrderView, orderView } from "./order-view.server";
import { type TaxSum, taxSums } from "./tax-sums";

/** One line as its buyer is shown it. Amounts in minor units, lengths in mm. */
export type BoughtLine = Pick<
  OrderView["lines"][number],
  | "id"
  | "state"
  | "mark"
  | "checkCode"
  | "title"
  | "slug"
  | "year"
  | "paper"
  | "sheet"
  | "ladderAmount"
  | "amount"
  | "proofs"
>;

export type OfferShown = {
  offerId: string;
  title: string;
  /** The number that was paid for, and the one that is offered. */
  was: string;
  mark: string;
  /** What the line costs with the offered number. */
  amount: number;
  /** What comes back when it is declined, and when it is taken. */
  paid: number;
  until: Date;
};

/** What the holder of an order's link is shown. Nothing in it that their access does not cover. */
export type BuyersOrder = {
  number: number;
  state: OrderView["state"];
  stands: OrderStands;
  channel: OrderView["channel"];
  deliveryMethod: OrderView["deliveryMethod"];
  deliveryCountry: string;
  currency: string;
  createdAt: Date;
  holdUntil: Date | null;
  pricesToAccept: boolean;
  lines: BoughtLine[];
  deliveryAmount: number;
  totalAmount: number;
  taxes: TaxSum[];
  refunds: { id: string; amount: number; done: boolean; reason: string; at: Date }[];
  dispatches: { carrier: string; reference: string; sentAt: Date; deliveredAt: Date | null }[];
  history: { id: number; kind: string; at: Date; number: string; amount: number | null; carrier: string }[];
  offers: OfferShown[];
  access: Access;
  /** Only where access covers it. */
  buyer: { name: string; email: string | null; address: AddressJson | null; note: string } | null;
  studio: { zone: string; signature: string; address: string; holdMinutes: number };
};

/** The order behind a link, as far as whoever asks may see it; null when there is none. */
export async function buyersOrder(orderId: string, asking: Asking): Promise<BuyersOrder | null> {
  const view = await orderView(orderId);
  if (view === null) return null;
  const [studio, offers, [party]] = await Promise.all([
    theStudio(),
    offersOf(view),
    db.select({ name: parties.name }).from(parties).where(eq(parties.id, view.buyerPartyId)),
  ]);
  const access = accessToOrder(view, asking);
  return {
    number: view.number,
    state: view.state,
    stands: view.stands,
    channel: view.channel,
    deliveryMethod: view.deliveryMethod,
    deliveryCountry: view.deliveryCountry,
    currency: view.currency,
    createdAt: view.createdAt,
    holdUntil: view.holdUntil,
    pricesToAccept: view.state === "awaiting_payment" && view.pricesAcceptedAt === null,
    lines: view.lines.map((l) => ({
      id: l.id,
      state: l.state,
      mark: l.mark,
      checkCode: l.checkCode,
      title: l.title,
      slug: l.slug,
      year: l.year,
      paper: l.paper,
      sheet: l.sheet,
      ladderAmount: l.ladderAmount,
      amount: l.amount,
      proofs: l.proofs,
    })),
    deliveryAmount: view.deliveryAmount,
    totalAmount: view.totalAmount,
    taxes: await taxesOf(view),
    refunds: view.refunds.map((r) => ({
      id: r.id,
      amount: r.amount,
      // One that failed is being looked after by a person; for the buyer it is still on its way.
      done: r.state === "succeeded",
      reason: r.reason,
      at: r.settledAt ?? r.createdAt,
    })),
    dispatches: view.dispatches.map(({ carrier, reference, sentAt, deliveredAt }) => ({
      carrier,
      reference,
      sentAt,
      deliveredAt,
    })),
    history: view.events
      .filter((e) => e.visibleToBuyer)
      .map(({ id, kind, at, detail }) => ({
        id,
        kind,
        at,
        number: typeof detail.number === "string" ? detail.number : "",
        amount: typeof detail.amount === "number" ? detail.amount : null,
        carrier: typeof detail.carrier === "string" ? detail.carrier : "",
      })),
    offers,
    access,
    buyer:
      access === "link"
        ? null
        : {
            name: party?.name ?? "",
            email: view.email,
            address: view.deliveryAddress,
            note: view.buyerNote,
          },
    studio: {
      zone: studio.zone,
      signature: studio.signature,
      address: [studio.address.line1, studio.address.city, studio.address.postcode]
        .filter(Boolean)
        .join(", "),
      holdMinutes: studio.holdMinutes,
    },
  };
}

/** The tax of an order by rate, from what was kept with its lines and its delivery. */
export async function taxesOf(view: OrderView): Promise<TaxSum[]> {
  const lines = await db
    .select({ tax: orderLines.tax, snapshot: orderLines.taxSnapshot })
    .from(orderLines)
    .where(eq(orderLines.orderId, view.id))
    .orderBy(orderLines.position);
  const delivery =
    view.deliveryTaxSnapshot !== null && view.deliveryAmount > 0
      ? [{ tax: view.deliveryTax, snapshot: view.deliveryTaxSnapshot }]
      : [];
  return taxSums([...lines, ...delivery]);
}

/** Offers that wait for an answer, with what taking or declining each would come to. */
export async function offersOf(view: OrderView): Promise<OfferShown[]> {
  const open = await openOffers(view.id);
  if (open.length === 0) return [];
  const at = now();
  const shown: OfferShown[] = [];
  for (const offer of open) {
    const [row] = await db
      .select({ line: orderLines, edition: editions })
      .from(orderLines)
      .innerJoin(editions, eq(editions.id, orderLines.editionId))
      .where(eq(orderLines.id, offer.lineId));
    const line = view.lines.find((l) => l.id === offer.lineId);
    if (row === undefined || line === undefined || offer.until.getTime() <= at.getTime()) continue;
    const [format] = await formatsForSale(db, [row.line.formatId], at);
    const [copy] = await db
      .select({ code: copies.checkCode })
      .from(copies)
      .where(
        and(
          eq(copies.editionId, row.edition.id),
          eq(copies.run, "numbered"),
          eq(copies.number, offer.number),
        ),
      );
    const price =
      format === undefined
        ? null
        : priceOfFree(format, { number: offer.number, returned: copy?.code != null });
    const paid = row.line.ladderAmount - row.line.reductionAmount;
    shown.push({
      offerId: offer.offerId,
      title: line.title,
      was: line.mark,
      mark: markOf(row.edition, { run: "numbered", number: offer.number }),
      // The same proportion by which `decideOffer` lowers what was paid.
      amount:
        price === null || price >= paid ? row.line.amount : Math.round((row.line.amount * price) / paid),
      paid: row.line.amount,
      until: offer.until,
    });
  }
  return shown;
}

/** The formats of an order's lines, in order: what to put into a basket to order the same again. */
export async function formatsOfOrder(orderId: string): Promise<string[]> {
  const rows = await db
    .select({ formatId: orderLines.formatId })
    .from(orderLines)
    .where(eq(orderLines.orderId, orderId))
    .orderBy(orderLines.position);
  return rows.map((r) => r.formatId);
}

/** The postcode an order is delivered to; null where there is none to ask for. */
export async function postcodeOfOrder(orderId: string): Promise<string | null> {
  const [row] = await db
    .select({ address: orders.deliveryAddress })
    .from(orders)
    .where(eq(orders.id, orderId));
  return row?.address?.postcode ?? null;
}
