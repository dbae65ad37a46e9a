import { receiveEvent, verifiedEvent } from "~/domain/orders/stripe-events.server";
import type { Route } from "./+types/stripe";

/** Stripe's webhooks: verified on the raw body, stored, answered after the commit. */
export async function action({ request }: Route.ActionArgs) {
  if (request.method !== "POST") return new Response(null, { status: 405 });
  const event = verifiedEvent(await request.text(), request.headers.get("stripe-signature") ?? "");
  if (event === null) return new Response("signature not accepted\n", { status: 400 });
  return Response.json({ received: await receiveEvent(event) });
}
