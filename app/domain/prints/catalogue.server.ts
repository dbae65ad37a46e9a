import { db } from "db/client.server";
import {
  copies,
  editions,
  formats,
  papers,
  priceSteps,
  printPictures,
  prints,
  proofs,
  series,
} from "db/schema/schema";
import { and, asc, eq, inArray, isNull, ne, type SQL, sql } from "drizzle-orm";
import type { Run } from "~/domain/editions/numbering";
import { type PriceStep, priceOf } from "~/domain/pricing/ladder";
import { picturesArePublic } from "~/domain/rolls/visibility";
import { now } from "~/platform/clock";
import { publicUrl } from "~/platform/storage.server";

/** What the public is told of a copy: free to be bought, held for somebody, or gone. */
export type PublicPlacement = "free" | "held" | "gone";

export type ShownProof = { format: "avif" | "webp" | "jpeg"; width: number; height: number; url: string };

/** `proofs` is empty while they are being made, or before the picture may be seen. */
export type ShownPicture = { description: string; proofs: ShownProof[]; width: number; height: number };

/** Sizes in mm, amounts in minor units of the studio's currency with home tax. */
export type ShownFormat = {
  id: string;
  paper: { id: string; name: string; surface: string; grammage: number };
  process: string;
  image: { width: number; height: number };
  sheet: { width: number; height: number };
  steps: PriceStep[];
  /** Price of the next number; null when none is free. */
  nextAmount: number | null;
};

export type ShownCopy = { run: Run; number: number; placement: PublicPlacement };

export type ShownEdition = {
  id: string;
  limit: number;
  proofsOutside: { ap: number; pp: number; hc: number; bat: number; exhibition: number };
  furtherEditions: string;
  releaseAt: Date;
  /** before: to be released; now: can be bought; over: closed, or every number is gone. */
  sale: "before" | "now" | "over";
  closed: boolean;
  formats: ShownFormat[];
  /** The numbered run in order, then what lies outside it. */
  copies: ShownCopy[];
  /** Numbers that can be bought now, and those held. */
  free: number;
  held: number;
  nextNumber: number | null;
};

export type ShownPrint = {
  id: string;
  slug: string;
  title: string;
  year: number | null;
  statement: string;
  series: { slug: string; title: string } | null;
  pictures: ShownPicture[];
  /** Ids of its pictures' frames: other prints of the same picture share one. */
  frameIds: string[];
  editions: ShownEdition[];
};

/** Placements as the public sees them. What is neither free nor held is told as gone, whoever has it. */
export function publicPlacement(placement: (typeof copies.$inferSelect)["placement"]): PublicPlacement {
  if (placement === "in_hand") return "free";
  return placement === "held" ? "held" : "gone";
}

/** Every published print, in the photographer's order. */
export function publishedPrints(): Promise<ShownPrint[]> {
  return load(eq(prints.state, "published"));
}

/** One published print by its address; null when there is none. */
export async function publishedPrint(slug: string): Promise<ShownPrint | null> {
  return (await load(sql`${prints.state} = 'published' and ${prints.slug} = ${slug}`))[0] ?? null;
}

/** The published print an edition belongs to, with all its editions; null when it is not to be seen. */
export async function printOfEdition(editionId: string): Promise<ShownPrint | null> {
  const of = db
    .select({ id: editions.printId })
    .from(editions)
    .where(and(eq(editions.id, editionId), ne(editions.state, "draft")));
  return (await load(sql`${prints.state} = 'published' and ${prints.id} in (${of})`))[0] ?? null;
}

/** Other published prints of the same pictures: two crops of a frame are two prints of one picture. */
export function otherPrintsOf(print: ShownPrint): Promise<ShownPrint[]> {
  if (print.frameIds.length === 0) return Promise.resolve([]);
  const sharing = db
    .select({ id: printPictures.printId })
    .from(printPictures)
    .where(inArray(printPictures.frameId, print.frameIds));
  return load(
    sql`${prints.state} = 'published' and ${prints.id} <> ${print.id} and ${prints.id} in (${sharing})`,
  );
}

async function load(which: SQL): Promise<ShownPrint[]> {
  const at = now();
  const rows = await db
    .select({ print: prints, seriesSlug: series.slug, seriesTitle: series.title })
    .from(prints)
    .leftJoin(series, eq(series.id, prints.seriesId))
    .where(which)
    .orderBy(asc(prints.position), asc(prints.title));
  if (rows.length === 0) return [];
  const ids = rows.map((r) => r.print.id);
  const opened = db
    .select({ id: editions.id })
    .from(editions)
    .where(and(inArray(editions.printId, ids), ne(editions.state, "draft")));
  const [pictureRows, proofRows, editionRows, formatRows, stepRows, copyRows] = await Promise.all([
    db
      .select()
      .from(printPictures)
      .where(inArray(printPictures.printId, ids))
      .orderBy(asc(printPictures.position)),
    db
      .select({
        pictureId: proofs.printPictureId,
        format: proofs.format,
        width: proofs.width,
        height: proofs.height,
        key: proofs.objectKey,
      })
      .from(proofs)
      .innerJoin(printPictures, eq(printPictures.id, proofs.printPictureId))
      .where(inArray(printPictures.printId, ids)),
    db
      .select()
      .from(editions)
      .where(and(inArray(editions.printId, ids), ne(editions.state, "draft")))
      .orderBy(asc(editions.position), asc(editions.openedAt)),
    db
      .select({ format: formats, paper: papers })
      .from(formats)
      .innerJoin(papers, eq(papers.id, formats.paperId))
      .where(inArray(formats.editionId, opened))
      .orderBy(asc(formats.position)),
    db
      .select({ step: priceSteps })
      .from(priceSteps)
      .innerJoin(formats, eq(formats.id, priceSteps.formatId))
      .where(and(inArray(formats.editionId, opened), isNull(priceSteps.supersededAt)))
      .orderBy(asc(priceSteps.fromNumber)),
    db
      .select({
        editionId: copies.editionId,
        run: copies.run,
        number: copies.number,
        placement: copies.placement,
      })
      .from(copies)
      .where(inArray(copies.editionId, opened))
      .orderBy(asc(copies.run), asc(copies.number)),
  ]);
  return rows.map(({ print, seriesSlug, seriesTitle }) => {
    const own = editionRows.filter((e) => e.printId === print.id);
    const visible = print.proofsPublicAt !== null && picturesArePublic(print, own, at);
    const pictures = pictureRows.filter((p) => p.printId === print.id);
    return {
      id: print.id,
      slug: print.slug,
      title: print.title,
      year: print.year,
      statement: print.statement,
      series: seriesSlug === null || seriesTitle === null ? null : { slug: seriesSlug, title: seriesTitle },
      frameIds: pictures.map((p) => p.frameId),
      pictures: pictures.map((picture) => {
        const made = proofRows.filter((p) => p.pictureId === picture.id);
        const largest = made.reduce(
          (a, b) => (b.width > a.width ? b : a),
          made[0] ?? { width: 5, height: 4 },
        );
        return {
          description: picture.description,
          width: largest.width,
          height: largest.height,
          proofs: visible
            ? made.map((p) => ({ format: p.format, width: p.width, height: p.height, url: publicUrl(p.key) }))
            : [],
        };
      }),
      editions: own.map((edition) => {
        const all = copyRows.filter((c) => c.editionId === edition.id);
        const numbered = all.filter((c) => c.run === "numbered");
        const outside = all.filter((c) => c.run !== "numbered");
        const free = numbered.filter((c) => c.placement === "in_hand");
        const held = numbered.filter((c) => c.placement === "held").length;
        const releaseAt = edition.releaseAt ?? at;
        const closed = edition.state === "closed";
        const sale =
          releaseAt.getTime() > at.getTime()
            ? "before"
            : closed || (free.length === 0 && held === 0)
              ? "over"
              : "now";
        const next = closed ? undefined : free[0];
        return {
          id: edition.id,
          limit: edition.limit,
          proofsOutside: {
            ap: edition.artistsProofs,
            pp: edition.printersProofs,
            hc: edition.horsCommerce,
            bat: edition.bonATirer,
            exhibition: edition.exhibitionCopies,
          },
          furtherEditions: edition.furtherEditions,
          releaseAt,
          sale,
          closed,
          copies: [...numbered, ...outside].map((c) => ({
            run: c.run,
            number: c.number,
            placement: publicPlacement(c.placement),
          })),
          free: closed ? 0 : free.length,
          held,
          nextNumber: next?.number ?? null,
          formats: formatRows
            .filter((f) => f.format.editionId === edition.id)
            .map(({ format, paper }) => {
              const steps = stepRows
                .filter((s) => s.step.formatId === format.id)
                .map(({ step }) => ({
                  fromNumber: step.fromNumber,
                  toNumber: step.toNumber,
                  amount: step.amount,
                }));
              return {
                id: format.id,
                paper: { id: paper.id, name: paper.name, surface: paper.surface, grammage: paper.grammage },
                process: format.process,
                image: { width: format.imageWidthMm, height: format.imageHeightMm },
                sheet: { width: format.sheetWidthMm, height: format.sheetHeightMm },
                steps,
                nextAmount: next === undefined ? null : priceOf(steps, next.number),
              };
            }),
        };
      }),
    };
  });
}

export type ShownSeries = { slug: string; title: string; statement: string };

/** Series that have a published print, in the photographer's order. */
export async function publishedSeries(): Promise<ShownSeries[]> {
  const shown = db.select({ id: prints.seriesId }).from(prints).where(eq(prints.state, "published"));
  return db
    .select({ slug: series.slug, title: series.title, statement: series.statement })
    .from(series)
    .where(inArray(series.id, shown))
    .orderBy(asc(series.position), asc(series.title));
}
