/*
 * A stand-in for Stripe on this machine: `node --import tsx scripts/stripe-fake/main.ts`.
 *
 * It speaks the part of Stripe's HTTP protocol that a shop with hosted payment pages needs, and the `stripe`
 * SDK is the judge of whether it speaks it right. No money moves. It shares no code with the shop: the shop
 * meets it only through the SDK, and going live is a matter of other keys and no `host`.
 *
 * Environment
 *   STRIPE_PORT            3002
 *   HOST                   127.0.0.1
 *   DATA_DIR               .data; the state is in DATA_DIR/stripe and outlives restarts and kill -9
 *   STRIPE_SECRET_KEY      the key it accepts; never a live one
 *   STRIPE_WEBHOOK_SECRET  what events are signed with
 *   STRIPE_WEBHOOK_URL     where events go; without it they are only listed
 *   STRIPE_PUBLIC_URL      the base of the payment pages' addresses; default http://HOST:STRIPE_PORT
 *   NUMBERLEAF_MODE        with `production` it refuses to start
 *
 * API (form-encoded, as the SDK sends it; the SDK's API version only)
 *   checkout sessions: create, retrieve, list, list line items, expire · payment intents: retrieve, list, cancel ·
 *   charges: retrieve, list · refunds: create, retrieve, update, list · events: retrieve, list · `expand` on all
 *
 * Payment page
 *   /pay/:sessionId, with the fields card_number, card_expiry (MM/YY), card_cvc, card_name and, when the session
 *   has none, email; the bank's question at /pay/:sessionId/authenticate with answer=approve|refuse. The test cards
 *   are listed on the page; two of them (…7726, …5126) are paid and have refunds that are slow or fail later.
 *
 * Switches, for tests; only from this machine, and forgotten at a restart
 *   GET  /-/health              {ok}
 *   GET  /-/switches            how they stand
 *   POST /-/switches            only what is to change:
 *     {"reset": true}           first puts everything back
 *     {"api": {
 *       "match": "POST /v1/refunds",  only requests that begin so; "" for all
 *       "delayBeforeMs": 0,     waits before doing anything; an idempotency key counts as in use meanwhile
 *       "delayAfterMs": 0,      does it, keeps it, waits before answering
 *       "dropBefore": 1,        cuts the next n connections before anything is done
 *       "dropAfter": 1,         does the next n, then cuts the connection without an answer
 *                               (the SDK tries a cut connection once more of itself: 2 to be noticed)
 *       "fail": {"count": 1, "status": 500 | 503 | 429, "after": false}
 *                               answers the next n so; with `after` the work is done first and the failure kept
 *                               under the idempotency key, as Stripe does with what fails half way
 *     }}
 *     {"webhooks": {
 *       "hold": false,          nothing leaves until this is false again, or a flush
 *       "delayMs": 0,           from the event to its first delivery
 *       "copies": 1,            how often each delivery is sent
 *       "reverse": false,       gathers events for 0.3 s and sends the newest first, one after another
 *       "dropNext": 0           the next n events are never sent at all
 *     }}
 *   GET  /-/events              all events, newest first, each with its `delivery`; ?type=
 *   POST /-/webhooks/flush      sends everything still owed now and answers {delivered, failed} when that is done
 *   POST /-/sessions/:id/pay    {card?, name?, email?, shipping_option?, answer?}: pays without the page, by the same
 *                               code; answers {kind: paid | declined | authenticate | closed | unknown, session, …}
 */
import { z } from "zod";
import { createStripeFake } from "./server";

const environment = z
  .object({
    NUMBERLEAF_MODE: z.string().optional(),
    STRIPE_PORT: z.coerce.number().int().min(1).max(65_535).default(3002),
    HOST: z.string().default("127.0.0.1"),
    DATA_DIR: z.string().default(".data"),
    STRIPE_SECRET_KEY: z
      .string({ error: "is required" })
      .refine((key) => !/^[rs]k_live_/.test(key), { error: "is a live key; it has no business with a fake" }),
    STRIPE_WEBHOOK_SECRET: z.string({ error: "is required" }).min(1),
    STRIPE_WEBHOOK_URL: z.url().optional(),
    STRIPE_PUBLIC_URL: z.url().optional(),
  })
  .safeParse(
    // A variable that is set to nothing counts as not set.
    Object.fromEntries(Object.entries(process.env).filter(([, value]) => value !== "")),
  );

function refuse(reason: string): never {
  console.error(`stripe-fake: ${reason}`);
  process.exit(1);
}

if (process.env.NUMBERLEAF_MODE === "production") refuse("refuses to run in production mode");
if (!environment.success) {
  refuse(environment.error.issues.map((issue) => `${issue.path.join(".")} ${issue.message}`).join("; "));
}
const { STRIPE_PORT: port, HOST: host, ...settings } = environment.data;

const fake = createStripeFake({
  port,
  host,
  dataDir: settings.DATA_DIR,
  secretKey: settings.STRIPE_SECRET_KEY,
  webhookSecret: settings.STRIPE_WEBHOOK_SECRET,
  webhookUrl: settings.STRIPE_WEBHOOK_URL ?? null,
  ...(settings.STRIPE_PUBLIC_URL && { publicUrl: settings.STRIPE_PUBLIC_URL.replace(/\/$/, "") }),
});

let stopping = false;
function stop(): void {
  if (stopping) return;
  stopping = true;
  // Whatever still hangs after this has had its time; the state is safe at every moment.
  setTimeout(() => process.exit(0), 1500).unref();
  fake.close().then(() => process.exit(0));
}
process.on("SIGTERM", stop);
process.on("SIGINT", stop);

try {
  const { url } = await fake.listen();
  console.log(`stripe-fake: listening on ${url}`);
} catch (error) {
  if (error instanceof Error && "code" in error && error.code === "EADDRINUSE") {
    refuse(`port ${port} on ${host} is taken; set STRIPE_PORT to a free one`);
  }
  throw error;
}
