import { inTransaction } from "db/client.server";
import { emails, orderEvents, orders } from "db/schema/schema";
import { and, eq, ne } from "drizzle-orm";
import { NO_LONGER_NEEDED } from "~/emails/send.server";
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
    // Letters that still wait would be made with the new link: none of them may go to the mistyped address.
    const waiting = and(
      eq(emails.orderId, orderId),
      eq(emails.state, "waiting"),
      ne(emails.kind, "new-order"),
    );
    await tx.db
      .update(emails)
      .set({ state: "failed", failure: NO_LONGER_NEEDED })
      .where(and(waiting, eq(emails.kind, "order-confirmation")));
    await tx.db.update(emails).set({ recipient: email }).where(waiting);
    await oweConfirmation(tx, changed);
    return link.token;
  });
}
