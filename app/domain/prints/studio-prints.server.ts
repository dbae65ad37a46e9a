import { db } from "db/client.server";
import {
  copies,
  editions,
  frames,
  printPictures,
  prints,
  proofs,
  rolls,
  scans,
  series,
} from "db/schema/schema";
import { and, asc, desc, eq, inArray, isNotNull, isNull, or, sql } from "drizzle-orm";
import type { Crop } from "~/domain/imaging/proof-sizes";
import { now } from "~/platform/clock";
import type { PrintState } from "./publishing";

/** A proof by its id: the studio reads it at `/studio/proofs/:proofId`, whether it is public or not. */
export type StudioProof = { id: string; format: "avif" | "webp" | "jpeg"; width: number; height: number };

/** A picture as the studio sees it. */
export type StudioPicture = { alt: string; proofs: StudioProof[]; width: number; height: number };

const proofColumns = {
  id: proofs.id,
  format: proofs.format,
  width: proofs.width,
  height: proofs.height,
  pictureId: proofs.printPictureId,
  scanId: proofs.scanId,
};

function shape(made: readonly StudioProof[], otherwise: { width: number; height: number }) {
  const largest = made.reduce<StudioProof | undefined>(
    (a, b) => (a && a.width >= b.width ? a : b),
    undefined,
  );
  return largest === undefined ? otherwise : { width: largest.width, height: largest.height };
}

const plainProof = ({ id, format, width, height }: StudioProof): StudioProof => ({
  id,
  format,
  width,
  height,
});

/** The first picture of each of these prints. */
export async function firstPictures(printIds: readonly string[]): Promise<Map<string, StudioPicture>> {
  if (printIds.length === 0) return new Map();
  const pictures = await db
    .select({
      id: printPictures.id,
      printId: printPictures.printId,
      description: printPictures.description,
      crop: printPictures.crop,
      scanWidth: scans.width,
      scanHeight: scans.height,
    })
    .from(printPictures)
    .innerJoin(scans, eq(scans.id, printPictures.scanId))
    .where(inArray(printPictures.printId, [...printIds]))
    .orderBy(asc(printPictures.printId), asc(printPictures.position));
  const first = pictures.filter((picture, at) => pictures[at - 1]?.printId !== picture.printId);
  const made =
    first.length === 0
      ? []
      : await db
          .select(proofColumns)
          .from(proofs)
          .where(
            inArray(
              proofs.printPictureId,
              first.map((picture) => picture.id),
            ),
          );
  return new Map(
    first.map((picture) => {
      const own = made.filter((proof) => proof.pictureId === picture.id).map(plainProof);
      const scan = {
        width: ((picture.scanWidth ?? 5) * picture.crop.width) / 1_000_000,
        height: ((picture.scanHeight ?? 4) * picture.crop.height) / 1_000_000,
      };
      return [picture.printId, { alt: picture.description, proofs: own, ...shape(own, scan) }];
    }),
  );
}

export type PrintLine = {
  id: string;
  title: string;
  slug: string;
  year: number | null;
  state: PrintState;
  series: string | null;
  position: number;
  pictures: number;
  editions: { draft: number; open: number; closed: number };
  /** Numbers in hand over all open editions. */
  left: number;
  picture: StudioPicture;
};

export type PrintsAsked = {
  q: string;
  state: "" | PrintState;
  /** Id of a series, "none", or "" for any. */
  series: string;
  sort: "order" | "title" | "year" | "state";
  down: boolean;
};

/** Reads what the list is asked for from the address; what is not understood counts as not asked. */
export function printsAsked(search: URLSearchParams): PrintsAsked {
  const one = <T extends string>(name: string, allowed: readonly T[], otherwise: T): T =>
    allowed.find((value) => value === search.get(name)) ?? otherwise;
  return {
    q: (search.get("q") ?? "").trim().slice(0, 100),
    state: one("state", ["", "draft", "published", "withdrawn"], ""),
    series: (search.get("series") ?? "").slice(0, 40),
    sort: one("sort", ["order", "title", "year", "state"], "order"),
    down: search.get("down") === "1",
  };
}

/** Prints of the studio as asked for. */
export async function studioPrints(asked: PrintsAsked): Promise<PrintLine[]> {
  const rows = await db
    .select({ print: prints, series: series.title })
    .from(prints)
    .leftJoin(series, eq(series.id, prints.seriesId))
    .orderBy(asc(prints.position), asc(prints.title), asc(prints.id));
  const plain = (text: string) => text.toLocaleLowerCase("en");
  const found = rows.filter(
    ({ print, series: name }) =>
      (asked.state === "" || print.state === asked.state) &&
      (asked.series === "" ||
        (asked.series === "none" ? print.seriesId === null : print.seriesId === asked.series)) &&
      (asked.q === "" ||
        [print.title, print.slug, name ?? "", String(print.year ?? "")].some((text) =>
          plain(text).includes(plain(asked.q)),
        )),
  );
  const ids = found.map(({ print }) => print.id);
  if (ids.length === 0) return [];
  const [pictures, counts, own, left] = await Promise.all([
    firstPictures(ids),
    db
      .select({ printId: printPictures.printId, n: sql<number>`count(*)` })
      .from(printPictures)
      .where(inArray(printPictures.printId, ids))
      .groupBy(printPictures.printId),
    db
      .select({ printId: editions.printId, state: editions.state })
      .from(editions)
      .where(inArray(editions.printId, ids)),
    db
      .select({ printId: editions.printId, n: sql<number>`count(*)` })
      .from(copies)
      .innerJoin(editions, eq(editions.id, copies.editionId))
      .where(
        and(
          inArray(editions.printId, ids),
          eq(editions.state, "open"),
          eq(copies.run, "numbered"),
          eq(copies.placement, "in_hand"),
        ),
      )
      .groupBy(editions.printId),
  ]);
  const lines = found.map(({ print, series: name }): PrintLine => {
    const states = own.filter((edition) => edition.printId === print.id);
    const count = (state: string) => states.filter((edition) => edition.state === state).length;
    return {
      id: print.id,
      title: print.title,
      slug: print.slug,
      year: print.year,
      state: print.state,
      series: name,
      position: print.position,
      pictures: counts.find((row) => row.printId === print.id)?.n ?? 0,
      editions: { draft: count("draft"), open: count("open"), closed: count("closed") },
      left: left.find((row) => row.printId === print.id)?.n ?? 0,
      picture: pictures.get(print.id) ?? { alt: "", proofs: [], width: 5, height: 4 },
    };
  });
  const by: Record<PrintsAsked["sort"], (a: PrintLine, b: PrintLine) => number> = {
    order: () => 0,
    title: (a, b) => a.title.localeCompare(b.title, "en"),
    year: (a, b) => (a.year ?? 0) - (b.year ?? 0),
    state: (a, b) => a.state.localeCompare(b.state, "en"),
  };
  const sorted = lines.toSorted(by[asked.sort]);
  return asked.down ? sorted.reverse() : sorted;
}

export type SeriesLine = {
  id: string;
  slug: string;
  title: string;
  statement: string;
  prints: { id: string; title: string; state: PrintState }[];
};

/** Every series with its prints, in the studio's order. */
export async function studioSeries(): Promise<SeriesLine[]> {
  const rows = await db
    .select()
    .from(series)
    .orderBy(asc(series.position), asc(series.title), asc(series.id));
  const own = await db
    .select({ id: prints.id, title: prints.title, state: prints.state, seriesId: prints.seriesId })
    .from(prints)
    .where(isNotNull(prints.seriesId))
    .orderBy(asc(prints.position), asc(prints.title));
  return rows.map(({ id, slug, title, statement }) => ({
    id,
    slug,
    title,
    statement,
    prints: own
      .filter((print) => print.seriesId === id)
      .map(({ id: printId, title: name, state }) => ({ id: printId, title: name, state })),
  }));
}

export type PrintPicture = {
  id: string;
  frameId: string;
  rollId: string;
  /** "roll 214, frame 7" */
  where: string;
  label: string;
  description: string;
  crop: Crop;
  scan: { id: string; version: number; width: number; height: number; ready: boolean };
  /** Checked versions of the frame's scan, newest first. */
  versions: { id: string; version: number; width: number; height: number }[];
  proofState: "waiting" | "working" | "ready" | "failed";
  proofFailure: string | null;
  /** The crop. */
  shown: StudioPicture;
  /** The whole frame, for drawing the crop on it. */
  whole: StudioPicture;
};

export type PrintEdition = {
  id: string;
  state: "draft" | "open" | "closed";
  limit: number;
  left: number;
  releaseAt: Date | null;
  released: boolean;
};

export type StudioPrint = typeof prints.$inferSelect & {
  pictures: PrintPicture[];
  editions: PrintEdition[];
  /** Other prints of the same pictures. */
  others: { id: string; title: string }[];
};

/** A print with everything its page shows; null when there is none. */
export async function studioPrint(printId: string): Promise<StudioPrint | null> {
  const [print] = await db.select().from(prints).where(eq(prints.id, printId));
  if (print === undefined) return null;
  const rows = await db
    .select({ picture: printPictures, frame: frames, roll: rolls, scan: scans })
    .from(printPictures)
    .innerJoin(frames, eq(frames.id, printPictures.frameId))
    .innerJoin(rolls, eq(rolls.id, frames.rollId))
    .innerJoin(scans, eq(scans.id, printPictures.scanId))
    .where(eq(printPictures.printId, printId))
    .orderBy(asc(printPictures.position));
  const frameIds = rows.map((row) => row.frame.id);
  const some = frameIds.length > 0;
  const [versions, made, own, left, others] = await Promise.all([
    some
      ? db
          .select()
          .from(scans)
          .where(and(inArray(scans.frameId, frameIds), eq(scans.state, "ready")))
          .orderBy(desc(scans.version))
      : [],
    some
      ? db
          .select(proofColumns)
          .from(proofs)
          .where(
            or(
              inArray(
                proofs.printPictureId,
                rows.map((row) => row.picture.id),
              ),
              and(
                isNull(proofs.printPictureId),
                inArray(
                  proofs.scanId,
                  rows.map((row) => row.scan.id),
                ),
              ),
            ),
          )
      : [],
    db
      .select()
      .from(editions)
      .where(eq(editions.printId, printId))
      .orderBy(asc(editions.position), asc(editions.createdAt)),
    db
      .select({ editionId: copies.editionId, n: sql<number>`count(*)` })
      .from(copies)
      .innerJoin(editions, eq(editions.id, copies.editionId))
      .where(and(eq(editions.printId, printId), eq(copies.run, "numbered"), eq(copies.placement, "in_hand")))
      .groupBy(copies.editionId),
    some
      ? db
          .selectDistinct({ id: prints.id, title: prints.title })
          .from(printPictures)
          .innerJoin(prints, eq(prints.id, printPictures.printId))
          .where(and(inArray(printPictures.frameId, frameIds), sql`${prints.id} <> ${printId}`))
      : [],
  ]);
  return {
    ...print,
    others,
    editions: own.map((edition) => ({
      id: edition.id,
      state: edition.state,
      limit: edition.limit,
      left: left.find((row) => row.editionId === edition.id)?.n ?? 0,
      releaseAt: edition.releaseAt,
      released: edition.releaseAt !== null && edition.releaseAt <= now(),
    })),
    pictures: rows.map(({ picture, frame, roll, scan }): PrintPicture => {
      const size = { width: scan.width ?? 5, height: scan.height ?? 4 };
      const cut = made.filter((proof) => proof.pictureId === picture.id).map(plainProof);
      const all = made
        .filter((proof) => proof.pictureId === null && proof.scanId === scan.id)
        .map(plainProof);
      const cropped = {
        width: (size.width * picture.crop.width) / 1_000_000,
        height: (size.height * picture.crop.height) / 1_000_000,
      };
      return {
        id: picture.id,
        frameId: frame.id,
        rollId: roll.id,
        where: `roll ${roll.number}, frame ${frame.label}`,
        label: frame.label,
        description: picture.description,
        crop: picture.crop,
        scan: { id: scan.id, version: scan.version, ...size, ready: scan.state === "ready" },
        versions: versions
          .filter((one) => one.frameId === frame.id)
          .map((one) => ({
            id: one.id,
            version: one.version,
            width: one.width ?? 0,
            height: one.height ?? 0,
          })),
        proofState: picture.proofState,
        proofFailure: picture.proofFailure,
        shown: { alt: picture.description, proofs: cut, ...shape(cut, cropped) },
        whole: { alt: picture.description, proofs: all, ...size },
      };
    }),
  };
}

export type FrameChoice = {
  id: string;
  rollId: string;
  rollNumber: number;
  label: string;
  chosen: boolean;
  note: string;
  /** The year of exposure of its roll, if that much is known. */
  year: number | null;
  scanReady: boolean;
  whole: StudioPicture;
};

/** Frames to make a print of: by id, in that order, or those of a roll, or all that were chosen on their rolls. */
export async function frameChoices(
  of: { ids: readonly string[] } | { rollId: string } | "chosen",
): Promise<FrameChoice[]> {
  const which =
    of === "chosen"
      ? eq(frames.chosen, true)
      : "ids" in of
        ? inArray(frames.id, [...of.ids])
        : eq(frames.rollId, of.rollId);
  if (of !== "chosen" && "ids" in of && of.ids.length === 0) return [];
  const rows = await db
    .select({ frame: frames, roll: rolls })
    .from(frames)
    .innerJoin(rolls, eq(rolls.id, frames.rollId))
    .where(which)
    .orderBy(desc(rolls.number), asc(frames.position))
    .limit(200);
  if (rows.length === 0) return [];
  const ready = await db
    .select()
    .from(scans)
    .where(
      and(
        inArray(
          scans.frameId,
          rows.map((row) => row.frame.id),
        ),
        eq(scans.state, "ready"),
      ),
    )
    .orderBy(desc(scans.version));
  const newest = rows.map((row) => ready.find((scan) => scan.frameId === row.frame.id));
  const scanIds = newest.flatMap((scan) => scan?.id ?? []);
  const made =
    scanIds.length === 0
      ? []
      : await db
          .select(proofColumns)
          .from(proofs)
          .where(and(isNull(proofs.printPictureId), inArray(proofs.scanId, scanIds)));
  const choices = rows.map(({ frame, roll }, at): FrameChoice => {
    const scan = newest[at];
    const size = { width: scan?.width ?? 5, height: scan?.height ?? 4 };
    return {
      id: frame.id,
      rollId: roll.id,
      rollNumber: roll.number,
      label: frame.label,
      chosen: frame.chosen,
      note: frame.note,
      year:
        roll.exposedOn === null || roll.exposedPrecision === "unknown"
          ? null
          : Number(roll.exposedOn.slice(0, 4)),
      scanReady: scan !== undefined,
      whole: {
        alt: "",
        proofs: made.filter((proof) => proof.scanId === scan?.id).map(plainProof),
        ...size,
      },
    };
  });
  if (of === "chosen" || !("ids" in of)) return choices;
  return of.ids.flatMap((id) => choices.find((choice) => choice.id === id) ?? []);
}

/** Rolls by number, newest first, to look for frames in. */
export async function rollChoices(): Promise<{ id: string; number: number }[]> {
  return db.select({ id: rolls.id, number: rolls.number }).from(rolls).orderBy(desc(rolls.number));
}
