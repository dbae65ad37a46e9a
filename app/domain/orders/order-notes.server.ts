import { inTransaction } from "db/client.server";
import { orderEvents, orders, refunds } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { now } from "~/platform/clock";
import { settleRefund } from "./refunds.server";

/** Keeps the studio's own note with an order; buyers never see it. */
export async function noteOrder(actor: Actor, orderId: string, studioNote: string): Promise<void> {
  mustBeAllowed(actor, "orders.send");
  await inTransaction(async (tx) => {
    await tx.db.update(orders).set({ studioNote }).where(eq(orders.id, orderId));
  });
}

/** Says that what needed a look has been looked at. */
export async function clearAttention(actor: Actor, orderId: string): Promise<void> {
  mustBeAllowed(actor, "refunds.make");
  await inTransaction(async (tx) => {
    const changed = await tx.db
      .update(orders)
      .set({ attention: null })
      .where(eq(orders.id, orderId))
      .returning({ id: orders.id });
    if (changed.length === 0) return;
    await tx.db
      .insert(orderEvents)
      .values({ orderId, kind: "attention_cleared", accountId: actor.accountId, at: now() });
  });
}

/** Records that a refund owed by hand (transfer, cash, or one a card service refused) has been given. */
export async function recordRefundByHand(
  actor: Actor,
  orderId: string,
  refundId: string,
  reference: string,
): Promise<boolean> {
  mustBeAllowed(actor, "refunds.make");
  const owed = await inTransaction(async (tx) => {
    const [refund] = await tx.db.select().from(refunds).where(eq(refunds.id, refundId)).for("update");
    return (
      refund !== undefined &&
      refund.orderId === orderId &&
      (refund.method !== "card" || refund.state === "failed")
    );
  });
  if (!owed) return false;
  await settleRefund(refundId, reference);
  return true;
}
