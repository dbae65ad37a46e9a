import { z } from "zod";
import { numberMark, RUNS } from "./numbering";

/** The public body of a ledger entry, read back from its canonical JSON. */

const steps = z.array(z.object({ fromNumber: z.number(), toNumber: z.number(), amount: z.number() }));

/** The public facts an entry may carry that its words need; whatever else it carries is left alone. */
const bodySchema = z
  .object({
    limit: z.number(),
    from: z.number(),
    to: z.number(),
    release: z.string(),
    wasRelease: z.string(),
    until: z.string(),
    format: z.number(),
    currency: z.string(),
    was: steps,
    now: steps,
    retired: z.array(z.number()),
  })
  .partial();
export type LedgerBody = z.output<typeof bodySchema>;

const copySchema = z.object({
  run: z.enum(RUNS),
  number: z.number(),
  of: z.number(),
});

/** Reads an entry's public body: the mark of its copy, its sheet's number, and its facts. */
export function readBody(json: string): { mark: string | null; sheet: number | null; facts: LedgerBody } {
  const body: unknown = JSON.parse(json);
  const copy = copySchema.safeParse(body);
  const sheet = z.object({ sheet: z.number() }).safeParse(body);
  const facts = bodySchema.safeParse(body);
  return {
    mark: copy.success
      ? numberMark({ run: copy.data.run, number: copy.data.number, total: copy.data.of })
      : null,
    sheet: sheet.success ? sheet.data.sheet : null,
    facts: facts.success ? facts.data : {},
  };
}
