import { z } from "zod";

const count = z.int().min(0).max(1_000_000);
const milliseconds = z.int().min(0).max(600_000);

const apiSwitches = z.strictObject({
  /** Only requests whose "METHOD /path" begins so; "" is every request. */
  match: z.string(),
  delayBeforeMs: milliseconds,
  delayAfterMs: milliseconds,
  dropBefore: count,
  dropAfter: count,
  fail: z.strictObject({
    count,
    status: z.union([z.literal(429), z.literal(500), z.literal(503)]),
    after: z.boolean(),
  }),
});

const webhookSwitches = z.strictObject({
  hold: z.boolean(),
  delayMs: milliseconds,
  copies: z.int().min(1).max(20),
  reverse: z.boolean(),
  dropNext: count,
});

export type Switches = { api: z.output<typeof apiSwitches>; webhooks: z.output<typeof webhookSwitches> };

/** What `POST /-/switches` takes: only what is to change. `reset` first puts everything back. */
export const switchChange = z.strictObject({
  reset: z.literal(true).optional(),
  api: apiSwitches
    .extend({ fail: apiSwitches.shape.fail.partial({ status: true, after: true }) })
    .partial()
    .optional(),
  webhooks: webhookSwitches.partial().optional(),
});

export function plainSwitches(): Switches {
  return {
    api: {
      match: "",
      delayBeforeMs: 0,
      delayAfterMs: 0,
      dropBefore: 0,
      dropAfter: 0,
      fail: { count: 0, status: 500, after: false },
    },
    webhooks: { hold: false, delayMs: 0, copies: 1, reverse: false, dropNext: 0 },
  };
}

export function changedSwitches(present: Switches, change: z.output<typeof switchChange>): Switches {
  const from = change.reset ? plainSwitches() : present;
  return {
    api: {
      ...from.api,
      ...change.api,
      fail: change.api?.fail ? { ...plainSwitches().api.fail, ...change.api.fail } : from.api.fail,
    },
    webhooks: { ...from.webhooks, ...change.webhooks },
  };
}
