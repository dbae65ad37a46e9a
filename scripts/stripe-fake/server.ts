import { readFileSync } from "node:fs";
import { createServer, type IncomingMessage, type ServerResponse } from "node:http";
import { join } from "node:path";
import { setTimeout as wait } from "node:timers/promises";
import { z } from "zod";
import { routeFor } from "./api";
import { readCard } from "./cards";
import { badParameter, StripeFault, unknownAddress, wrongKey } from "./faults";
import { IdempotencyKeys } from "./idempotency";
import { newId } from "./ids";
import { API_VERSION } from "./objects";
import { mailAddress, readParameters } from "./parameters";
import {
  answersFor,
  authenticationPage,
  closedPage,
  type Mistakes,
  type PageState,
  payPage,
} from "./payment-page";
import {
  answerAuthentication,
  type Payer,
  type PaymentOutcome,
  submitCard,
  successAddress,
} from "./payments";
import { settleRefund } from "./refunds";
import { sessionNow } from "./sessions";
import { Changes, type SessionRecord, Store } from "./store";
import { changedSwitches, plainSwitches, type Switches, switchChange } from "./switches";
import { WebhookSender } from "./webhooks";
import { languageFor } from "./wording";

export type StripeFakeOptions = {
  /** 0 takes any free port; `listen` tells which. */
  port: number;
  host?: string;
  /** The folder whose `stripe` subfolder holds the state. */
  dataDir: string;
  secretKey: string;
  webhookSecret: string;
  /** Where events go; null keeps them to be listed only. */
  webhookUrl?: string | null;
  /** The base of the payment pages' addresses; default: where the fake listens. */
  publicUrl?: string;
  /** Milliseconds since 1970. */
  now?: () => number;
  /** Milliseconds to wait after the n-th failed delivery of an event, counted from 1. */
  backoffMs?: (attempt: number) => number;
  webhookTimeoutMs?: number;
  /** How long a refund takes that does not end at once. */
  refundSettleMs?: number;
};

export type StripeFake = {
  /** Starts listening; resolves with the address. Rejects with the system's error, e.g. EADDRINUSE. */
  listen: () => Promise<{ port: number; url: string }>;
  /** Ends everything within a second; unfinished deliveries go on at the next start. */
  close: () => Promise<void>;
  /** Does what has become due: sessions that end, refunds that settle, deliveries. Also done twice a second. */
  tick: () => void;
  /** Tries every delivery that is still owed, at once. */
  flushWebhooks: () => Promise<{ delivered: number; failed: number }>;
};

const TICK_MS = 500;
const LARGEST_BODY = 1024 * 1024;
const HTML_HEADERS = {
  "content-type": "text/html; charset=utf-8",
  "cache-control": "no-store",
  "referrer-policy": "no-referrer",
  "x-content-type-options": "nosniff",
  // No form-action: browsers hold it against redirects too, and paying ends with one to the shop.
  "content-security-policy":
    "default-src 'none'; style-src 'self'; font-src 'self'; img-src data:; base-uri 'none'; frame-ancestors 'none'",
};
const FONT_FOLDER = join(import.meta.dirname, "../../node_modules/@fontsource-variable");
const ASSETS: Record<string, { file: string; type: string }> = {
  "/assets/payment-page.css": {
    file: join(import.meta.dirname, "payment-page.css"),
    type: "text/css; charset=utf-8",
  },
  "/assets/title.woff2": {
    file: join(FONT_FOLDER, "cormorant-garamond/files/cormorant-garamond-latin-wght-normal.woff2"),
    type: "font/woff2",
  },
  "/assets/work.woff2": {
    file: join(FONT_FOLDER, "source-sans-3/files/source-sans-3-latin-wght-normal.woff2"),
    type: "font/woff2",
  },
};

const payDirectly = z.strictObject({
  card: z.string().default("4242424242424242"),
  name: z.string().default("Test Payer"),
  email: z.string().optional(),
  shipping_option: z.int().min(0).default(0),
  /** The holder's answer, for the card that asks; left out, the question stays open. */
  answer: z.enum(["approve", "refuse"]).optional(),
});

/** The connection was cut on purpose; there is nobody to answer. */
class Dropped extends Error {}

function readBody(request: IncomingMessage): Promise<string> {
  return new Promise((resolve, reject) => {
    const parts: Buffer[] = [];
    let size = 0;
    request.on("data", (part: Buffer) => {
      size += part.length;
      if (size <= LARGEST_BODY) parts.push(part);
    });
    request.on("end", () => {
      if (size > LARGEST_BODY) reject(badParameter("The request is too large.", "body"));
      else resolve(Buffer.concat(parts).toString("utf8"));
    });
    request.on("error", reject);
  });
}

function isLoopback(address: string | undefined): boolean {
  return address !== undefined && /^(::1$|127\.|::ffff:127\.)/.test(address);
}

function keyFrom(authorization: string | undefined): string | null {
  const bearer = /^Bearer (.+)$/i.exec(authorization ?? "")?.[1];
  if (bearer) return bearer;
  const basic = /^Basic (.+)$/i.exec(authorization ?? "")?.[1];
  return basic ? (Buffer.from(basic, "base64").toString("utf8").split(":")[0] ?? null) : null;
}

/** Exponential back-off from half a second to a minute. */
function plainBackoff(attempt: number): number {
  return Math.min(60_000, 500 * 2 ** (attempt - 1));
}

/** A server that speaks as much of Stripe's protocol as a shop with hosted payment pages needs. */
export function createStripeFake(options: StripeFakeOptions): StripeFake {
  const now = options.now ?? Date.now;
  const host = options.host ?? "127.0.0.1";
  const stop = new AbortController();
  let switches: Switches = plainSwitches();
  let address = "";
  let open: { store: Store; keys: IdempotencyKeys; sender: WebhookSender } | null = null;
  let timer: NodeJS.Timeout | undefined;

  const paymentPage = (id: string) => `${options.publicUrl ?? address}/pay/${id}`;

  function parts() {
    if (!open) throw new Error("the Stripe fake has not been started");
    return open;
  }

  /** Runs something that may change the state, keeps what it changed, and lets its events leave. */
  function change<Result>(run: (changes: Changes) => Result): Result {
    const { store, sender } = parts();
    const changes = new Changes(store, now());
    const result = run(changes);
    changes.commit();
    setImmediate(() => sender.send());
    return result;
  }

  function tick(): void {
    if (!open) return;
    const { store, sender } = open;
    change((changes) => {
      for (const { id, session } of store.all("sessions")) {
        if (session.status === "open") sessionNow(changes, id);
      }
      for (const refund of store.all("refunds")) if (refund.settles) settleRefund(changes, refund);
    });
    sender.send();
  }

  async function pause(milliseconds: number): Promise<void> {
    if (milliseconds === 0) return;
    try {
      await wait(milliseconds, undefined, { signal: stop.signal });
    } catch {
      throw new Dropped();
    }
  }

  function sendJson(
    response: ServerResponse,
    status: number,
    body: string,
    headers: Record<string, string> = {},
  ): void {
    response.writeHead(status, {
      "content-type": "application/json",
      "cache-control": "no-store",
      ...headers,
    });
    response.end(body);
  }

  /** The switch that applies to this request, counted down as it is used. */
  function struck(line: string): {
    dropBefore: boolean;
    dropAfter: boolean;
    fail: Switches["api"]["fail"] | null;
  } {
    const { api } = switches;
    const none = { dropBefore: false, dropAfter: false, fail: null };
    if (!line.startsWith(api.match)) return none;
    if (api.dropBefore > 0) {
      api.dropBefore -= 1;
      return { ...none, dropBefore: true };
    }
    if (api.fail.count > 0) {
      api.fail.count -= 1;
      return { ...none, fail: { ...api.fail } };
    }
    if (api.dropAfter > 0) {
      api.dropAfter -= 1;
      return { ...none, dropAfter: true };
    }
    return none;
  }

  function wantedFault(status: number, executed: boolean): StripeFault {
    const message =
      status === 429
        ? "Too many requests (a switch of this fake)."
        : "Something failed (a switch of this fake).";
    const code = status === 429 ? { code: "rate_limit" } : {};
    return new StripeFault(
      status,
      { type: status === 429 ? "invalid_request_error" : "api_error", message, ...code },
      executed,
    );
  }

  async function answerApi(request: IncomingMessage, response: ServerResponse, url: URL): Promise<void> {
    const { store, keys } = parts();
    const method = request.method ?? "GET";
    const line = `${method} ${url.pathname}`;
    const requestId = newId("req_", 14);
    const headers: Record<string, string> = { "request-id": requestId, "stripe-version": API_VERSION };
    const body = await readBody(request);
    const blow = struck(line);
    const applies = line.startsWith(switches.api.match);
    const { delayBeforeMs, delayAfterMs } = applies ? switches.api : plainSwitches().api;
    if (blow.dropBefore) throw new Dropped();

    let answer: { status: number; body: string };
    let claimed: string | null = null;
    try {
      if (blow.fail && !blow.fail.after) throw wantedFault(blow.fail.status, false);
      const key = keyFrom(request.headers.authorization);
      if (key !== options.secretKey) throw wrongKey(key);
      const version = request.headers["stripe-version"];
      if (version !== undefined && version !== API_VERSION) {
        throw badParameter(`This fake speaks ${API_VERSION}, not ${String(version)}.`, "Stripe-Version");
      }
      const route = routeFor(method, url.pathname);
      if (!route) throw unknownAddress(method, url.pathname);
      const sent = request.headers["idempotency-key"];
      const idempotencyKey = method === "POST" && typeof sent === "string" ? sent : null;
      const fingerprint = IdempotencyKeys.fingerprint(method, url.pathname, body);
      if (idempotencyKey !== null) {
        headers["idempotency-key"] = idempotencyKey;
        const kept = keys.claim(idempotencyKey, fingerprint, now());
        if (kept) {
          await pause(delayAfterMs);
          if (blow.dropAfter) throw new Dropped();
          sendJson(response, kept.status, kept.body, {
            ...headers,
            "idempotent-replayed": "true",
            "original-request": kept.requestId,
            ...(kept.status >= 500 && { "stripe-should-retry": "false" }),
          });
          return;
        }
        claimed = idempotencyKey;
        headers["original-request"] = requestId;
      }
      const text = method === "POST" ? body : url.search;
      const run = route(
        { store, paymentPage, refundSettleMs: options.refundSettleMs ?? 3000 },
        readParameters(text),
      );
      await pause(delayBeforeMs);

      const changes = new Changes(store, now(), { id: requestId, idempotencyKey });
      let finished: { status: number; body: string; changes: Changes };
      try {
        finished = { status: 200, body: JSON.stringify(run(changes), null, 2), changes };
        if (blow.fail?.after) {
          const fault = wantedFault(blow.fail.status, true);
          finished = { ...finished, status: fault.status, body: JSON.stringify({ error: fault.body }) };
        }
      } catch (error) {
        if (!(error instanceof StripeFault) || !error.executed) throw error;
        // What a request had changed before it failed is not kept; its answer is.
        const body = JSON.stringify({ error: error.body });
        finished = { status: error.status, body, changes: new Changes(store, changes.now) };
      }
      if (idempotencyKey !== null) {
        const { status, body: saved } = finished;
        keys.keep(finished.changes, {
          id: idempotencyKey,
          fingerprint,
          status,
          body: saved,
          requestId,
          at: changes.now,
        });
        if (status >= 500) headers["stripe-should-retry"] = "false";
      }
      finished.changes.commit();
      setImmediate(() => open?.sender.send());
      answer = finished;
    } catch (error) {
      if (!(error instanceof StripeFault)) throw error;
      answer = { status: error.status, body: JSON.stringify({ error: error.body }) };
    } finally {
      if (claimed !== null) keys.release(claimed);
    }
    await pause(delayAfterMs);
    if (blow.dropAfter) throw new Dropped();
    sendJson(response, answer.status, answer.body, headers);
  }

  function sendPage(response: ServerResponse, status: number, page: string): void {
    response.writeHead(status, HTML_HEADERS);
    response.end(page);
  }

  function goTo(response: ServerResponse, location: string): void {
    response.writeHead(303, { location, "cache-control": "no-store", "referrer-policy": "no-referrer" });
    response.end();
  }

  function lastDecline(record: SessionRecord): string | null {
    const id = typeof record.session.payment_intent === "string" ? record.session.payment_intent : "";
    const error = parts().store.get("intents", id)?.last_payment_error;
    return error?.decline_code ?? error?.code ?? null;
  }

  function showSession(
    response: ServerResponse,
    record: SessionRecord | undefined,
    acceptLanguage: string | undefined,
    state: PageState,
    status = 200,
  ): void {
    const language = languageFor(record?.session.locale ?? null, acceptLanguage);
    if (!record) sendPage(response, 404, closedPage("unknown", null, language));
    else if (record.session.status === "complete") {
      sendPage(response, 200, closedPage("complete", successAddress(record.session), language));
    } else if (record.session.status !== "open") {
      sendPage(response, 200, closedPage("expired", record.session.cancel_url, language));
    } else sendPage(response, status, payPage(record, language, state));
  }

  function follow(
    response: ServerResponse,
    outcome: PaymentOutcome,
    record: SessionRecord,
    acceptLanguage: string | undefined,
    answers: PageState["answers"],
  ): void {
    if (outcome.kind === "paid") goTo(response, outcome.redirect);
    else if (outcome.kind === "authenticate") goTo(response, `/pay/${record.id}/authenticate`);
    else if (outcome.kind === "closed" && outcome.status === "complete") {
      // The second click of a double click: paid once, and both end in the same place.
      goTo(response, successAddress(record.session));
    } else {
      const fresh = parts().store.get("sessions", record.id);
      const declined = outcome.kind === "declined" ? outcome.declineCode : null;
      showSession(response, fresh, acceptLanguage, { declined, ...(answers && { answers }) }, 400);
    }
  }

  async function answerPage(request: IncomingMessage, response: ServerResponse, url: URL): Promise<void> {
    const [, , id = "", step = ""] = url.pathname.split("/");
    const acceptLanguage = request.headers["accept-language"];
    const posted = request.method === "POST" ? new URLSearchParams(await readBody(request)) : null;
    const record = change((changes) => sessionNow(changes, id));
    const isOpen = record?.session.status === "open";
    const field = (name: string) => posted?.get(name)?.trim() ?? "";

    if (step === "authenticate" && record && isOpen) {
      if (!record.awaiting) goTo(response, `/pay/${id}`);
      else if (!posted) {
        const language = languageFor(record.session.locale, acceptLanguage);
        sendPage(response, 200, authenticationPage(record, record.awaiting.card.last4, language));
      } else {
        const approved = field("answer") === "approve";
        const outcome = change((changes) => answerAuthentication(changes, id, approved));
        if (outcome.kind === "declined" || outcome.kind === "nothing to answer") {
          goTo(response, `/pay/${id}?again=1`);
        } else follow(response, outcome, record, acceptLanguage, undefined);
      }
      return;
    }
    if (!posted || !record || !isOpen) {
      if (posted && record?.session.status === "complete") goTo(response, successAddress(record.session));
      else {
        const answers = answersFor(url.searchParams.get("card") ?? "", now());
        const declined = record && url.searchParams.has("again") ? lastDecline(record) : null;
        showSession(response, record, acceptLanguage, { declined, ...(answers && { answers }) });
      }
      return;
    }

    const answers = {
      card_number: field("card_number"),
      card_expiry: field("card_expiry"),
      card_cvc: field("card_cvc"),
      card_name: field("card_name"),
      email: field("email"),
      shipping_option: /^\d$/.test(field("shipping_option")) ? field("shipping_option") : "0",
    };
    const read = readCard(
      { number: answers.card_number, expiry: answers.card_expiry, cvc: answers.card_cvc },
      now(),
    );
    const mistakes: Mistakes = "mistakes" in read ? { ...read.mistakes } : {};
    if (answers.card_name === "") mistakes.name = true;
    const knownEmail = record.session.customer_email;
    if (knownEmail === null && !mailAddress.safeParse(answers.email).success) mistakes.email = true;
    if (!("card" in read) || Object.keys(mistakes).length > 0) {
      showSession(response, record, acceptLanguage, { answers, mistakes }, 400);
      return;
    }
    const payer: Payer = { name: answers.card_name, email: knownEmail ?? answers.email };
    const outcome = change((changes) =>
      submitCard(changes, id, read.card, payer, Number(answers.shipping_option)),
    );
    follow(response, outcome, record, acceptLanguage, answers);
  }

  function sendAsset(response: ServerResponse, { file, type }: { file: string; type: string }): void {
    response.writeHead(200, {
      "content-type": type,
      "cache-control": "public, max-age=3600",
      "x-content-type-options": "nosniff",
    });
    response.end(readFileSync(file));
  }

  /** What `POST /-/sessions/:id/pay` does: the page's own path without the page. */
  function pay(id: string, asked: z.output<typeof payDirectly>): { status: number; body: object } {
    const year = new Date(now()).getUTCFullYear() + 3;
    const cvc = asked.card.replace(/\D/g, "").length === 15 ? "1234" : "123";
    const read = readCard({ number: asked.card, expiry: `12/${year}`, cvc }, now());
    if (!("card" in read)) return { status: 400, body: { error: "not a test card" } };
    const outcome = change((changes) => {
      const email =
        changes.get("sessions", id)?.session.customer_email ?? asked.email ?? "payer@post.example";
      const first = submitCard(changes, id, read.card, { name: asked.name, email }, asked.shipping_option);
      return first.kind === "authenticate" && asked.answer
        ? answerAuthentication(changes, id, asked.answer === "approve")
        : first;
    });
    const session = parts().store.get("sessions", id)?.session ?? null;
    const status = outcome.kind === "unknown" ? 404 : outcome.kind === "closed" ? 409 : 200;
    return { status, body: { ...outcome, session } };
  }

  async function answerSwitches(request: IncomingMessage, response: ServerResponse, url: URL): Promise<void> {
    const { store, sender } = parts();
    const send = (status: number, body: object) => sendJson(response, status, JSON.stringify(body, null, 2));
    const line = `${request.method} ${url.pathname}`;
    if (line === "GET /-/health") {
      send(200, { ok: true, version: API_VERSION });
      return;
    }
    const origin = request.headers.origin;
    if (!isLoopback(request.socket.remoteAddress) || (origin !== undefined && origin !== address)) {
      send(403, { error: "the switches are for this machine only" });
      return;
    }
    const body = await readBody(request);
    let json: unknown;
    try {
      json = body === "" ? {} : JSON.parse(body);
    } catch {
      send(400, { error: "the body is not JSON" });
      return;
    }
    const session = /^POST \/-\/sessions\/([^/]+)\/pay$/.exec(line)?.[1];
    if (line === "GET /-/switches") send(200, switches);
    else if (line === "POST /-/switches") {
      const wanted = switchChange.safeParse(json);
      if (!wanted.success) send(400, { error: z.prettifyError(wanted.error) });
      else {
        switches = changedSwitches(switches, wanted.data);
        send(200, switches);
        sender.send();
      }
    } else if (line === "GET /-/events") {
      const type = url.searchParams.get("type");
      const events = store.all("events").filter((event) => type === null || event.type === type);
      send(
        200,
        events.reverse().map((event) => ({ ...event, delivery: store.get("deliveries", event.id) ?? null })),
      );
    } else if (line === "POST /-/webhooks/flush") send(200, await sender.flush());
    else if (session !== undefined) {
      const wanted = payDirectly.safeParse(json);
      if (!wanted.success) send(400, { error: z.prettifyError(wanted.error) });
      else {
        const result = pay(session, wanted.data);
        send(result.status, result.body);
      }
    } else send(404, { error: "unknown address" });
  }

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const url = new URL(request.url ?? "/", "http://fake.invalid");
    const asset = ASSETS[url.pathname];
    if (url.pathname.startsWith("/-/")) await answerSwitches(request, response, url);
    else if (/^\/pay\/[^/]+(\/authenticate)?$/.test(url.pathname)) await answerPage(request, response, url);
    else if (asset && request.method === "GET") sendAsset(response, asset);
    else await answerApi(request, response, url);
  }

  const server = createServer((request, response) => {
    answer(request, response).catch((error: unknown) => {
      if (error instanceof Dropped) request.socket.destroy();
      else if (error instanceof StripeFault && !response.headersSent) {
        sendJson(response, error.status, JSON.stringify({ error: error.body }));
      } else {
        console.error(error);
        if (response.headersSent) request.socket.destroy();
        else {
          const body = {
            error: { type: "api_error", message: "This fake has a mistake in it; see its log." },
          };
          sendJson(response, 500, JSON.stringify(body));
        }
      }
    });
  });

  return {
    listen: () =>
      new Promise((resolve, reject) => {
        server.once("error", reject);
        server.listen(options.port, host, () => {
          server.off("error", reject);
          const bound = server.address();
          if (bound === null || typeof bound === "string") {
            reject(new Error("the Stripe fake has no port"));
            return;
          }
          // The state is opened only by who has the port: two fakes never write to it at once.
          const store = new Store(join(options.dataDir, "stripe"), now());
          const sender = new WebhookSender({
            store,
            now,
            url: options.webhookUrl ?? null,
            secret: options.webhookSecret,
            timeoutMs: options.webhookTimeoutMs ?? 20_000,
            backoffMs: options.backoffMs ?? plainBackoff,
            switches: () => switches.webhooks,
          });
          open = { store, keys: new IdempotencyKeys(store), sender };
          address = `http://${host.includes(":") ? `[${host}]` : host}:${bound.port}`;
          timer = setInterval(tick, TICK_MS);
          tick();
          resolve({ port: bound.port, url: address });
        });
      }),
    close: async () => {
      clearInterval(timer);
      stop.abort();
      const closed = new Promise<void>((resolve) => server.close(() => resolve()));
      server.closeIdleConnections();
      const patience = setTimeout(() => server.closeAllConnections(), 300);
      await open?.sender.close();
      await closed;
      clearTimeout(patience);
      open?.store.close();
      open = null;
    },
    tick,
    flushWebhooks: () => parts().sender.flush(),
  };
}
