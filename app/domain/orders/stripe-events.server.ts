import { inTransaction } from "db/client.server";
import { webhookEvents } from "db/schema/schema";
import { eq } from "drizzle-orm";
import type Stripe from "stripe";
import { now } from "~/platform/clock";
import { env } from "~/platform/env.server";
import { enqueue } from "~/platform/queue.server";
import { stripe } from "~/platform/stripe.server";

/** Checks the signature over the raw body. null when it is not Stripe's, altered, or too old. */
export function verifiedEvent(rawBody: string, signature: string): Stripe.Event | null {
  try {
    return stripe.webhooks.constructEvent(rawBody, signature, env.STRIPE_WEBHOOK_SECRET);
  } catch {
    return null;
  }
}

/**
 * Stores an event and the job that acts on it in one transaction; a repeat is recognised by its id. The event is
 * only a hint: the job reads the object from Stripe again.
 */
export async function receiveEvent(event: Stripe.Event): Promise<"new" | "repeat" | "ignored"> {
  if (event.type !== "checkout.session.completed" && event.type !== "checkout.session.expired")
    return "ignored";
  const { id: stripeSessionId } = event.data.object;
  return inTransaction(async (tx) => {
    const inserted = await tx.db
      .insert(webhookEvents)
      .values({ id: event.id, kind: event.type, objectId: stripeSessionId, receivedAt: now() })
      .onConflictDoNothing()
      .returning({ id: webhookEvents.id });
    if (inserted.length === 0) return "repeat";
    await enqueue("settle-payment", { stripeSessionId }, { client: tx.client });
    await tx.db.update(webhookEvents).set({ handledAt: now() }).where(eq(webhookEvents.id, event.id));
    return "new";
  });
}
