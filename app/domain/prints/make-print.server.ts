import { inTransaction, sqlState, type Tx, violatedConstraint } from "db/client.server";
import { frames, printPictures, prints, scans, series } from "db/schema/schema";
import { and, desc, eq, inArray, max, ne, sql } from "drizzle-orm";
import { WHOLE } from "~/domain/imaging/proof-sizes";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { requestPrintProofs } from "~/domain/rolls/build-print-proofs.server";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { freeSlug, suggestSlug } from "./slug";

export type PrintFields = {
  title: string;
  year: number | null;
  seriesId: string;
  newSeries: string;
  slug: string;
  statement: string;
  shownBeforeRelease: boolean;
};

export type PrintMade =
  | { kind: "made"; printId: string }
  | { kind: "slug_taken" }
  /** Labels of frames that have no checked scan yet. */
  | { kind: "not_scanned"; labels: string[] };

/**
 * Makes a print of one frame, or a portfolio of several, in the order given. Sent twice with one id it makes one. Its
 * proofs are asked for in the same transaction. Throws AppError `not_allowed`, `not_found` (a frame that is none).
 */
export async function makePrint(
  actor: Actor,
  print: PrintFields & { id: string; frames: readonly string[]; description: string },
): Promise<PrintMade> {
  mustBeAllowed(actor, "prints.change");
  try {
    return await inTransaction(async (tx): Promise<PrintMade> => {
      const [before] = await tx.db.select({ id: prints.id }).from(prints).where(eq(prints.id, print.id));
      if (before !== undefined) return { kind: "made", printId: print.id };
      const wanted = [...new Set(print.frames)];
      const ready = await latestScans(tx, wanted);
      if (ready.length < wanted.length) throw new AppError("not_found");
      const missing = ready.filter((frame) => frame.scanId === null);
      if (missing.length > 0) return { kind: "not_scanned", labels: missing.map((frame) => frame.label) };
      const slug = print.slug === "" ? await slugFor(tx, print.title) : print.slug;
      await tx.db.insert(prints).values({
        id: print.id,
        slug,
        title: print.title,
        year: print.year,
        seriesId: await seriesOf(tx, print),
        statement: print.statement,
        shownBeforeRelease: print.shownBeforeRelease,
        position: await nextPosition(tx),
      });
      await addPictures(tx, print.id, wanted, print.description);
      return { kind: "made", printId: print.id };
    });
  } catch (error) {
    if (isSlugTaken(error)) return { kind: "slug_taken" };
    if (sqlState(error) === "23505" && violatedConstraint(error) === "prints_pkey") {
      return { kind: "made", printId: print.id };
    }
    throw error;
  }
}

/** Whether an error of the database says that another print has the address. */
export function isSlugTaken(error: unknown): boolean {
  return sqlState(error) === "23505" && violatedConstraint(error) === "prints_slug_unique";
}

/** Frames with their newest checked scan, in the order asked for; frames that do not exist are left out. */
async function latestScans(tx: Pick<Tx, "db">, ids: readonly string[]) {
  if (ids.length === 0) return [];
  const rows = await tx.db
    .select({ id: frames.id, label: frames.label, scanId: scans.id })
    .from(frames)
    .leftJoin(scans, and(eq(scans.frameId, frames.id), eq(scans.state, "ready")))
    .where(inArray(frames.id, [...ids]))
    .orderBy(desc(scans.version));
  return ids.flatMap((id) => rows.find((row) => row.id === id) ?? []);
}

/**
 * Adds frames as pictures behind those the print has, each on its newest checked scan and uncut, and asks for their proofs.
 * Frames that are in it already or have no checked scan are left out. Returns how many were added.
 */
export async function addPictures(
  tx: Tx,
  printId: string,
  ids: readonly string[],
  description = "",
): Promise<number> {
  const there = await tx.db
    .select({ frameId: printPictures.frameId, position: printPictures.position })
    .from(printPictures)
    .where(eq(printPictures.printId, printId));
  let position = there.reduce((most, one) => Math.max(most, one.position), 0);
  let added = 0;
  for (const frame of await latestScans(tx, [...new Set(ids)])) {
    if (frame.scanId === null || there.some((one) => one.frameId === frame.id)) continue;
    position += 1;
    const id = newId();
    await tx.db.insert(printPictures).values({
      id,
      printId,
      position,
      frameId: frame.id,
      scanId: frame.scanId,
      crop: WHOLE,
      description: added === 0 ? description : "",
    });
    await requestPrintProofs(tx, id);
    added += 1;
  }
  return added;
}

/** The series meant by a form: none, one there is, or a new one. Throws AppError `not_found` for an unknown id. */
export async function seriesOf(
  tx: Tx,
  form: { seriesId: string; newSeries: string },
): Promise<string | null> {
  if (form.seriesId === "") return null;
  if (form.seriesId === "new")
    return insertSeries(tx, { id: newId(), title: form.newSeries, slug: "", statement: "" });
  const known = /^[0-9a-f-]{36}$/i.test(form.seriesId)
    ? await tx.db.select({ id: series.id }).from(series).where(eq(series.id, form.seriesId))
    : [];
  const [found] = known;
  if (found === undefined) throw new AppError("not_found");
  return found.id;
}

/** Writes a series behind the others; an empty address is suggested from the title. Returns its id. */
export async function insertSeries(
  tx: Tx,
  one: { id: string; title: string; slug: string; statement: string },
): Promise<string> {
  const taken = await tx.db.select({ slug: series.slug, position: series.position }).from(series);
  const slug =
    one.slug === "" ? freeSlug(suggestSlug(one.title), new Set(taken.map((row) => row.slug))) : one.slug;
  const position = 1 + taken.reduce((most, row) => Math.max(most, row.position), 0);
  await tx.db.insert(series).values({ ...one, slug, position });
  return one.id;
}

/** A free address for a title; `exceptPrintId` may keep its own. */
export async function slugFor(tx: Pick<Tx, "db">, title: string, exceptPrintId?: string): Promise<string> {
  const suggestion = suggestSlug(title) || "untitled";
  const taken = await tx.db
    .select({ slug: prints.slug })
    .from(prints)
    .where(
      and(
        sql`${prints.slug} like ${`${suggestion}%`}`,
        exceptPrintId === undefined ? undefined : ne(prints.id, exceptPrintId),
      ),
    );
  return freeSlug(suggestion, new Set(taken.map((row) => row.slug)));
}

async function nextPosition(tx: Tx): Promise<number> {
  const [row] = await tx.db.select({ last: max(prints.position) }).from(prints);
  return (row?.last ?? 0) + 1;
}
