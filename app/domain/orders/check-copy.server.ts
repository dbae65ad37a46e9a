import { db } from "db/client.server";
import {
  copies,
  editions,
  formats,
  ledgerEntries,
  papers,
  printPictures,
  prints,
  proofs,
} from "db/schema/schema";
import { and, asc, eq, inArray } from "drizzle-orm";
import { isoDayInZone, type PartialDate } from "~/domain/dates";
import { markOf } from "~/domain/editions/ledger.server";
import { readBody } from "~/domain/editions/ledger-body";
import { theStudio } from "~/domain/studio/studio.server";
import { publicUrl } from "~/platform/storage.server";
import { normaliseCheckCode } from "./check-code.server";

type SizeShown = {
  paper: string;
  process: string;
  image: { width: number; height: number };
  sheet: { width: number; height: number };
};

/** What the book says of a copy to anybody who has its code. No name, no price. Lengths in mm. */
export type CheckedCopy = {
  code: string;
  print: { title: string; year: number | null; slug: string; published: boolean };
  mark: string;
  limit: number;
  proofsOutside: { ap: number; pp: number; hc: number; bat: number; exhibition: number };
  placement: (typeof copies.$inferSelect)["placement"];
  /** The copy's own; null while it has not taken one. */
  format: SizeShown | null;
  otherFormats: SizeShown[];
  pictures: {
    description: string;
    proofs: { format: "avif" | "webp" | "jpeg"; width: number; height: number; url: string }[];
  }[];
  history: { line: number; kind: string; sheet: number | null; when: PartialDate }[];
  signature: string;
  zone: string;
};

/** The copy a check code belongs to; null when there is none. `code` may be as somebody typed it. */
export async function checkCopy(code: string): Promise<CheckedCopy | null> {
  const normal = normaliseCheckCode(code);
  if (normal === null) return null;
  const [row] = await db
    .select({ copy: copies, edition: editions, print: prints })
    .from(copies)
    .innerJoin(editions, eq(editions.id, copies.editionId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(eq(copies.checkCode, normal));
  if (row === undefined) return null;
  const { copy, edition, print } = row;
  const [studio, formatRows, pictureRows, entries] = await Promise.all([
    theStudio(),
    db
      .select({ format: formats, paper: papers })
      .from(formats)
      .innerJoin(papers, eq(papers.id, formats.paperId))
      .where(eq(formats.editionId, edition.id))
      .orderBy(asc(formats.position)),
    db
      .select()
      .from(printPictures)
      .where(eq(printPictures.printId, print.id))
      .orderBy(asc(printPictures.position)),
    db
      .select()
      .from(ledgerEntries)
      .where(and(eq(ledgerEntries.editionId, edition.id), eq(ledgerEntries.copyId, copy.id)))
      .orderBy(asc(ledgerEntries.line)),
  ]);
  const shown = print.proofsPublicAt === null ? [] : pictureRows.map((p) => p.id);
  const proofRows =
    shown.length === 0 ? [] : await db.select().from(proofs).where(inArray(proofs.printPictureId, shown));
  const sizes = formatRows.map(({ format, paper }) => ({
    id: format.id,
    paper: `${paper.name}, ${paper.grammage} g/m²`,
    process: format.process,
    image: { width: format.imageWidthMm, height: format.imageHeightMm },
    sheet: { width: format.sheetWidthMm, height: format.sheetHeightMm },
  }));
  const withoutId = ({ paper, process, image, sheet }: (typeof sizes)[number]): SizeShown => ({
    paper,
    process,
    image,
    sheet,
  });
  const own = sizes.find((s) => s.id === copy.formatId);
  return {
    code: normal,
    print: { title: print.title, year: print.year, slug: print.slug, published: print.state === "published" },
    mark: markOf(edition, copy),
    limit: edition.limit,
    proofsOutside: {
      ap: edition.artistsProofs,
      pp: edition.printersProofs,
      hc: edition.horsCommerce,
      bat: edition.bonATirer,
      exhibition: edition.exhibitionCopies,
    },
    placement: copy.placement,
    format: own === undefined ? null : withoutId(own),
    otherFormats: sizes.filter((s) => s !== own).map(withoutId),
    pictures: pictureRows.map((picture) => ({
      description: picture.description,
      proofs: proofRows
        .filter((p) => p.printPictureId === picture.id)
        .map((p) => ({ format: p.format, width: p.width, height: p.height, url: publicUrl(p.objectKey) })),
    })),
    history: entries.map((entry) => ({
      line: entry.line,
      kind: entry.kind,
      sheet: readBody(entry.body).sheet,
      when: dayOf(entry.happenedAt, entry.happenedPrecision, studio.zone),
    })),
    signature: studio.signature,
    zone: studio.zone,
  };
}

/** The public is told the day at most: an instant could name a sale to somebody who knows of it. */
function dayOf(
  at: Date | null,
  precision: (typeof ledgerEntries.$inferSelect)["happenedPrecision"],
  zone: string,
): PartialDate {
  if (at === null || precision === "unknown") return { value: "", precision: "unknown" };
  const day = isoDayInZone(at, zone);
  if (precision === "year") return { value: day.slice(0, 4), precision };
  if (precision === "month") return { value: day.slice(0, 7), precision };
  return { value: day, precision: "day" };
}
