import Stripe from "stripe";
import { env } from "./env.server";

function options(): Stripe.StripeConfig {
  const common = { timeout: 10_000, maxNetworkRetries: 1, telemetry: false };
  if (env.STRIPE_API_URL === "") return common;
  const url = new URL(env.STRIPE_API_URL);
  const protocol = url.protocol === "https:" ? "https" : "http";
  return { ...common, host: url.hostname, port: url.port, protocol };
}

/** Stripe's own SDK; where it talks to is configuration. */
export const stripe = new Stripe(env.STRIPE_SECRET_KEY, options());
