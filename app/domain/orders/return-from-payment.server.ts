import { db } from "db/client.server";
import { paymentSessions } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { logger } from "~/platform/logger.server";
import { settleSession } from "./settle.server";

/**
 * What became of the payment from whose page a browser comes back. It need not wait for the webhook: Stripe is asked here
 * too, and a Stripe that does not answer is no reason to fail.
 *
 * `paid`: this browser has paid this order. `waiting`: Stripe has not said so yet, ask again. `other`: the session is
 * over, or none of this order's.
 */
export async function returnFromPayment(
  orderId: string,
  stripeSessionId: string,
): Promise<"paid" | "waiting" | "other"> {
  if (!/^cs_\w{4,200}$/.test(stripeSessionId)) return "other";
  const known = await sessionOf(orderId, stripeSessionId);
  if (known === "complete") return "paid";
  let settled: "paid" | "ended" | "waiting" | "unknown";
  try {
    settled = await settleSession(stripeSessionId);
  } catch (error) {
    logger.warn({ orderId, err: error instanceof Error ? error.message : "unknown" }, "payment not settled");
    return known === null ? "other" : "waiting";
  }
  const state = await sessionOf(orderId, stripeSessionId);
  if (state === "complete") return "paid";
  return settled === "waiting" && state !== null ? "waiting" : "other";
}

async function sessionOf(orderId: string, stripeSessionId: string) {
  const [row] = await db
    .select({ state: paymentSessions.state })
    .from(paymentSessions)
    .where(and(eq(paymentSessions.orderId, orderId), eq(paymentSessions.stripeSessionId, stripeSessionId)));
  return row?.state ?? null;
}
