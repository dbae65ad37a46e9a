import { pool } from "db/client.server";
import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { requestReset } from "~/domain/people/reset-password.server";
import { stopQueue } from "~/platform/queue.server";
import { testDatabase } from "../support/database";
import { makeAccount, median } from "../support/people";
import { makeStudio } from "../support/shop";

/*
 * A measurement, and so no part of `npm test`: what else a machine does at the time would decide it.
 */
const EMAIL = "merrin@oakshade.example";

beforeEach(async () => {
  await (await testDatabase()).reset();
  await makeStudio();
});
afterAll(async () => {
  await stopQueue();
  await pool.end();
});

describe("a forgotten password", () => {
  test("takes as long for an unknown address: medians within ten per cent", async () => {
    await makeAccount(EMAIL, ["collector"]);
    const took = { known: [] as number[], unknown: [] as number[] };
    for (let i = 0; i < 15; i++) {
      // Turn about, so that whatever else the machine does falls on both.
      for (const kind of i % 2 === 0 ? (["known", "unknown"] as const) : (["unknown", "known"] as const)) {
        const started = performance.now();
        await requestReset(kind === "known" ? EMAIL : `nobody-${i}@oakshade.example`, "en");
        took[kind].push(performance.now() - started);
      }
    }
    const ratio = median(took.known) / median(took.unknown);
    expect(ratio).toBeGreaterThan(0.9);
    expect(ratio).toBeLessThan(1.1);
  });
});
