import { z } from "zod";
import type { ShownEdition, ShownPrint } from "./catalogue.server";

/*
 * What machines may read, without an account. The same schemas check every answer and make the description at
 * /api/v1/openapi.json. Amounts are minor units (ISO 4217) with the home country's tax, lengths millimetres, times UTC.
 */

const run = z.enum(["numbered", "ap", "pp", "hc", "bat", "exhibition"]);
const size = z.object({ widthMm: z.int(), heightMm: z.int() });

export const apiCopy = z.object({
  run: run.describe("Which sequence the copy belongs to; all but `numbered` lie outside the limit."),
  number: z.int(),
  placement: z.enum(["free", "held", "gone"]),
});

export const apiFormat = z.object({
  id: z.uuid(),
  paper: z.string(),
  grammage: z.int().describe("g/m²"),
  process: z.string(),
  image: size,
  sheet: size,
  prices: z.array(z.object({ fromNumber: z.int(), toNumber: z.int(), amount: z.int() })),
  nextAmount: z.int().nullable().describe("Price of the next number; null when none is free."),
});

export const apiEdition = z.object({
  id: z.uuid(),
  print: z.string().describe("The print's slug."),
  limit: z.int().describe("How many numbered copies there may be: the denominator."),
  currency: z.string(),
  releaseAt: z.iso.datetime(),
  sale: z.enum(["before", "now", "over"]),
  closed: z.boolean(),
  proofsOutside: z.object({ ap: z.int(), pp: z.int(), hc: z.int(), bat: z.int(), exhibition: z.int() }),
  furtherEditions: z.string(),
  free: z.int(),
  held: z.int(),
  nextNumber: z.int().nullable(),
  formats: z.array(apiFormat),
  copies: z.array(apiCopy),
});
export type ApiEdition = z.output<typeof apiEdition>;

export const apiPrint = z.object({
  slug: z.string(),
  title: z.string(),
  year: z.int().nullable(),
  series: z.object({ slug: z.string(), title: z.string() }).nullable(),
  statement: z.string(),
  pictures: z.array(
    z.object({
      description: z.string(),
      proofs: z.array(
        z.object({
          format: z.enum(["avif", "webp", "jpeg"]),
          width: z.int(),
          height: z.int(),
          url: z.string(),
        }),
      ),
    }),
  ),
  editions: z.array(apiEdition),
});
export type ApiPrint = z.output<typeof apiPrint>;

/** RFC 9457 problem details: the one shape of an error. */
export const apiProblem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  detail: z.string().optional(),
});

/** An edition as the API tells of it. */
export function editionForApi(edition: ShownEdition, slug: string, currency: string): ApiEdition {
  return apiEdition.parse({
    id: edition.id,
    print: slug,
    limit: edition.limit,
    currency,
    releaseAt: edition.releaseAt.toISOString(),
    sale: edition.sale,
    closed: edition.closed,
    proofsOutside: edition.proofsOutside,
    furtherEditions: edition.furtherEditions,
    free: edition.free,
    held: edition.held,
    nextNumber: edition.nextNumber,
    formats: edition.formats.map((f) => ({
      id: f.id,
      paper: f.paper.name,
      grammage: f.paper.grammage,
      process: f.process,
      image: { widthMm: f.image.width, heightMm: f.image.height },
      sheet: { widthMm: f.sheet.width, heightMm: f.sheet.height },
      prices: f.steps,
      nextAmount: f.nextAmount,
    })),
    copies: edition.copies,
  });
}

/** A print as the API tells of it. */
export function printForApi(print: ShownPrint, currency: string): ApiPrint {
  return apiPrint.parse({
    slug: print.slug,
    title: print.title,
    year: print.year,
    series: print.series,
    statement: print.statement,
    pictures: print.pictures.map((p) => ({ description: p.description, proofs: p.proofs })),
    editions: print.editions.map((e) => editionForApi(e, print.slug, currency)),
  });
}

type Operation = { path: string; id: string; summary: string; parameter?: string; answer: z.ZodType };

const OPERATIONS: Operation[] = [
  {
    path: "/api/v1/prints",
    id: "prints",
    summary: "Every published print.",
    answer: z.object({ prints: z.array(apiPrint) }),
  },
  { path: "/api/v1/prints/{slug}", id: "print", summary: "One print.", parameter: "slug", answer: apiPrint },
  {
    path: "/api/v1/editions/{id}",
    id: "edition",
    summary: "One edition, with the placement of every number.",
    parameter: "id",
    answer: apiEdition,
  },
];

/** The OpenAPI 3.1 description of all of this, for a shop at `base`. */
export function openApiDescription(base: string): Record<string, unknown> {
  const json = (schema: z.ZodType) => z.toJSONSchema(schema, { target: "draft-2020-12" });
  return {
    openapi: "3.1.0",
    info: { title: "Numberleaf", version: "1", description: "Prints and editions, readable by anyone." },
    servers: [{ url: base }],
    paths: Object.fromEntries(
      OPERATIONS.map((o) => [
        o.path,
        {
          get: {
            operationId: o.id,
            summary: o.summary,
            ...(o.parameter === undefined
              ? {}
              : {
                  parameters: [{ name: o.parameter, in: "path", required: true, schema: { type: "string" } }],
                }),
            responses: {
              200: { description: o.summary, content: { "application/json": { schema: json(o.answer) } } },
              ...(o.parameter === undefined
                ? {}
                : {
                    404: {
                      description: "There is none, or it is not to be seen.",
                      content: { "application/problem+json": { schema: json(apiProblem) } },
                    },
                  }),
            },
          },
        },
      ]),
    ),
  };
}
