import { createHash } from "node:crypto";
import { StripeFault } from "./faults";
import { type Changes, RESULT_LIFE_MS, type SavedResult, type Store } from "./store";

const LONGEST_KEY = 255;

/**
 * Stripe's idempotency keys: the first result of a key is kept for a day and given again to whoever asks
 * the same; other parameters under it, or a second request while the first still runs, are refused.
 */
export class IdempotencyKeys {
  readonly #store: Store;
  readonly #running = new Set<string>();

  constructor(store: Store) {
    this.#store = store;
  }

  /** What is asked, boiled down: the same for equal requests only. */
  static fingerprint(method: string, path: string, body: string): string {
    const fields = [...new URLSearchParams(body)]
      .map(([name, value]) => JSON.stringify([name, value]))
      .sort();
    return createHash("sha256")
      .update(JSON.stringify([method, path, fields]))
      .digest("base64");
  }

  /**
   * Claims a key for a request that is about to run, or returns the result that was kept under it.
   * @throws StripeFault 400 for other parameters, 409 for a key that is in use.
   */
  claim(key: string, fingerprint: string, now: number): SavedResult | null {
    if (key.length > LONGEST_KEY) {
      const message = `An idempotency key has at most ${LONGEST_KEY} characters.`;
      throw new StripeFault(400, { type: "idempotency_error", message }, false);
    }
    if (this.#running.has(key)) {
      const message = `Another request with the idempotency key '${key}' is still running.`;
      throw new StripeFault(
        409,
        { type: "idempotency_error", code: "idempotency_key_in_use", message },
        false,
      );
    }
    const kept = this.#store.get("results", key);
    if (kept && now - kept.at < RESULT_LIFE_MS) {
      if (kept.fingerprint === fingerprint) return kept;
      const message = `The idempotency key '${key}' has been used for another request.`;
      throw new StripeFault(400, { type: "idempotency_error", message }, false);
    }
    this.#running.add(key);
    return null;
  }

  /** Keeps a result together with the changes that led to it. */
  keep(changes: Changes, result: SavedResult): void {
    changes.put("results", result);
  }

  release(key: string): void {
    this.#running.delete(key);
  }
}
