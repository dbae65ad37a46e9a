import { db, pool } from "db/client.server";
import { rateLimits } from "db/schema/schema";
import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { limitOrWait, limitRequests } from "~/middleware/rate-limit.server";
import { AppError } from "~/platform/errors";
import { testDatabase } from "../support/database";

beforeEach(async () => {
  await (await testDatabase()).reset();
});
afterAll(() => pool.end());

/** How many of so many attempts in a row are let through. */
async function letThrough(
  attempts: number,
  keys: (i: number) => string[],
  kind: "sign_in" | "reset" | "checkout",
) {
  let through = 0;
  for (let i = 0; i < attempts; i++) {
    try {
      await limitRequests(kind, keys(i));
      through++;
    } catch (error) {
      if (!(error instanceof AppError)) throw error;
    }
  }
  return through;
}

describe("rate limits", () => {
  test("stop guessing one address's password from one neighbourhood, and say when to come back", async () => {
    const guess = (i: number) => [
      `192.0.2.${i}`,
      i % 2 === 0 ? "merrin@oakshade.example" : "MERRIN@oakshade.example",
    ];
    expect(await letThrough(12, guess, "sign_in")).toBe(10);
    await expect(limitRequests("sign_in", ["192.0.2.99", "merrin@oakshade.example"])).rejects.toMatchObject({
      code: "too_many",
      status: 429,
      data: { retryAfter: expect.any(Number) },
    });
    const refused = await limitRequests("sign_in", ["192.0.2.99", "merrin@oakshade.example"]).catch((e) => e);
    expect(refused.data.retryAfter).toBeGreaterThan(890);
    expect(refused.data.retryAfter).toBeLessThanOrEqual(900);
    expect(refused.init.headers["Retry-After"]).toBe(String(refused.data.retryAfter));
    // Neither another address from there, nor the holder at home, is kept out by it.
    await limitRequests("sign_in", ["192.0.2.99", "odalric@harcastle.example"]);
    await limitRequests("sign_in", ["198.51.100.7", "merrin@oakshade.example"]);
  });

  test("stop one network that goes through many addresses, all of its IPv6 addresses together", async () => {
    const many = (i: number) => [`2001:db8:0:7::${i.toString(16)}`, `somebody-${i}@oakshade.example`];
    expect(await letThrough(62, many, "sign_in")).toBe(60);
    await limitRequests("sign_in", ["2001:db8:0:8::1", "merrin@oakshade.example"]);
  });

  test("count wishes for a new password by address, wherever they come from", async () => {
    expect(await letThrough(7, (i) => [`198.51.${i}.1`, "merrin@oakshade.example"], "reset")).toBe(5);
  });

  test("do not count what is given back", async () => {
    for (let i = 0; i < 15; i++) {
      const counted = await limitRequests("sign_in", ["192.0.2.1", "merrin@oakshade.example"]);
      await counted.giveBack();
    }
    expect(await letThrough(12, () => ["192.0.2.1", "merrin@oakshade.example"], "sign_in")).toBe(10);
  });

  test("are exact when many come at once", async () => {
    const outcomes = await Promise.allSettled(
      Array.from({ length: 80 }, () => limitRequests("checkout", ["192.0.2.1"])),
    );
    expect(outcomes.filter((outcome) => outcome.status === "fulfilled")).toHaveLength(60);
  });

  test("keep no address of a person or a network", async () => {
    await limitRequests("sign_in", ["192.0.2.1", "merrin@oakshade.example"]);
    const rows = await db.select().from(rateLimits);
    expect(rows).toHaveLength(2);
    expect(JSON.stringify(rows)).not.toMatch(/merrin|192\.0\.2/);
  });

  test("give a page its sentence, the wait and the answers that were typed", async () => {
    await letThrough(5, () => ["192.0.2.1", "merrin@oakshade.example"], "reset");
    const limit = await limitOrWait("reset", ["192.0.2.1", "merrin@oakshade.example"], "de");
    if (limit.ok) throw new Error("let through");
    const answer = limit.problem({ answers: { email: "merrin@oakshade.example" } });
    expect(answer.init).toMatchObject({ status: 429 });
    expect(new Headers(answer.init?.headers).get("Retry-After")).toMatch(/^3[56]\d\d$/);
    expect(answer.data.problem.errors.form?.[0]).toContain("60 Minuten");
    expect(answer.data.problem.answers).toEqual({ email: "merrin@oakshade.example" });
  });
});
