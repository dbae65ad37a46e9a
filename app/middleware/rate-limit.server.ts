import { pool } from "db/client.server";
import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { data } from "react-router";
import type { Language } from "~/languages/language";
import { count, fill, messagesOf } from "~/languages/messages";
import { AppError } from "~/platform/errors";
import type { Answers, FormProblem } from "~/platform/form-fields";
import { sha256 } from "~/platform/ids.server";
import { networkOf } from "./network";

export type LimitKind = "sign_in" | "reset" | "sign_up" | "checkout" | "postcode" | "check" | "setup";

type Quota = { points: number; seconds: number };

/**
 * `from` is counted for the network a request comes from; `about` for what it is about (an e-mail address, an
 * order), wherever it comes from unless `within` says that each neighbourhood counts for itself: a stranger's attempts
 * elsewhere must not keep somebody from signing in at home. Figures are judged, not measured: generous for a
 * household or an office behind one address, useless for guessing.
 */
const QUOTAS: Record<LimitKind, { from: Quota; about?: Quota & { within?: "network" } }> = {
  sign_in: { from: { points: 60, seconds: 900 }, about: { points: 10, seconds: 900, within: "network" } },
  reset: { from: { points: 20, seconds: 3600 }, about: { points: 5, seconds: 3600 } },
  sign_up: { from: { points: 20, seconds: 3600 }, about: { points: 5, seconds: 3600 } },
  checkout: { from: { points: 60, seconds: 600 } },
  postcode: { from: { points: 30, seconds: 900 }, about: { points: 10, seconds: 900 } },
  check: { from: { points: 120, seconds: 600 } },
  setup: { from: { points: 10, seconds: 900 } },
};

const limiters = new Map<string, RateLimiterPostgres>();

function limiter(name: string, quota: Quota): RateLimiterPostgres {
  let found = limiters.get(name);
  if (found === undefined) {
    found = new RateLimiterPostgres({
      storeClient: pool,
      storeType: "pool",
      tableName: "rate_limits",
      tableCreated: true,
      keyPrefix: name,
      points: quota.points,
      duration: quota.seconds,
    });
    limiters.set(name, found);
  }
  return found;
}

/** What was counted; for attempts that turned out well, which then do not count. */
export type Counted = { giveBack: () => Promise<void> };

/**
 * Counts a request against the limits of its kind, in PostgreSQL and so for all web processes together.
 *
 * @param keys first the client's address (`requestInfoContext`), then, where the kind has it, what the request is
 *   about: an e-mail address for sign_in, reset and sign_up, an order's id for postcode. Only hashes are kept.
 * Throws AppError `too_many`, with the seconds until the next attempt, once a limit is passed.
 */
export async function limitRequests(kind: LimitKind, keys: readonly string[]): Promise<Counted> {
  const [address = "unknown", ...abouts] = keys;
  const { from, about } = QUOTAS[kind];
  const counted: { by: RateLimiterPostgres; key: string }[] = [
    { by: limiter(`${kind}:from`, from), key: sha256(networkOf(address)) },
  ];
  if (about !== undefined) {
    const place = about.within === "network" ? networkOf(address, 24) : "";
    for (const subject of abouts) {
      counted.push({
        by: limiter(`${kind}:about`, about),
        key: sha256(`${subject.trim().toLowerCase()}|${place}`),
      });
    }
  }
  const results = await Promise.allSettled(counted.map(({ by, key }) => by.consume(key)));
  let wait = 0;
  for (const result of results) {
    if (result.status === "fulfilled") continue;
    if (!(result.reason instanceof RateLimiterRes)) throw result.reason;
    wait = Math.max(wait, result.reason.msBeforeNext, 1);
  }
  if (wait > 0) throw new AppError("too_many", `too many: ${kind}`, { retryAfter: Math.ceil(wait / 1000) });
  return {
    giveBack: async () => {
      await Promise.all(counted.map(({ by, key }) => by.reward(key)));
    },
  };
}

/**
 * The same for an action whose page can say how long to wait, with what was typed kept:
 *
 * ```ts
 * const limit = await limitOrWait("reset", [clientIp, form.value.email], language);
 * if (!limit.ok) return limit.problem(form);
 * ```
 */
export async function limitOrWait(kind: LimitKind, keys: readonly string[], language: Language) {
  try {
    return { ok: true, ...(await limitRequests(kind, keys)) } as const;
  } catch (error) {
    if (!(error instanceof AppError) || error.code !== "too_many") throw error;
    const seconds = error.data.retryAfter ?? 60;
    const words = messagesOf(language).account.signIn;
    const minutes = count(language, words.minutes, Math.ceil(seconds / 60));
    const problem = (form: { answers: Answers }) => {
      const said: FormProblem = {
        errors: { form: [fill(words.tooMany, { minutes })] },
        answers: form.answers,
      };
      return data({ problem: said }, { status: 429, headers: { "Retry-After": String(seconds) } });
    };
    return { ok: false, problem } as const;
  }
}
