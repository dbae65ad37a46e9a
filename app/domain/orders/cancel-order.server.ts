import { inTransaction } from "db/client.server";
import { copies, orderEvents, orderLines, orders, payments, sheets } from "db/schema/schema";
import { and, eq, inArray } from "drizzle-orm";
import { type Actor, lockEditions, moveCopy } from "~/domain/editions/ledger.server";
import { can, type Role } from "~/domain/people/permissions";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { endHold } from "./end-hold.server";
import { askRefund } from "./refunds.server";
import { linesOf } from "./write-order.server";

export type CancelOutcome = "cancelled" | "already" | "offer_open";

/**
 * Cancels an order with all its money given back. Unpaid, its hold ends (through Stripe). Paid, each sold copy
 * gets a new entry: before dispatch the number is in hand again or retired, by the edition's policy; after it,
 * the copy is coming back until its sheet has been seen (rule 9).
 */
export async function cancelOrder(
  orderId: string,
  actor: Actor & { roles: readonly Role[] },
  reason: string,
): Promise<CancelOutcome> {
  if (!can(actor.roles, "orders.cancel")) throw new AppError("not_allowed");
  const ended = await endHold(orderId, "cancelled");
  if (ended === "freed") return "cancelled";
  return inTransaction(async (tx) => {
    const at = now();
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    if (order === undefined) throw new AppError("not_found");
    if (order.state !== "paid") return "already";
    const lines = await linesOf(tx, orderId);
    // An offered number must be answered first: its own end gives that line's money back.
    if (lines.some((l) => l.line.state === "offered")) return "offer_open";
    const [payment] = await tx.db
      .select()
      .from(payments)
      .where(eq(payments.orderId, orderId))
      .orderBy(payments.recordedAt);
    if (payment === undefined) throw new Error(`paid order ${orderId} has no payment`);
    const locked = await lockEditions(
      tx,
      lines.map((l) => l.line.editionId),
    );
    for (const { line } of lines) {
      if (line.state !== "sold") continue;
      const edition = locked.get(line.editionId);
      if (edition === undefined) throw new Error(`no edition ${line.editionId}`);
      const left = await tx.db
        .select({ id: sheets.id })
        .from(sheets)
        .where(
          and(eq(sheets.copyId, line.copyId), inArray(sheets.making, ["dispatched", "delivered", "lost"])),
        );
      const dispatched = left.length > 0;
      await moveCopy(tx, edition, actor, {
        kind: "refunded",
        copyId: line.copyId,
        context: { dispatched },
        ...(dispatched ? {} : { orderLineId: null, ownerPartyId: null }),
        secret: {
          partyId: order.buyerPartyId,
          orderId,
          orderNumber: order.number,
          amount: line.ladderAmount - line.reductionAmount,
          currency: line.currency,
          reason,
        },
      });
      if (!dispatched && edition.returnedNumber === "retired") {
        await moveCopy(tx, edition, actor, { kind: "retired", copyId: line.copyId, secret: { reason } });
      } else if (!dispatched) {
        // Its format is taken anew when it is held or sold again, unless a printed sheet already fixes it.
        const printed = await tx.db
          .select({ id: sheets.id })
          .from(sheets)
          .where(
            and(eq(sheets.copyId, line.copyId), inArray(sheets.making, ["printed", "signed", "packed"])),
          );
        if (printed.length === 0)
          await tx.db.update(copies).set({ formatId: null }).where(eq(copies.id, line.copyId));
      }
      await tx.db.update(orderLines).set({ state: "refunded" }).where(eq(orderLines.id, line.id));
      await askRefund(tx, {
        orderId,
        paymentId: payment.id,
        line: line.id,
        amount: line.amount,
        net: line.net,
        tax: line.tax,
        reason: "cancelled",
        ...(actor.accountId === undefined ? {} : { accountId: actor.accountId }),
      });
    }
    await askRefund(tx, {
      orderId,
      paymentId: payment.id,
      line: null,
      amount: order.deliveryAmount,
      net: order.deliveryNet,
      tax: order.deliveryTax,
      reason: "cancelled",
      ...(actor.accountId === undefined ? {} : { accountId: actor.accountId }),
    });
    await tx.db.update(orders).set({ state: "cancelled", endedAt: at }).where(eq(orders.id, orderId));
    await tx.db.insert(orderEvents).values({
      orderId,
      kind: "cancelled",
      detail: { reason },
      accountId: actor.accountId ?? null,
      at,
      visibleToBuyer: true,
    });
    return "cancelled";
  });
}
