import { inTransaction, sqlState, type Tx } from "db/client.server";
import { prints, series } from "db/schema/schema";
import { asc, eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";
import { insertSeries } from "./make-print.server";
import type { SeriesFields } from "./print-form";

type Step = "earlier" | "later";

/** The list with one thing a place earlier or later; the list itself where it stands at that end already. */
export function moved(ids: readonly string[], id: string, to: Step): string[] {
  const at = ids.indexOf(id);
  const other = to === "earlier" ? at - 1 : at + 1;
  const list = [...ids];
  const [one, two] = [list[at], list[other]];
  if (at === -1 || one === undefined || two === undefined) return list;
  list[at] = two;
  list[other] = one;
  return list;
}

/** Moves a print one place in the studio's order, which is the shop's. Throws AppError `not_allowed`. */
export async function movePrint(actor: Actor, printId: string, to: Step): Promise<void> {
  mustBeAllowed(actor, "prints.change");
  await inTransaction(async (tx) => {
    const rows = await tx.db
      .select({ id: prints.id, position: prints.position })
      .from(prints)
      .orderBy(asc(prints.position), asc(prints.title), asc(prints.id))
      .for("update");
    await renumber(
      rows,
      moved(
        rows.map((row) => row.id),
        printId,
        to,
      ),
      (id, position) => tx.db.update(prints).set({ position }).where(eq(prints.id, id)),
    );
  });
}

/** Moves a series one place. Throws AppError `not_allowed`. */
export async function moveSeries(actor: Actor, seriesId: string, to: Step): Promise<void> {
  mustBeAllowed(actor, "prints.change");
  await inTransaction(async (tx) => {
    const rows = await tx.db
      .select({ id: series.id, position: series.position })
      .from(series)
      .orderBy(asc(series.position), asc(series.title), asc(series.id))
      .for("update");
    await renumber(
      rows,
      moved(
        rows.map((row) => row.id),
        seriesId,
        to,
      ),
      (id, position) => tx.db.update(series).set({ position }).where(eq(series.id, id)),
    );
  });
}

async function renumber(
  rows: readonly { id: string; position: number }[],
  order: readonly string[],
  write: (id: string, position: number) => Promise<unknown>,
): Promise<void> {
  for (const [index, id] of order.entries()) {
    const position = index + 1;
    if (rows.find((row) => row.id === id)?.position !== position) await write(id, position);
  }
}

export type SeriesOutcome = { kind: "done" } | { kind: "slug_taken" };

/** Makes a series, or changes its words. Throws AppError `not_allowed`, `not_found`. */
export async function writeSeries(
  actor: Actor,
  intent: "make" | "edit",
  id: string,
  { title, slug, statement }: SeriesFields,
): Promise<SeriesOutcome> {
  mustBeAllowed(actor, "prints.change");
  try {
    await inTransaction(async (tx: Tx) => {
      const [known] = await tx.db
        .select({ id: series.id })
        .from(series)
        .where(eq(series.id, id))
        .for("update");
      if (intent === "make") {
        if (known === undefined) await insertSeries(tx, { id, title, slug, statement });
        return;
      }
      if (known === undefined) throw new AppError("not_found");
      await tx.db
        .update(series)
        .set({ title, statement, ...(slug === "" ? {} : { slug }) })
        .where(eq(series.id, id));
    });
    return { kind: "done" };
  } catch (error) {
    if (sqlState(error) === "23505") return { kind: "slug_taken" };
    throw error;
  }
}
