import { inTransaction } from "db/client.server";
import { orderEvents, orders } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { now } from "~/platform/clock";
import { newLinkToken } from "~/platform/ids.server";
import { oweConfirmation } from "./settle.server";

/**
 * Corrects a mistyped address, for the browser that paid: the order gets a new link, the old one dies, and the
 * confirmation goes to the new address. Returns the new link's token; null when the order is not paid.
 */
export async function correctEmail(orderId: string, email: string): Promise<string | null> {
  return inTransaction(async (tx) => {
    const [order] = await tx.db.select().from(orders).where(eq(orders.id, orderId)).for("update");
    if (order === undefined || order.state !== "paid") return null;
    const link = newLinkToken("order");
    const changed = { ...order, email, tokenSeed: link.seed };
    await tx.db
      .update(orders)
      .set({ email, tokenSeed: link.seed, tokenHash: link.hash })
      .where(eq(orders.id, orderId));
    await tx.db
      .insert(orderEvents)
      .values({ orderId, kind: "email_corrected", at: now(), visibleToBuyer: true });
    await oweConfirmation(tx, changed);
    return link.token;
  });
}
