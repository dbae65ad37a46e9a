import { inTransaction } from "db/client.server";
import { copies, dispatches, orderEvents, orders, sheets } from "db/schema/schema";
import { eq, inArray } from "drizzle-orm";
import { type Actor, lockEditions, markOf, moveSheet } from "~/domain/editions/ledger.server";
import { can, type Role } from "~/domain/people/permissions";
import { owe } from "~/emails/owe.server";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { linesOf } from "./write-order.server";

export type DispatchInput = {
  carrier: string;
  /** The carrier's reference for following the parcel; may be empty. */
  reference: string;
  sentAt: Date;
};

export type DispatchOutcome =
  | { kind: "sent" }
  | { kind: "already" }
  /** The order is not paid, or nothing of it is to be sent. */
  | { kind: "nothing_to_send" }
  /** These copies have not been printed and signed yet. */
  | { kind: "not_signed"; marks: string[] };

/**
 * Marks an order as sent: every live sheet of its sold copies is dispatched in the ledger, and the buyer is told.
 * An order that is collected or handed over is delivered in the same act.
 */
export async function dispatchOrder(
  orderId: string,
  actor: Actor & { roles: readonly Role[] },
  input: DispatchInput,
): Promise<DispatchOutcome> {
  if (!can(actor.roles, "orders.send")) throw new AppError("not_allowed");
  return inTransaction(async (tx) => {
    const at = now();
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    if (order === undefined) throw new AppError("not_found");
    if (order.state !== "paid") return { kind: "nothing_to_send" };
    const lines = (await linesOf(tx, orderId)).filter((l) => l.line.state === "sold");
    if (lines.length === 0) return { kind: "nothing_to_send" };
    const locked = await lockEditions(
      tx,
      lines.map((l) => l.line.editionId),
    );
    const live = await tx.db
      .select({ sheet: sheets, editionId: copies.editionId, run: copies.run, number: copies.number })
      .from(sheets)
      .innerJoin(copies, eq(copies.id, sheets.copyId))
      .where(
        inArray(
          sheets.copyId,
          lines.map((l) => l.line.copyId),
        ),
      );
    const present = live.filter((s) => s.sheet.making !== "spoiled" && s.sheet.making !== "destroyed");
    const unsigned = present.filter((s) => s.sheet.making === "to_print" || s.sheet.making === "printed");
    if (unsigned.length > 0) {
      const marks = unsigned.map((s) => {
        const edition = locked.get(s.editionId);
        return edition === undefined ? "" : markOf(edition, s);
      });
      return { kind: "not_signed", marks: [...new Set(marks)] };
    }
    const toSend = present.filter((s) => ["signed", "packed", "returned"].includes(s.sheet.making));
    if (toSend.length === 0) return { kind: "already" };

    const personally = order.deliveryMethod !== "delivery";
    const dispatchId = newId();
    await tx.db.insert(dispatches).values({
      id: dispatchId,
      orderId,
      carrier: input.carrier,
      reference: input.reference,
      sentAt: input.sentAt,
      deliveredAt: personally ? input.sentAt : null,
      recordedBy: actor.accountId ?? null,
      recordedAt: at,
    });
    for (const { sheet, editionId } of toSend) {
      const edition = locked.get(editionId);
      if (edition === undefined) throw new Error(`no edition ${editionId}`);
      await moveSheet(tx, edition, actor, {
        kind: personally ? "delivered" : "dispatched",
        sheetId: sheet.id,
        happened: { precision: "instant", at: input.sentAt },
        secret: { orderId, orderNumber: order.number, reference: input.reference },
      });
    }
    await tx.db.insert(orderEvents).values({
      orderId,
      kind: personally ? "handed_over" : "sent",
      detail: { carrier: input.carrier, reference: input.reference },
      accountId: actor.accountId ?? null,
      at,
      visibleToBuyer: true,
    });
    if (!personally && order.email !== null) {
      await owe(tx, {
        kind: "dispatch",
        dedupeKey: `dispatch:${dispatchId}`,
        recipient: order.email,
        language: order.language,
        payload: { orderId, dispatchId },
        orderId,
      });
    }
    return { kind: "sent" };
  });
}
