import type { Database } from "db/client.server";
import { copies, editions, formats, papers, priceSteps, printPictures, prints } from "db/schema/schema";
import { and, asc, eq, inArray, isNull, sql } from "drizzle-orm";
import { CAP_OF_COPIES, countAgainstCap } from "~/domain/editions/cap";
import { sheetMassGrams } from "~/domain/imaging/sizes";
import { type PriceStep, priceOf } from "~/domain/pricing/ladder";

/** A format as the basket and the checkout need it. Amounts in minor units, lengths in mm, mass in grams. */
export type FormatForSale = {
  formatId: string;
  editionId: string;
  printId: string;
  slug: string;
  title: string;
  pictures: number;
  paper: string;
  process: string;
  imageWidthMm: number;
  imageHeightMm: number;
  sheetWidthMm: number;
  sheetHeightMm: number;
  grams: number;
  limit: number;
  /** Every price of the ladder in force. */
  steps: PriceStep[];
  returnedPrice: "own" | "next";
  /** Published, open and released. */
  onSale: boolean;
  /** Numbers in hand, ascending; `returned` ones were sold before. */
  free: { copyId: string; number: number; returned: boolean }[];
  /** Whether all copies of each picture, proofs counted, are within the cap. */
  worksOfArt: boolean;
};

/** What a free number costs: its own price, or the next never-issued number's where the edition says so. */
export function priceOfFree(
  format: FormatForSale,
  copy: { number: number; returned: boolean },
): number | null {
  if (copy.returned && format.returnedPrice === "next") {
    const next = format.free.find((c) => !c.returned);
    if (next !== undefined) return priceOf(format.steps, next.number);
  }
  return priceOf(format.steps, copy.number);
}

/** Reads formats with what is in hand now. Unknown ids are left out; the order of `ids` is kept. */
export async function formatsForSale(
  db: Database,
  ids: readonly string[],
  at: Date,
): Promise<FormatForSale[]> {
  const wanted = [...new Set(ids)];
  if (wanted.length === 0) return [];
  const rows = await db
    .select({ format: formats, edition: editions, print: prints, paper: papers })
    .from(formats)
    .innerJoin(editions, eq(editions.id, formats.editionId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .innerJoin(papers, eq(papers.id, formats.paperId))
    .where(inArray(formats.id, wanted));
  const editionIds = [...new Set(rows.map((r) => r.edition.id))];
  const printIds = [...new Set(rows.map((r) => r.print.id))];
  if (editionIds.length === 0) return [];
  // One after the other: inside a transaction there is one connection.
  const steps = await db
    .select()
    .from(priceSteps)
    .where(and(inArray(priceSteps.formatId, wanted), isNull(priceSteps.supersededAt)))
    .orderBy(asc(priceSteps.fromNumber));
  const free = await db
    .select({
      id: copies.id,
      editionId: copies.editionId,
      number: copies.number,
      checkCode: copies.checkCode,
    })
    .from(copies)
    .where(
      and(inArray(copies.editionId, editionIds), eq(copies.run, "numbered"), eq(copies.placement, "in_hand")),
    )
    .orderBy(asc(copies.number));
  const pictures = await db
    .select({ printId: printPictures.printId, frameId: printPictures.frameId })
    .from(printPictures)
    .where(inArray(printPictures.printId, printIds));
  const counted = await copiesOfPictures(db, printIds);
  const byFormat = new Map(
    rows.map(({ format, edition, print, paper }) => {
      const count = pictures.filter((p) => p.printId === print.id);
      const one = sheetMassGrams(format.sheetWidthMm, format.sheetHeightMm, paper.grammage);
      const sale: FormatForSale = {
        formatId: format.id,
        editionId: edition.id,
        printId: print.id,
        slug: print.slug,
        title: print.title,
        pictures: count.length,
        paper: paper.name,
        process: format.process,
        imageWidthMm: format.imageWidthMm,
        imageHeightMm: format.imageHeightMm,
        sheetWidthMm: format.sheetWidthMm,
        sheetHeightMm: format.sheetHeightMm,
        grams: Math.ceil(one * Math.max(1, count.length)),
        limit: edition.limit,
        steps: steps.filter((s) => s.formatId === format.id),
        returnedPrice: edition.returnedPrice,
        onSale:
          print.state === "published" &&
          edition.state === "open" &&
          edition.releaseAt !== null &&
          edition.releaseAt.getTime() <= at.getTime(),
        free: free
          .filter((c) => c.editionId === edition.id)
          .map((c) => ({ copyId: c.id, number: c.number, returned: c.checkCode !== null })),
        worksOfArt: count.every((p) => (counted.get(p.frameId) ?? 0) <= CAP_OF_COPIES),
      };
      return [format.id, sale] as const;
    }),
  );
  return ids.flatMap((id) => byFormat.get(id) ?? []);
}

/** Copies of each picture of these prints over all its editions, all sizes together, proofs counted (rule 11). */
export async function copiesOfPictures(
  db: Database,
  printIds: readonly string[],
): Promise<Map<string, number>> {
  if (printIds.length === 0) return new Map();
  const pictures = db
    .select({ frameId: printPictures.frameId })
    .from(printPictures)
    .where(inArray(printPictures.printId, [...printIds]));
  const rows = await db
    .select({
      frameId: printPictures.frameId,
      limit: editions.limit,
      ap: editions.artistsProofs,
      pp: editions.printersProofs,
      hc: editions.horsCommerce,
      bat: editions.bonATirer,
      exhibition: editions.exhibitionCopies,
    })
    .from(printPictures)
    .innerJoin(editions, eq(editions.printId, printPictures.printId))
    .where(and(inArray(printPictures.frameId, pictures), sql`${editions.state} <> 'draft'`));
  const byFrame = new Map<string, typeof rows>();
  for (const row of rows) byFrame.set(row.frameId, [...(byFrame.get(row.frameId) ?? []), row]);
  return new Map([...byFrame].map(([frameId, list]) => [frameId, countAgainstCap(list).total]));
}
