import { db } from "db/client.server";
import { editions, papers, printPictures, prints, scans } from "db/schema/schema";
import { and, asc, eq, inArray, ne } from "drizzle-orm";
import { pixelsInside } from "~/domain/prints/crop";
import { theStudio } from "~/domain/studio/studio.server";
import type { Answers } from "~/platform/form-fields";
import { type CurrencyCode, currencyCode } from "~/platform/money";
import { type EditionFigures, editionFigures, type PlannedPicture } from "./edition-figures";
import { planOf } from "./edition-form";
import { zoneLabel } from "./edition-page.server";

/** What planning an edition of a print needs to know. Pixels are those inside the crop. */
export type PlannedPrint = {
  id: string;
  title: string;
  state: "draft" | "published" | "withdrawn";
  pictures: PlannedPicture[];
};

export type PaperChoice = { id: string; name: string; grammage: number; surface: string; retired: boolean };

/** A print to plan an edition of; null when there is none. `exceptEditionId` leaves out the draft being planned. */
export async function plannedPrint(
  printId: string,
  exceptEditionId: string | null,
): Promise<PlannedPrint | null> {
  const [print] = await db.select().from(prints).where(eq(prints.id, printId));
  if (print === undefined) return null;
  const pictures = await db
    .select({ frameId: printPictures.frameId, crop: printPictures.crop, scan: scans })
    .from(printPictures)
    .innerJoin(scans, eq(scans.id, printPictures.scanId))
    .where(eq(printPictures.printId, printId))
    .orderBy(asc(printPictures.position));
  const frameIds = pictures.map((picture) => picture.frameId);
  const others =
    frameIds.length === 0
      ? []
      : await db
          .select({ frameId: printPictures.frameId, edition: editions })
          .from(printPictures)
          .innerJoin(editions, eq(editions.printId, printPictures.printId))
          .where(
            and(
              inArray(printPictures.frameId, frameIds),
              exceptEditionId === null ? undefined : ne(editions.id, exceptEditionId),
            ),
          );
  return {
    id: print.id,
    title: print.title,
    state: print.state,
    pictures: pictures.flatMap(({ frameId, crop, scan }) =>
      scan.width === null || scan.height === null
        ? []
        : [
            {
              ...pixelsInside(crop, { width: scan.width, height: scan.height }),
              otherEditions: others
                .filter((one) => one.frameId === frameId)
                .map(({ edition }) => ({
                  limit: edition.limit,
                  ap: edition.artistsProofs,
                  pp: edition.printersProofs,
                  hc: edition.horsCommerce,
                  bat: edition.bonATirer,
                  exhibition: edition.exhibitionCopies,
                  status: edition.state,
                })),
            },
          ],
    ),
  };
}

/** Papers in the studio's order, the retired ones too (a draft may still name one). */
export async function paperChoices(): Promise<PaperChoice[]> {
  return db
    .select({
      id: papers.id,
      name: papers.name,
      grammage: papers.grammage,
      surface: papers.surface,
      retired: papers.retired,
    })
    .from(papers)
    .orderBy(asc(papers.position), asc(papers.name));
}

/** Everything the page of a plan shows beside what was typed. */
export type Planning = {
  print: PlannedPrint;
  papers: PaperChoice[];
  figures: EditionFigures;
  currency: CurrencyCode;
  zone: string;
  zoneLabel: string;
};

/** The figures of answers as far as they go, and what the form offers; null when there is no such print. */
export async function planning(
  printId: string,
  answers: Answers,
  exceptEditionId: string | null,
): Promise<Planning | null> {
  const studio = await theStudio();
  const currency = currencyCode(studio.currency);
  const print = await plannedPrint(printId, exceptEditionId);
  if (print === null) return null;
  const choices = await paperChoices();
  const grammages = new Map(choices.map((paper) => [paper.id, paper.grammage]));
  return {
    print,
    papers: choices,
    figures: editionFigures(planOf(answers, { currency, grammages }), print.pictures),
    currency,
    zone: studio.zone,
    zoneLabel: zoneLabel(studio),
  };
}
