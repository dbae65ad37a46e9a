import { createHmac } from "node:crypto";
import { Changes, type Delivery, type Store } from "./store";
import type { Switches } from "./switches";

export type WebhookOptions = {
  store: Store;
  now: () => number;
  url: string | null;
  secret: string;
  timeoutMs: number;
  /** Milliseconds to wait after the n-th failed attempt, counted from 1. */
  backoffMs: (attempt: number) => number;
  switches: () => Switches["webhooks"];
};

/** Stripe goes on trying for three days. */
const PATIENCE_MS = 3 * 24 * 60 * 60 * 1000;
const AT_ONCE = 8;
/** How long events gather before they leave in the wrong order. */
const GATHER_MS = 300;

/** The `Stripe-Signature` header: time and HMAC-SHA-256 of "time.body", keyed with the endpoint's secret. */
export function signatureHeader(body: string, secret: string, seconds: number): string {
  const digest = createHmac("sha256", secret).update(`${seconds}.${body}`).digest("hex");
  return `t=${seconds},v1=${digest}`;
}

/** Sends events to the webhook address until each has been taken, at least once. */
export class WebhookSender {
  readonly #options: WebhookOptions;
  readonly #abort = new AbortController();
  readonly #sending = new Map<string, Promise<void>>();

  constructor(options: WebhookOptions) {
    this.#options = options;
  }

  /** Sends what is due, unless the switches hold it back. */
  send(): void {
    const { hold, reverse } = this.#options.switches();
    if (hold || this.#abort.signal.aborted || !this.#options.url) return;
    const now = this.#options.now();
    const due = this.#waiting().filter((delivery) => this.#dueAt(delivery) <= now);
    if (reverse) {
      if (due.length > 0 && this.#sending.size === 0) this.#inTurn(due.reverse());
      return;
    }
    for (const delivery of due) {
      if (this.#sending.size >= AT_ONCE) break;
      void this.#start(delivery);
    }
  }

  /**
   * Tries everything that has not been taken yet, once and now, whatever holds it back, and also what those
   * deliveries give rise to. Resolves when the attempts are over.
   */
  async flush(): Promise<{ delivered: number; failed: number }> {
    const tried = new Set<string>();
    await Promise.all(this.#sending.values());
    while (!this.#abort.signal.aborted && this.#options.url) {
      const waiting = this.#waiting().filter((delivery) => !tried.has(delivery.id));
      if (waiting.length === 0) break;
      for (const { id } of waiting) tried.add(id);
      if (this.#options.switches().reverse) {
        for (const delivery of waiting.reverse()) await this.#start(delivery);
      } else {
        for (let at = 0; at < waiting.length; at += AT_ONCE) {
          await Promise.all(waiting.slice(at, at + AT_ONCE).map((delivery) => this.#start(delivery)));
        }
      }
    }
    const ended = [...tried].map((id) => this.#options.store.get("deliveries", id)?.state);
    return {
      delivered: ended.filter((state) => state === "delivered").length,
      failed: ended.filter((state) => state === "pending" || state === "given up").length,
    };
  }

  /** Stops sending; what was under way counts as not delivered and leaves again after the next start. */
  async close(): Promise<void> {
    this.#abort.abort();
    await Promise.all(this.#sending.values());
  }

  #waiting(): Delivery[] {
    return this.#options.store.pendingDeliveries().filter(({ id }) => !this.#sending.has(id));
  }

  #dueAt({ nextAt, madeAt }: Delivery): number {
    const { delayMs, reverse } = this.#options.switches();
    return Math.max(nextAt, madeAt + delayMs, reverse ? madeAt + GATHER_MS : 0);
  }

  #inTurn(deliveries: readonly Delivery[]): void {
    const [first, ...rest] = deliveries;
    if (first && !this.#abort.signal.aborted) void this.#start(first).then(() => this.#inTurn(rest));
  }

  #start(delivery: Delivery): Promise<void> {
    const attempt = this.#attempt(delivery).finally(() => this.#sending.delete(delivery.id));
    this.#sending.set(delivery.id, attempt);
    return attempt;
  }

  async #attempt(delivery: Delivery): Promise<void> {
    const switches = this.#options.switches();
    if (switches.dropNext > 0) {
      switches.dropNext -= 1;
      this.#keep({ ...delivery, state: "dropped" });
      return;
    }
    let error: string | null = null;
    for (let copy = 0; copy < switches.copies; copy += 1) error = await this.#post(delivery.id);
    if (this.#abort.signal.aborted) return;
    const attempts = delivery.attempts + 1;
    const now = this.#options.now();
    if (error === null) {
      this.#keep({ ...delivery, attempts, state: "delivered", lastError: null });
    } else {
      const state = now - delivery.madeAt > PATIENCE_MS ? "given up" : "pending";
      const nextAt = now + this.#options.backoffMs(attempts);
      this.#keep({ ...delivery, attempts, state, nextAt, lastError: error });
    }
  }

  /** One request; the reason when it was not taken, null when it was. Only a 2xx answer takes an event. */
  async #post(id: string): Promise<string | null> {
    const { store, url, secret, now, timeoutMs } = this.#options;
    const event = store.get("events", id);
    if (!event || !url) return null;
    const body = JSON.stringify({ ...event, pending_webhooks: 1 }, null, 2);
    const signature = signatureHeader(body, secret, Math.floor(now() / 1000));
    try {
      const answer = await fetch(url, {
        method: "POST",
        body,
        headers: { "content-type": "application/json; charset=utf-8", "stripe-signature": signature },
        redirect: "manual",
        signal: AbortSignal.any([this.#abort.signal, AbortSignal.timeout(timeoutMs)]),
      });
      await answer.body?.cancel();
      return answer.ok ? null : `answered ${answer.status}`;
    } catch (error) {
      const cause = error instanceof Error && error.cause instanceof Error ? error.cause : error;
      return cause instanceof Error ? cause.message || cause.name : String(cause);
    }
  }

  #keep(delivery: Delivery): void {
    const changes = new Changes(this.#options.store, this.#options.now());
    changes.put("deliveries", delivery);
    changes.commit();
  }
}
