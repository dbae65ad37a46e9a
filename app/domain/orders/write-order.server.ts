import type { Tx } from "db/client.server";
import { type AddressJson, copies, holds, orderEvents, orderLines, orders } from "db/schema/schema";
import { and, asc, eq } from "drizzle-orm";
import { isoDayInZone } from "~/domain/dates";
import { theStudio } from "~/domain/studio/studio.server";
import type { Language } from "~/languages/language";
import { newId, newLinkToken } from "~/platform/ids.server";
import { enqueue } from "~/platform/queue.server";
import type { FormatForSale } from "./for-sale.server";
import { loadPriceTables } from "./tables.server";
import { orderTotals } from "./totals";

/** A line whose copy has been chosen under the edition's lock. Amounts in minor units, home tax included. */
export type ChosenLine = {
  format: FormatForSale;
  copyId: string;
  ladderAmount: number;
  reductionAmount: number;
  reductionReason: string | null;
};

export type NewOrder = {
  submissionKey: string;
  channel: "shop" | "studio";
  buyerPartyId: () => Promise<string>;
  accountId: string | null;
  email: string | null;
  language: Language;
  delivery: { method: "delivery"; address: AddressJson } | { method: "collection" | "handed_over" };
  country: string;
  buyerNote: string;
  studioNote: string;
  lines: ChosenLine[];
  at: Date;
  /** null: held without an end, until somebody cancels (an order made by hand). */
  holdUntil: Date | null;
  pricesToAccept: boolean;
};

export type WrittenOrder =
  | { kind: "placed"; orderId: string; token: string }
  | { kind: "not_delivered"; reason: string };

/** A hold made by hand has no end of its own; its rows say so with this instant. */
const WITHOUT_END = new Date("9999-12-31T00:00:00Z");

/**
 * Writes an order that waits for its payment, with its lines and the holds on their copies. The caller has
 * locked the editions and chosen copies that are in hand.
 */
export async function writeHeldOrder(tx: Tx, order: NewOrder): Promise<WrittenOrder> {
  const studio = await theStudio();
  const { delivery, at } = order;
  const totals = orderTotals(
    {
      homeCountry: studio.country,
      country: order.country,
      ...(delivery.method === "delivery" && delivery.address.region !== undefined
        ? { region: delivery.address.region }
        : {}),
      at: isoDayInZone(at, studio.zone),
      method: delivery.method === "delivery" ? "delivery" : "collection",
      lines: order.lines.map((line, i) => ({
        id: String(i),
        gross: line.ladderAmount - line.reductionAmount,
        worksOfArt: line.format.worksOfArt,
        sheetWidthMm: line.format.sheetWidthMm,
        sheetHeightMm: line.format.sheetHeightMm,
        grams: line.format.grams,
        pieces: line.format.pictures,
      })),
    },
    await loadPriceTables(tx.db),
  );
  if (totals.delivery.kind === "not_delivered") return totals.delivery;
  const orderId = newId();
  const link = newLinkToken("order");
  await tx.db.insert(orders).values({
    id: orderId,
    submissionKey: order.submissionKey,
    channel: order.channel,
    buyerPartyId: await order.buyerPartyId(),
    accountId: order.accountId,
    email: order.email,
    language: order.language,
    deliveryMethod: delivery.method,
    deliveryAddress: delivery.method === "delivery" ? delivery.address : null,
    deliveryCountry: order.country,
    currency: studio.currency,
    deliveryAmount: totals.delivery.amount,
    deliveryNet: totals.delivery.net,
    deliveryTax: totals.delivery.tax,
    deliveryTaxSnapshot: totals.delivery.snapshot,
    deliveryDaysFrom: totals.delivery.daysFrom,
    deliveryDaysTo: totals.delivery.daysTo,
    totalAmount: totals.total,
    totalTax: totals.tax,
    buyerNote: order.buyerNote,
    studioNote: order.studioNote,
    tokenSeed: link.seed,
    tokenHash: link.hash,
    createdAt: at,
    holdUntil: order.holdUntil,
    pricesAcceptedAt: order.pricesToAccept ? null : at,
  });
  for (const [position, line] of order.lines.entries()) {
    const priced = totals.lines[position];
    if (priced === undefined) throw new Error(`line ${position} has no price`);
    const lineId = newId();
    await tx.db.insert(orderLines).values({
      id: lineId,
      orderId,
      position,
      state: "held",
      editionId: line.format.editionId,
      formatId: line.format.formatId,
      copyId: line.copyId,
      ladderAmount: line.ladderAmount,
      reductionAmount: line.reductionAmount,
      reductionReason: line.reductionReason,
      amount: priced.amount,
      net: priced.net,
      tax: priced.tax,
      taxSnapshot: priced.snapshot,
      currency: studio.currency,
    });
    const moved = await tx.db
      .update(copies)
      .set({ placement: "held", formatId: line.format.formatId, orderLineId: lineId })
      .where(and(eq(copies.id, line.copyId), eq(copies.placement, "in_hand")))
      .returning({ id: copies.id });
    if (moved.length !== 1)
      throw new Error(`copy ${line.copyId} was not in hand although its edition is locked`);
    await tx.db.insert(holds).values({
      id: newId(),
      copyId: line.copyId,
      orderLineId: lineId,
      heldAt: at,
      until: order.holdUntil ?? WITHOUT_END,
    });
  }
  await tx.db.insert(orderEvents).values({ orderId, kind: "placed", at, visibleToBuyer: true });
  if (order.holdUntil !== null) {
    await enqueue("end-hold", { orderId }, { client: tx.client, startAfter: order.holdUntil });
  }
  return { kind: "placed", orderId, token: link.token };
}

/** The lines of an order with their copies, in order. */
export function linesOf(tx: Tx, orderId: string) {
  return tx.db
    .select({ line: orderLines, run: copies.run, number: copies.number, placement: copies.placement })
    .from(orderLines)
    .innerJoin(copies, eq(copies.id, orderLines.copyId))
    .where(eq(orderLines.orderId, orderId))
    .orderBy(asc(orderLines.position));
}
