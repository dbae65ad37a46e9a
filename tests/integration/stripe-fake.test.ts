import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { appendFile, mkdtemp, rm } from "node:fs/promises";
import { createServer, type Server } from "node:http";
import { type AddressInfo, createServer as createTcpServer } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import Stripe from "stripe";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { createStripeFake, type StripeFake, type StripeFakeOptions } from "../../scripts/stripe-fake/server";

const KEY = "sk_test_integration_0001";
const SECRET = "whsec_integration_0001";
const SHOP = "https://shop.example";
const HOUR = 3600;

let folder: string;
const cleanup: (() => Promise<unknown>)[] = [];

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "stripe-fake-"));
});
afterEach(async () => {
  for (const undo of cleanup.splice(0).reverse()) await undo();
  await rm(folder, { recursive: true, force: true });
});

/** A clock that stands still until it is told to move. Milliseconds. */
class Clock {
  time = Date.now();
  readonly now = () => this.time;
  forward(seconds: number): void {
    this.time += seconds * 1000;
  }
  get seconds(): number {
    return Math.floor(this.time / 1000);
  }
}

function client(port: number, key = KEY): Stripe {
  return new Stripe(key, {
    host: "127.0.0.1",
    port,
    protocol: "http",
    maxNetworkRetries: 0,
    timeout: 10_000,
  });
}

async function start(options: Partial<StripeFakeOptions> = {}) {
  const fake: StripeFake = createStripeFake({
    port: 0,
    dataDir: folder,
    secretKey: KEY,
    webhookSecret: SECRET,
    backoffMs: () => 0,
    ...options,
  });
  const { port, url } = await fake.listen();
  let open = true;
  const close = async () => {
    if (open) await fake.close();
    open = false;
  };
  cleanup.push(close);
  const json = async (path: string, body?: object) => {
    const answer = await fetch(`${url}${path}`, body ? { method: "POST", body: JSON.stringify(body) } : {});
    return { status: answer.status, body: await answer.json() };
  };
  return {
    fake,
    url,
    port,
    close,
    json,
    stripe: client(port),
    switches: (change: object) => json("/-/switches", change),
  };
}

function order(more: Partial<Stripe.Checkout.SessionCreateParams> = {}): Stripe.Checkout.SessionCreateParams {
  return {
    mode: "payment",
    line_items: [
      {
        price_data: {
          currency: "eur",
          unit_amount: 24_000,
          product_data: { name: "Pell Wood, hollow way, 7/25" },
        },
        quantity: 1,
      },
      { price_data: { currency: "eur", unit_amount: 500, product_data: { name: "Tissue" } }, quantity: 2 },
    ],
    customer_email: "ada.thorne@post.example",
    client_reference_id: "order-1042",
    metadata: { order: "1042" },
    payment_intent_data: { description: "Order 1042", metadata: { order: "1042" } },
    success_url: `${SHOP}/orders/abc?session={CHECKOUT_SESSION_ID}`,
    cancel_url: `${SHOP}/basket`,
    ...more,
  };
}

/** Fills in the payment page as a browser without scripts would. */
function submit(
  address: string | null,
  number: string,
  more: Record<string, string> = {},
): Promise<Response> {
  const fields = {
    card_number: number,
    card_expiry: "12/40",
    card_cvc: "123",
    card_name: "Ada Thorne",
    ...more,
  };
  return fetch(address ?? "", { method: "POST", body: new URLSearchParams(fields), redirect: "manual" });
}

async function fault(promise: Promise<unknown>): Promise<Stripe.errors.StripeError> {
  try {
    await promise;
  } catch (error) {
    if (error instanceof Stripe.errors.StripeError) return error;
    throw error;
  }
  throw new Error("the request succeeded");
}

/** An endpoint that takes webhooks, answering each with the status it is told. */
async function receiver(port = 0) {
  const taken: { body: string; signature: string; status: number }[] = [];
  const waiting: { count: number; done: () => void }[] = [];
  let status: (nth: number) => number = () => 200;
  const server: Server = createServer(async (request, response) => {
    let body = "";
    for await (const part of request) body += part;
    response.statusCode = status(taken.length + 1);
    response.end();
    taken.push({ body, signature: String(request.headers["stripe-signature"]), status: response.statusCode });
    for (const wait of waiting) if (taken.length >= wait.count) wait.done();
  });
  server.listen(port, "127.0.0.1");
  await once(server, "listening");
  cleanup.push(async () => {
    server.closeAllConnections();
    server.close();
  });
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/hooks/stripe`,
    taken,
    types: () => taken.map(({ body }) => JSON.parse(body).type as string),
    answer: (next: (nth: number) => number) => {
      status = next;
    },
    /** Resolves once so many requests have come. */
    received: (count: number) =>
      new Promise<void>((done) => {
        waiting.push({ count, done });
        if (taken.length >= count) done();
      }),
  };
}

describe("checkout sessions through the SDK", () => {
  test("a session is made, read back with its lines, and listed", async () => {
    const { stripe, url } = await start();
    const made = await stripe.checkout.sessions.create(order());
    expect(made).toMatchObject({
      object: "checkout.session",
      amount_subtotal: 25_000,
      amount_total: 25_000,
      currency: "eur",
      status: "open",
      payment_status: "unpaid",
      payment_intent: null,
      livemode: false,
      client_reference_id: "order-1042",
      metadata: { order: "1042" },
    });
    expect(made.id).toMatch(/^cs_test_\w+$/);
    expect(made.url).toBe(`${url}/pay/${made.id}`);
    expect(made.expires_at - made.created).toBe(24 * HOUR);
    expect(made.line_items).toBeUndefined();

    const read = await stripe.checkout.sessions.retrieve(made.id, {
      expand: ["line_items", "payment_intent"],
    });
    expect(read.line_items?.data.map((line) => [line.description, line.quantity, line.amount_total])).toEqual(
      [
        ["Pell Wood, hollow way, 7/25", 1, 24_000],
        ["Tissue", 2, 1_000],
      ],
    );
    expect(read.line_items?.data[0]?.price?.unit_amount_decimal?.toString()).toBe("24000");

    const lines = await stripe.checkout.sessions.listLineItems(made.id, { limit: 1 });
    expect(lines.has_more).toBe(true);
    const rest = await stripe.checkout.sessions.listLineItems(made.id, {
      starting_after: lines.data[0]?.id ?? "",
    });
    expect(rest.data.map((line) => line.description)).toEqual(["Tissue"]);
  });

  test("lists run newest first, page, and filter", async () => {
    const clock = new Clock();
    const { stripe, json } = await start({ now: clock.now });
    const ids: string[] = [];
    for (let at = 0; at < 5; at += 1) {
      ids.unshift((await stripe.checkout.sessions.create(order())).id);
      clock.forward(60);
    }
    const page = await stripe.checkout.sessions.list({ limit: 2 });
    expect(page.data.map(({ id }) => id)).toEqual(ids.slice(0, 2));
    expect(page.has_more).toBe(true);
    const all: string[] = [];
    for await (const session of stripe.checkout.sessions.list({ limit: 2 })) all.push(session.id);
    expect(all).toEqual(ids);

    const recent = await stripe.checkout.sessions.list({ created: { gte: clock.seconds - 120 } });
    expect(recent.data.map(({ id }) => id)).toEqual(ids.slice(0, 2));

    await json(`/-/sessions/${ids[3]}/pay`, {});
    const done = await stripe.checkout.sessions.list({ status: "complete" });
    expect(done.data.map(({ id }) => id)).toEqual([ids[3]]);
    const byIntent = await stripe.checkout.sessions.list({
      payment_intent: String(done.data[0]?.payment_intent),
    });
    expect(byIntent.data.map(({ id }) => id)).toEqual([ids[3]]);
  });

  test("delivery is part of the total, and the payer may choose among several", async () => {
    const { stripe } = await start();
    const rate = (display_name: string, amount: number) => ({
      shipping_rate_data: {
        display_name,
        type: "fixed_amount" as const,
        fixed_amount: { amount, currency: "eur" },
      },
    });
    const session = await stripe.checkout.sessions.create(
      order({ shipping_options: [rate("Flat parcel", 1_200), rate("Courier", 3_400)] }),
    );
    expect(session).toMatchObject({
      amount_subtotal: 25_000,
      amount_total: 26_200,
      shipping_cost: { amount_total: 1_200 },
      total_details: { amount_shipping: 1_200 },
    });
    const page = await (await fetch(session.url ?? "")).text();
    expect(page).toContain("€262.00 in all");
    expect(page).toContain("€284.00 in all");
    const paid = await submit(session.url, "4242424242424242", { shipping_option: "1" });
    expect(paid.status).toBe(303);
    const read = await stripe.checkout.sessions.retrieve(session.id, { expand: ["payment_intent"] });
    expect(read.amount_total).toBe(28_400);
    expect((read.payment_intent as Stripe.PaymentIntent).amount_received).toBe(28_400);
  });

  test("expires_at is held between 30 minutes and 24 hours", async () => {
    const clock = new Clock();
    const { stripe } = await start({ now: clock.now });
    for (const seconds of [HOUR / 2 - 1, 24 * HOUR + 1]) {
      const error = await fault(
        stripe.checkout.sessions.create(order({ expires_at: clock.seconds + seconds })),
      );
      expect(error).toBeInstanceOf(Stripe.errors.StripeInvalidRequestError);
      expect(error).toMatchObject({ statusCode: 400, rawType: "invalid_request_error", param: "expires_at" });
    }
    for (const seconds of [HOUR / 2, 24 * HOUR]) {
      const session = await stripe.checkout.sessions.create(order({ expires_at: clock.seconds + seconds }));
      expect(session.expires_at).toBe(clock.seconds + seconds);
    }
  });

  test("an open session can be expired once; a paid one cannot", async () => {
    const { stripe, json } = await start();
    const open = await stripe.checkout.sessions.create(order());
    expect(await stripe.checkout.sessions.expire(open.id)).toMatchObject({ status: "expired", url: null });
    const again = await fault(stripe.checkout.sessions.expire(open.id));
    expect(again).toBeInstanceOf(Stripe.errors.StripeInvalidRequestError);
    expect(again.statusCode).toBe(400);
    expect((await json(`/-/sessions/${open.id}/pay`, {})).body).toMatchObject({
      kind: "closed",
      status: "expired",
    });

    const paid = await stripe.checkout.sessions.create(order());
    await json(`/-/sessions/${paid.id}/pay`, {});
    expect((await fault(stripe.checkout.sessions.expire(paid.id))).statusCode).toBe(400);
    expect((await stripe.checkout.sessions.retrieve(paid.id)).status).toBe("complete");
  });

  test("a session ends by itself at its time, tells of it, and can no longer be paid", async () => {
    const clock = new Clock();
    const { stripe, fake } = await start({ now: clock.now });
    const session = await stripe.checkout.sessions.create(order({ expires_at: clock.seconds + HOUR / 2 }));
    await submit(session.url, "4000000000000002");
    clock.forward(HOUR / 2 - 1);
    fake.tick();
    expect((await stripe.checkout.sessions.retrieve(session.id)).status).toBe("open");
    clock.forward(1);
    const late = await submit(session.url, "4242424242424242");
    expect(await late.text()).toContain("This payment page has ended");

    const read = await stripe.checkout.sessions.retrieve(session.id, { expand: ["payment_intent"] });
    expect(read).toMatchObject({ status: "expired", payment_status: "unpaid" });
    expect(read.payment_intent).toMatchObject({ status: "canceled", amount_received: 0 });
    const events = await stripe.events.list({ types: ["checkout.session.expired"] });
    expect(events.data).toHaveLength(1);
    expect(events.data[0]?.data.object).toMatchObject({ id: session.id, status: "expired" });
    fake.tick();
    expect((await stripe.events.list({ types: ["checkout.session.expired"] })).data).toHaveLength(1);
  });

  test("mistakes come back as Stripe's errors", async () => {
    const { stripe, port, url } = await start();
    const unauthorized = await fault(client(port, "sk_test_somebody_else").checkout.sessions.list());
    expect(unauthorized).toBeInstanceOf(Stripe.errors.StripeAuthenticationError);
    expect(unauthorized).toMatchObject({ statusCode: 401, rawType: "invalid_request_error" });
    expect(unauthorized.message).not.toContain("somebody_else");

    const missing = await fault(stripe.checkout.sessions.retrieve("cs_test_none"));
    expect(missing).toBeInstanceOf(Stripe.errors.StripeInvalidRequestError);
    expect(missing).toMatchObject({ statusCode: 404, code: "resource_missing" });
    expect(missing.requestId).toMatch(/^req_/);

    const unknown = await fault(stripe.customers.list());
    expect(unknown).toBeInstanceOf(Stripe.errors.StripeInvalidRequestError);
    expect(unknown).toMatchObject({ statusCode: 404, rawType: "invalid_request_error" });

    const { success_url: _left, ...incomplete } = order();
    expect(await fault(stripe.checkout.sessions.create(incomplete))).toMatchObject({
      code: "parameter_missing",
      param: "success_url",
    });
    const odd = { ...order(), wrapping: "gold" };
    expect(await fault(stripe.checkout.sessions.create(odd))).toMatchObject({
      code: "parameter_unknown",
      param: "wrapping",
    });
    const half = order();
    half.line_items = [
      { price_data: { currency: "eur", unit_amount: 1.5, product_data: { name: "Half" } }, quantity: 1 },
    ];
    expect(await fault(stripe.checkout.sessions.create(half))).toMatchObject({
      code: "parameter_invalid_integer",
      param: "line_items[0][price_data][unit_amount]",
    });
    const cheap = order();
    cheap.line_items = [
      { price_data: { currency: "eur", unit_amount: 49, product_data: { name: "Card" } }, quantity: 1 },
    ];
    expect(await fault(stripe.checkout.sessions.create(cheap))).toMatchObject({ code: "amount_too_small" });
    expect((await fault(stripe.checkout.sessions.list({ limit: 101 }))).param).toBe("limit");

    const bare = await fetch(`${url}/v1/checkout/sessions`);
    expect(bare.status).toBe(401);
    expect(await bare.json()).toMatchObject({ error: { type: "invalid_request_error" } });
  });

  test("another version of the API is refused by name", async () => {
    const { url } = await start();
    const answer = await fetch(`${url}/v1/events`, {
      headers: { authorization: `Bearer ${KEY}`, "stripe-version": "2019-12-03" },
    });
    expect(answer.status).toBe(400);
    expect((await answer.json()).error.message).toContain("2019-12-03");
  });
});

describe("the payment page", () => {
  test("a decline leaves the page open, then another card pays, once", async () => {
    const { stripe, json } = await start();
    const session = await stripe.checkout.sessions.create(
      order({ custom_text: { submit: { message: "Held for you until 14:40 (Europe/London)." } } }),
    );
    const page = await (await fetch(session.url ?? "")).text();
    expect(page).toContain("Test payment page – no money moves");
    expect(page).toContain("Pell Wood, hollow way, 7/25");
    expect(page).toContain("€250.00");
    expect(page).toContain("Held for you until 14:40 (Europe/London).");
    expect(page).toContain(`href="${SHOP}/basket"`);
    expect(page).not.toMatch(/<script|\sstyle=|<style|\son\w+=/);

    const declined = await submit(session.url, "4000 0000 0000 0002");
    expect(declined.status).toBe(400);
    const words = await declined.text();
    expect(words).toContain("bank said no");
    expect(words).toContain('value="Ada Thorne"');
    const open = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ["payment_intent", "payment_intent.latest_charge"],
    });
    expect(open).toMatchObject({ status: "open", payment_status: "unpaid" });
    expect(open.payment_intent).toMatchObject({
      status: "requires_payment_method",
      last_payment_error: { type: "card_error", code: "card_declined", decline_code: "generic_decline" },
      latest_charge: { status: "failed", paid: false, failure_code: "card_declined" },
    });

    const [first, second] = await Promise.all([
      submit(session.url, "4242424242424242"),
      submit(session.url, "4242424242424242"),
    ]);
    const success = `${SHOP}/orders/abc?session=${session.id}`;
    expect([first.status, second.status]).toEqual([303, 303]);
    expect([first.headers.get("location"), second.headers.get("location")]).toEqual([success, success]);

    const paid = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ["payment_intent.latest_charge"],
    });
    expect(paid).toMatchObject({
      status: "complete",
      payment_status: "paid",
      url: null,
      customer_details: { email: "ada.thorne@post.example", name: "Ada Thorne" },
    });
    const intent = paid.payment_intent as Stripe.PaymentIntent;
    expect(intent.id).toBe((open.payment_intent as Stripe.PaymentIntent).id);
    expect(intent).toMatchObject({
      status: "succeeded",
      amount_received: 25_000,
      metadata: { order: "1042" },
    });
    const charge = intent.latest_charge as Stripe.Charge;
    expect(charge.payment_method_details?.card).toMatchObject({
      brand: "visa",
      last4: "4242",
      exp_month: 12,
      exp_year: 2040,
    });
    expect(await json(`/-/sessions/${session.id}/pay`, {})).toMatchObject({
      status: 409,
      body: { kind: "closed", status: "complete" },
    });
    const charges = await stripe.charges.list({ payment_intent: intent.id });
    expect(charges.data.filter((each) => each.paid)).toHaveLength(1);
    const completed = await stripe.events.list({ type: "checkout.session.completed" });
    expect(completed.data).toHaveLength(1);

    const after = await (await fetch(`${session.url}`)).text();
    expect(after).toContain("This has been paid");
    expect(after).toContain(`href="${success}"`);
  });

  test("too little money is its own reason", async () => {
    const { stripe } = await start();
    const session = await stripe.checkout.sessions.create(order());
    const answer = await submit(session.url, "4000000000009995");
    expect(await answer.text()).toContain("not enough money");
    const { data } = await stripe.paymentIntents.list({ limit: 1 });
    expect(data[0]?.last_payment_error).toMatchObject({
      code: "card_declined",
      decline_code: "insufficient_funds",
    });
  });

  test("a card that asks its holder is paid after yes, and open after no", async () => {
    const { stripe } = await start();
    const session = await stripe.checkout.sessions.create(order());
    const question = `${session.url}/authenticate`;
    const answer = (words: string) =>
      fetch(question, { method: "POST", body: new URLSearchParams({ answer: words }), redirect: "manual" });

    const asked = await submit(session.url, "4000002500003155");
    expect(asked.status).toBe(303);
    expect(new URL(asked.headers.get("location") ?? "", session.url ?? "").href).toBe(question);
    expect(await (await fetch(question)).text()).toContain("ending in 3155");
    const { data } = await stripe.paymentIntents.list();
    expect(data[0]?.status).toBe("requires_action");

    const refused = await answer("refuse");
    expect(refused.status).toBe(303);
    const back = await fetch(new URL(refused.headers.get("location") ?? "", session.url ?? ""));
    expect(await back.text()).toContain("The payment was not approved.");
    expect((await stripe.checkout.sessions.retrieve(session.id)).status).toBe("open");
    expect((await stripe.paymentIntents.retrieve(data[0]?.id ?? "")).last_payment_error?.code).toBe(
      "payment_intent_authentication_failure",
    );

    await submit(session.url, "4000002500003155");
    const approved = await answer("approve");
    expect(approved.headers.get("location")).toBe(`${SHOP}/orders/abc?session=${session.id}`);
    const paid = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ["payment_intent.latest_charge"],
    });
    const charge = (paid.payment_intent as Stripe.PaymentIntent).latest_charge as Stripe.Charge;
    expect(charge.payment_method_details?.card?.three_d_secure?.result).toBe("authenticated");
  });

  test("what is filled in wrong is named beside its field, and nothing is tried", async () => {
    const { stripe } = await start();
    const session = await stripe.checkout.sessions.create(order({ locale: "de" }));
    const answer = await submit(session.url, "4242 4242 4242 4241", {
      card_expiry: "01/20",
      card_cvc: "1",
      card_name: "<b>Ada</b>",
    });
    expect(answer.status).toBe(400);
    const page = await answer.text();
    expect(page).toContain('<html lang="de">');
    expect(page).toContain("Test-Bezahlseite");
    for (const name of ["card_number", "card_expiry", "card_cvc"]) {
      expect(page).toContain(`href="#${name}"`);
      expect(page).toMatch(new RegExp(`<input id="${name}"[^>]*aria-invalid="true"`));
    }
    expect(page).toContain("&lt;b&gt;Ada&lt;/b&gt;");
    expect(page).not.toContain("<b>Ada");
    expect((await stripe.paymentIntents.list()).data).toEqual([]);
  });

  test("a session without an address asks for one", async () => {
    const { stripe } = await start();
    const { customer_email: _left, ...anonymous } = order();
    const session = await stripe.checkout.sessions.create(anonymous);
    expect(await (await submit(session.url, "4242424242424242")).text()).toContain('href="#email"');
    await submit(session.url, "4242424242424242", { email: "noor@post.example" });
    const paid = await stripe.checkout.sessions.retrieve(session.id);
    expect(paid.customer_details?.email).toBe("noor@post.example");
  });

  test("a page that never was says so", async () => {
    const { url } = await start();
    const answer = await fetch(`${url}/pay/cs_test_none`);
    expect(answer.status).toBe(404);
    expect(await answer.text()).toContain("There is no such payment page");
  });
});

describe("idempotency keys", () => {
  const key = { idempotencyKey: "order-1042-session-1" };

  test("the same request under the same key gets the same answer again", async () => {
    const { stripe } = await start();
    const first = await stripe.checkout.sessions.create(order(), key);
    const again = await stripe.checkout.sessions.create(order(), key);
    expect(again.id).toBe(first.id);
    expect(first.lastResponse.headers["idempotent-replayed"]).toBeUndefined();
    expect(again.lastResponse.headers["idempotent-replayed"]).toBe("true");
    expect(again.lastResponse.headers["original-request"]).toBe(first.lastResponse.requestId);
    expect((await stripe.checkout.sessions.list()).data).toHaveLength(1);
  });

  test("other parameters, or another address, under the same key are refused", async () => {
    const { stripe } = await start();
    const session = await stripe.checkout.sessions.create(order(), key);
    const changed = await fault(
      stripe.checkout.sessions.create(order({ client_reference_id: "order-1043" }), key),
    );
    expect(changed).toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
    expect(changed).toMatchObject({ statusCode: 400, rawType: "idempotency_error" });
    const elsewhere = await fault(stripe.checkout.sessions.expire(session.id, {}, key));
    expect(elsewhere).toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
    expect((await stripe.checkout.sessions.retrieve(session.id)).status).toBe("open");
  });

  test("while the first still runs, a second is told that the key is in use", async () => {
    const { stripe, switches } = await start();
    await switches({ api: { match: "POST", delayBeforeMs: 200 } });
    const results = await Promise.allSettled([
      stripe.checkout.sessions.create(order(), key),
      stripe.checkout.sessions.create(order(), key),
    ]);
    const refused = results.flatMap((result) => (result.status === "rejected" ? [result.reason] : []));
    expect(refused).toHaveLength(1);
    expect(refused[0]).toMatchObject({
      statusCode: 409,
      rawType: "idempotency_error",
      code: "idempotency_key_in_use",
    });
    await switches({ reset: true });
    const later = await stripe.checkout.sessions.create(order(), key);
    expect(later.lastResponse.headers["idempotent-replayed"]).toBe("true");
  });

  test("a key is forgotten after 24 hours", async () => {
    const clock = new Clock();
    const { stripe } = await start({ now: clock.now });
    const first = await stripe.checkout.sessions.create(order(), key);
    clock.forward(24 * HOUR - 1);
    expect((await stripe.checkout.sessions.create(order(), key)).id).toBe(first.id);
    clock.forward(1);
    const second = await stripe.checkout.sessions.create(order(), key);
    expect(second.id).not.toBe(first.id);
    expect(second.lastResponse.headers["idempotent-replayed"]).toBeUndefined();
  });

  test("a failure that had begun is replayed; a parameter that never passed is not", async () => {
    const { stripe, switches } = await start();
    const session = await stripe.checkout.sessions.create(order());
    await stripe.checkout.sessions.expire(session.id);
    const first = await fault(stripe.checkout.sessions.expire(session.id, {}, { idempotencyKey: "expire" }));
    const again = await fault(stripe.checkout.sessions.expire(session.id, {}, { idempotencyKey: "expire" }));
    expect(again.message).toBe(first.message);
    expect(again.headers?.["idempotent-replayed"]).toBe("true");

    await fault(stripe.checkout.sessions.create(order({ success_url: "nowhere" }), key));
    expect((await stripe.checkout.sessions.create(order(), key)).status).toBe("open");

    await switches({
      api: { match: "POST /v1/checkout/sessions", fail: { count: 1, status: 500, after: true } },
    });
    const broken = { idempotencyKey: "broken" };
    const failed = await fault(stripe.checkout.sessions.create(order(), broken));
    expect(failed).toBeInstanceOf(Stripe.errors.StripeAPIError);
    const replayed = await fault(stripe.checkout.sessions.create(order(), broken));
    expect(replayed).toMatchObject({ statusCode: 500 });
    expect(replayed.headers?.["idempotent-replayed"]).toBe("true");
    // It had been done all the same: the session is there for whoever looks.
    expect((await stripe.checkout.sessions.list()).data).toHaveLength(3);
  });

  test("the SDK's own retry after a lost answer makes no second session", async () => {
    const { stripe, switches } = await start();
    await switches({ api: { match: "POST", dropAfter: 1 } });
    const session = await stripe.checkout.sessions.create(order());
    expect(session.lastResponse.headers["idempotent-replayed"]).toBe("true");
    expect((await stripe.checkout.sessions.list()).data.map(({ id }) => id)).toEqual([session.id]);
  });
});

describe("refunds and charges", () => {
  async function paidIntent(card = "4242424242424242") {
    const clock = new Clock();
    const world = await start({ now: clock.now, refundSettleMs: 60_000 });
    const session = await world.stripe.checkout.sessions.create(order());
    const { body } = await world.json(`/-/sessions/${session.id}/pay`, { card });
    return { ...world, clock, intent: String(body.session.payment_intent) };
  }

  test("part, then the rest, then no more", async () => {
    const { stripe, intent } = await paidIntent();
    const part = await stripe.refunds.create({
      payment_intent: intent,
      amount: 10_000,
      metadata: { line: "2" },
    });
    expect(part).toMatchObject({
      object: "refund",
      amount: 10_000,
      status: "succeeded",
      payment_intent: intent,
    });
    expect(part.id).toMatch(/^re_/);

    const tooMuch = await fault(stripe.refunds.create({ payment_intent: intent, amount: 15_001 }));
    expect(tooMuch).toBeInstanceOf(Stripe.errors.StripeInvalidRequestError);
    expect(tooMuch).toMatchObject({ statusCode: 400, param: "amount" });

    const rest = await stripe.refunds.create({ payment_intent: intent });
    expect(rest.amount).toBe(15_000);
    const none = await fault(stripe.refunds.create({ payment_intent: intent }));
    expect(none).toMatchObject({ statusCode: 400, code: "charge_already_refunded" });

    expect((await stripe.refunds.retrieve(part.id)).metadata).toEqual({ line: "2" });
    const list = await stripe.refunds.list({ payment_intent: intent });
    expect(list.data.map(({ id }) => id)).toEqual([rest.id, part.id]);
    const charge = await stripe.charges.retrieve(String(rest.charge), { expand: ["refunds"] });
    expect(charge).toMatchObject({ amount_refunded: 25_000, refunded: true });
    expect(charge.refunds?.data).toHaveLength(2);
    const events = await stripe.events.list({ types: ["charge.refunded", "refund.created"] });
    expect(events.data.map(({ type }) => type).sort()).toEqual([
      "charge.refunded",
      "charge.refunded",
      "refund.created",
      "refund.created",
    ]);
  });

  test("one refund under one key", async () => {
    const { stripe, intent } = await paidIntent();
    const key = { idempotencyKey: "refund-1" };
    const asked = { payment_intent: intent, amount: 5_000 };
    const first = await stripe.refunds.create(asked, key);
    expect((await stripe.refunds.create(asked, key)).id).toBe(first.id);
    expect((await stripe.refunds.list({ payment_intent: intent })).data).toHaveLength(1);
  });

  test("a slow refund ends in its time", async () => {
    const { stripe, fake, intent, clock } = await paidIntent("4000000000007726");
    const refund = await stripe.refunds.create({ payment_intent: intent });
    expect(refund.status).toBe("pending");
    clock.forward(60);
    fake.tick();
    expect((await stripe.refunds.retrieve(refund.id)).status).toBe("succeeded");
    expect((await stripe.events.list({ type: "refund.updated" })).data).toHaveLength(1);
  });

  test("a refund that the bank sends back leaves the charge as it was", async () => {
    const { stripe, fake, intent, clock } = await paidIntent("4000000000005126");
    const refund = await stripe.refunds.create({ payment_intent: intent, amount: 4_000 });
    expect(refund.status).toBe("succeeded");
    clock.forward(60);
    fake.tick();
    expect((await stripe.refunds.retrieve(refund.id)).status).toBe("failed");
    expect((await stripe.charges.retrieve(String(refund.charge))).amount_refunded).toBe(0);
    expect((await stripe.events.list({ type: "refund.failed" })).data).toHaveLength(1);
  });

  test("an unpaid intent has nothing to refund, and is ended through its session", async () => {
    const { stripe } = await start();
    const session = await stripe.checkout.sessions.create(order());
    await submit(session.url, "4000000000000002");
    const intent = String((await stripe.checkout.sessions.retrieve(session.id)).payment_intent);
    expect(await fault(stripe.refunds.create({ payment_intent: intent }))).toMatchObject({
      param: "payment_intent",
    });
    expect(await fault(stripe.paymentIntents.cancel(intent))).toMatchObject({
      statusCode: 400,
      rawType: "invalid_request_error",
    });
    await submit(session.url, "4242424242424242");
    expect(await fault(stripe.paymentIntents.cancel(intent))).toMatchObject({
      code: "payment_intent_unexpected_state",
    });
  });
});

describe("webhooks", () => {
  test("are signed so that the SDK accepts them, and only unaltered", async () => {
    const endpoint = await receiver();
    const { stripe, json, fake } = await start({ webhookUrl: endpoint.url });
    const session = await stripe.checkout.sessions.create(order());
    await json(`/-/sessions/${session.id}/pay`, {});
    await endpoint.received(2);
    await fake.flushWebhooks();
    const events = endpoint.taken.map(({ body, signature }) =>
      stripe.webhooks.constructEvent(body, signature, SECRET),
    );
    expect(events.map(({ type }) => type).sort()).toEqual([
      "checkout.session.completed",
      "payment_intent.succeeded",
    ]);
    const completed = events.find(({ type }) => type === "checkout.session.completed");
    expect(completed?.data.object).toMatchObject({ id: session.id, payment_status: "paid" });
    expect(completed?.id).toMatch(/^evt_/);
    expect(await stripe.events.retrieve(completed?.id ?? "")).toMatchObject({ pending_webhooks: 0 });

    const [first] = endpoint.taken;
    const altered = first?.body.replace("25000", "1") ?? "";
    expect(altered).not.toBe(first?.body);
    expect(() => stripe.webhooks.constructEvent(altered, first?.signature ?? "", SECRET)).toThrow(
      Stripe.errors.StripeSignatureVerificationError,
    );
  });

  test("come again until the endpoint takes them, signed anew", async () => {
    const endpoint = await receiver();
    endpoint.answer((nth) => (nth <= 3 ? 500 : 200));
    const clock = new Clock();
    const waits: number[] = [];
    const { stripe, fake } = await start({
      webhookUrl: endpoint.url,
      now: clock.now,
      backoffMs: (attempt) => {
        waits.push(attempt);
        return attempt * 10_000;
      },
    });
    const session = await stripe.checkout.sessions.create(order());
    await stripe.checkout.sessions.expire(session.id);
    await endpoint.received(1);
    for (let attempt = 2; attempt <= 4; attempt += 1) {
      await fake.flushWebhooks();
      expect(endpoint.taken).toHaveLength(attempt);
      clock.forward(1);
    }
    expect(waits).toEqual([1, 2, 3]);
    expect(new Set(endpoint.taken.map(({ body }) => JSON.parse(body).id)).size).toBe(1);
    expect(new Set(endpoint.taken.map(({ signature }) => signature)).size).toBe(3);
    expect(await fake.flushWebhooks()).toEqual({ delivered: 0, failed: 0 });
  });

  test("back off: nothing is sent before its time", async () => {
    const endpoint = await receiver();
    endpoint.answer((nth) => (nth === 1 ? 503 : 200));
    const clock = new Clock();
    const { stripe, fake, json } = await start({
      webhookUrl: endpoint.url,
      now: clock.now,
      backoffMs: () => 30_000,
    });
    const session = await stripe.checkout.sessions.create(order());
    await stripe.checkout.sessions.expire(session.id);
    await endpoint.received(1);
    // The endpoint's answer has still to reach the fake.
    await expect.poll(async () => (await json("/-/events")).body[0].delivery.attempts).toBe(1);
    expect((await json("/-/events")).body[0].delivery).toMatchObject({
      state: "pending",
      lastError: "answered 503",
    });
    fake.tick();
    clock.forward(29);
    fake.tick();
    await json("/-/health");
    expect(endpoint.taken).toHaveLength(1);
    clock.forward(1);
    fake.tick();
    await endpoint.received(2);
    await fake.flushWebhooks();
    expect(endpoint.taken).toHaveLength(2);
  });

  test("switches hold, multiply, turn round and lose them", async () => {
    const endpoint = await receiver();
    const { stripe, json, switches } = await start({ webhookUrl: endpoint.url });
    const pay = async () => {
      const session = await stripe.checkout.sessions.create(order());
      await json(`/-/sessions/${session.id}/pay`, {});
    };
    await switches({ webhooks: { hold: true } });
    await pay();
    await json("/-/health");
    expect(endpoint.taken).toHaveLength(0);
    expect((await json("/-/webhooks/flush", {})).body).toEqual({ delivered: 2, failed: 0 });
    expect(endpoint.taken).toHaveLength(2);

    endpoint.taken.length = 0;
    await switches({ webhooks: { hold: true, copies: 2, reverse: true } });
    await pay();
    await json("/-/webhooks/flush", {});
    expect(endpoint.types()).toEqual([
      "checkout.session.completed",
      "checkout.session.completed",
      "payment_intent.succeeded",
      "payment_intent.succeeded",
    ]);

    endpoint.taken.length = 0;
    await switches({ reset: true, webhooks: { hold: true, dropNext: 2 } });
    await pay();
    expect((await json("/-/webhooks/flush", {})).body).toEqual({ delivered: 0, failed: 0 });
    expect(endpoint.taken).toHaveLength(0);
    const events = await json("/-/events?type=checkout.session.completed");
    expect(events.body[0].delivery.state).toBe("dropped");
  });
});

describe("faults on demand", () => {
  test("errors map to the SDK's classes and leave nothing behind", async () => {
    const { stripe, switches } = await start();
    const wanted = [
      [429, Stripe.errors.StripeRateLimitError],
      [500, Stripe.errors.StripeAPIError],
      [503, Stripe.errors.StripeAPIError],
    ] as const;
    for (const [status, kind] of wanted) {
      await switches({ reset: true, api: { fail: { count: 1, status } } });
      const key = { idempotencyKey: `fails-${status}` };
      const error = await fault(stripe.checkout.sessions.create(order(), key));
      expect(error).toBeInstanceOf(kind);
      expect(error.statusCode).toBe(status);
      expect((await stripe.checkout.sessions.create(order(), key)).status).toBe("open");
    }
    expect((await stripe.checkout.sessions.list()).data).toHaveLength(3);
  });

  test("a connection cut before anything is done is a connection error", async () => {
    const { stripe, switches } = await start();
    // Two, because the SDK tries a cut connection once more of itself.
    await switches({ api: { match: "POST /v1/checkout/sessions", dropBefore: 2 } });
    expect(await fault(stripe.checkout.sessions.create(order()))).toBeInstanceOf(
      Stripe.errors.StripeConnectionError,
    );
    expect((await stripe.checkout.sessions.list()).data).toEqual([]);
  });

  test("a slow answer runs into the SDK's timeout, though the work is done", async () => {
    const { stripe, switches } = await start();
    await switches({ api: { match: "POST", delayAfterMs: 60_000 } });
    const error = await fault(stripe.checkout.sessions.create(order(), { timeout: 100 }));
    expect(error).toBeInstanceOf(Stripe.errors.StripeConnectionError);
    expect((await stripe.checkout.sessions.list()).data).toHaveLength(1);
  });

  test("switches are refused when misspelt, and to pages of other origins", async () => {
    const { switches, url } = await start();
    expect((await switches({ api: { dropBfore: 1 } })).status).toBe(400);
    const foreign = await fetch(`${url}/-/switches`, {
      method: "POST",
      headers: { origin: SHOP },
      body: "{}",
    });
    expect(foreign.status).toBe(403);
  });
});

// Starting a process takes a while where many tests share two cores.
describe("as a process", { timeout: 60_000 }, () => {
  async function freePort(): Promise<number> {
    const probe = createTcpServer();
    probe.listen(0, "127.0.0.1");
    await once(probe, "listening");
    const { port } = probe.address() as AddressInfo;
    probe.close();
    await once(probe, "close");
    return port;
  }

  function run(environment: Record<string, string>) {
    const child: ChildProcess = spawn(process.execPath, ["--import", "tsx", "scripts/stripe-fake/main.ts"], {
      env: {
        PATH: process.env.PATH ?? "",
        DATA_DIR: folder,
        STRIPE_SECRET_KEY: KEY,
        STRIPE_WEBHOOK_SECRET: SECRET,
        ...environment,
      },
    });
    let output = "";
    const ready = new Promise<void>((resolve) => {
      const read = (part: Buffer) => {
        output += part.toString("utf8");
        if (output.includes("listening on")) resolve();
      };
      child.stdout?.on("data", read);
      child.stderr?.on("data", read);
    });
    const ended = once(child, "close").then(([code, signal]) => ({ code, signal, output }));
    cleanup.push(async () => {
      child.kill("SIGKILL");
      await ended;
    });
    return { child, ready, ended };
  }

  test("its state and what it owes outlive kill -9", async () => {
    const endpoint = await receiver();
    endpoint.answer(() => 500);
    const port = await freePort();
    const environment = { STRIPE_PORT: String(port), STRIPE_WEBHOOK_URL: endpoint.url };
    const first = run(environment);
    await first.ready;
    const stripe = client(port);
    const key = { idempotencyKey: "before-the-end" };
    const session = await stripe.checkout.sessions.create(order(), key);
    await submit(session.url, "4242424242424242");
    await endpoint.received(2);
    first.child.kill("SIGKILL");
    expect((await first.ended).signal).toBe("SIGKILL");
    // As if it had died in the middle of a line.
    await appendFile(join(folder, "stripe", "journal.jsonl"), '[["sessions",{"id":"cs_test_ha');

    endpoint.answer(() => 200);
    const second = run(environment);
    await second.ready;
    const kept = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ["line_items", "payment_intent"],
    });
    expect(kept).toMatchObject({ status: "complete", payment_intent: { status: "succeeded" } });
    expect(kept.line_items?.data).toHaveLength(2);
    const replayed = await stripe.checkout.sessions.create(order(), key);
    expect(replayed.id).toBe(session.id);
    expect(replayed.lastResponse.headers["idempotent-replayed"]).toBe("true");
    const arrived = () =>
      endpoint.taken
        .filter(({ status }) => status === 200)
        .map(({ body, signature }) => stripe.webhooks.constructEvent(body, signature, SECRET).type);
    await expect
      .poll(() => [...new Set(arrived())].sort(), { timeout: 20_000 })
      .toEqual(["checkout.session.completed", "payment_intent.succeeded"]);

    // Not even a request that would hang for a minute keeps it from ending.
    await fetch(`http://127.0.0.1:${port}/-/switches`, {
      method: "POST",
      body: JSON.stringify({ api: { delayAfterMs: 60_000 } }),
    });
    const hanging = fault(stripe.events.list({}, { timeout: 60_000 }));
    const stopped = Date.now();
    second.child.kill("SIGTERM");
    expect((await second.ended).code).toBe(0);
    expect(Date.now() - stopped).toBeLessThan(5000);
    expect(await hanging).toBeInstanceOf(Stripe.errors.StripeConnectionError);

    const third = await start();
    expect((await third.stripe.checkout.sessions.retrieve(session.id)).status).toBe("complete");
  });

  test("it names the port that is taken", async () => {
    const { port } = await start({ dataDir: join(folder, "other") });
    const { code, output } = await run({ STRIPE_PORT: String(port) }).ended;
    expect(code).toBe(1);
    expect(output).toContain(`port ${port} on 127.0.0.1 is taken`);
  });

  test("it refuses production and live keys", async () => {
    const production = await run({ NUMBERLEAF_MODE: "production" }).ended;
    expect(production).toMatchObject({ code: 1 });
    expect(production.output).toContain("production");
    const live = await run({ STRIPE_SECRET_KEY: "sk_live_0001" }).ended;
    expect(live).toMatchObject({ code: 1 });
    expect(live.output).toContain("live key");
  });
});
