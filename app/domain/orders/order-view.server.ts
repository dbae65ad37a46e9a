import { db } from "db/client.server";
import {
  copies,
  dispatches,
  editions,
  formats,
  orderEvents,
  orderLines,
  orders,
  papers,
  payments,
  printPictures,
  prints,
  proofs,
  refunds,
  sheets,
} from "db/schema/schema";
import { asc, desc, eq, inArray } from "drizzle-orm";
import { markOf } from "~/domain/editions/ledger.server";
import { isLive, type SheetMaking } from "~/domain/editions/transitions";
import { publicUrl } from "~/platform/storage.server";

/** How far an order has come, in one word for pages and lists; worked out, never stored. */
export type OrderStands =
  | "awaiting_payment"
  | "paid"
  | "printing"
  | "signed"
  | "sent"
  | "arrived"
  | "cancelled"
  | "expired";

export type OrderLineView = {
  id: string;
  state: (typeof orderLines.$inferSelect)["state"];
  copyId: string;
  editionId: string;
  /** "7/25" */
  mark: string;
  checkCode: string | null;
  title: string;
  slug: string;
  year: number | null;
  paper: string;
  process: string;
  image: { width: number; height: number };
  sheet: { width: number; height: number };
  ladderAmount: number;
  reductionAmount: number;
  reductionReason: string | null;
  amount: number;
  net: number;
  tax: number;
  taxLabel: string;
  makings: SheetMaking[];
  proofs: { format: "avif" | "webp" | "jpeg"; width: number; height: number; url: string }[];
};

export type OrderView = typeof orders.$inferSelect & {
  stands: OrderStands;
  lines: OrderLineView[];
  payments: (typeof payments.$inferSelect)[];
  refunds: (typeof refunds.$inferSelect)[];
  dispatches: (typeof dispatches.$inferSelect)[];
  events: (typeof orderEvents.$inferSelect)[];
  refunded: number;
};

/** Where an order stands, from its state and the makings of its live sheets. */
export function standsAt(
  state: (typeof orders.$inferSelect)["state"],
  makings: readonly SheetMaking[],
): OrderStands {
  if (state !== "paid") return state;
  const live = makings.filter(isLive);
  if (live.length === 0) return "paid";
  const all = (...those: SheetMaking[]) => live.every((m) => those.includes(m));
  if (all("delivered")) return "arrived";
  if (all("dispatched", "delivered")) return "sent";
  if (all("signed", "packed", "dispatched", "delivered", "returned")) return "signed";
  return live.some((m) => m !== "to_print") ? "printing" : "paid";
}

/** Everything there is to know of an order, for its pages and e-mails; null when there is none. */
export async function orderView(orderId: string): Promise<OrderView | null> {
  const [order] = await db.select().from(orders).where(eq(orders.id, orderId));
  if (order === undefined) return null;
  const rows = await db
    .select({
      line: orderLines,
      copy: copies,
      edition: editions,
      format: formats,
      paper: papers,
      print: prints,
    })
    .from(orderLines)
    .innerJoin(copies, eq(copies.id, orderLines.copyId))
    .innerJoin(editions, eq(editions.id, orderLines.editionId))
    .innerJoin(formats, eq(formats.id, orderLines.formatId))
    .innerJoin(papers, eq(papers.id, formats.paperId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(eq(orderLines.orderId, orderId))
    .orderBy(asc(orderLines.position));
  const copyIds = rows.map((r) => r.copy.id);
  const printIds = rows.map((r) => r.print.id);
  const [sheetRows, proofRows, paymentRows, refundRows, dispatchRows, eventRows] = await Promise.all([
    copyIds.length === 0 ? [] : db.select().from(sheets).where(inArray(sheets.copyId, copyIds)),
    printIds.length === 0
      ? []
      : db
          .select({ printId: printPictures.printId, position: printPictures.position, proof: proofs })
          .from(proofs)
          .innerJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
          .where(inArray(printPictures.printId, printIds)),
    db.select().from(payments).where(eq(payments.orderId, orderId)).orderBy(asc(payments.recordedAt)),
    db.select().from(refunds).where(eq(refunds.orderId, orderId)).orderBy(asc(refunds.createdAt)),
    db.select().from(dispatches).where(eq(dispatches.orderId, orderId)).orderBy(asc(dispatches.sentAt)),
    db
      .select()
      .from(orderEvents)
      .where(eq(orderEvents.orderId, orderId))
      .orderBy(desc(orderEvents.at), desc(orderEvents.id)),
  ]);
  const lines = rows.map(({ line, copy, edition, format, paper, print }): OrderLineView => {
    const sold = line.state === "sold";
    return {
      id: line.id,
      state: line.state,
      copyId: copy.id,
      editionId: edition.id,
      mark: markOf(edition, copy),
      checkCode: sold ? copy.checkCode : null,
      title: print.title,
      slug: print.slug,
      year: print.year,
      paper: `${paper.name}, ${paper.grammage} g/m²`,
      process: format.process,
      image: { width: format.imageWidthMm, height: format.imageHeightMm },
      sheet: { width: format.sheetWidthMm, height: format.sheetHeightMm },
      ladderAmount: line.ladderAmount,
      reductionAmount: line.reductionAmount,
      reductionReason: line.reductionReason,
      amount: line.amount,
      net: line.net,
      tax: line.tax,
      taxLabel: line.taxSnapshot.label,
      makings: sold ? sheetRows.filter((s) => s.copyId === copy.id).map((s) => s.making) : [],
      // A print whose pictures are not public (withdrawn since) is shown without them.
      proofs:
        print.proofsPublicAt === null
          ? []
          : proofRows
              .filter((p) => p.printId === print.id && p.position === 1)
              .map(({ proof }) => ({
                format: proof.format,
                width: proof.width,
                height: proof.height,
                url: publicUrl(proof.objectKey),
              })),
    };
  });
  return {
    ...order,
    stands: standsAt(
      order.state,
      lines.flatMap((l) => l.makings),
    ),
    lines,
    payments: paymentRows,
    refunds: refundRows,
    dispatches: dispatchRows,
    events: eventRows,
    refunded: refundRows.filter((r) => r.state === "succeeded").reduce((sum, r) => sum + r.amount, 0),
  };
}
