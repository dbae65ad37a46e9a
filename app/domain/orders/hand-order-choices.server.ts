import { db } from "db/client.server";
import { editions, formats, parties, prints } from "db/schema/schema";
import { asc, eq } from "drizzle-orm";
import { now } from "~/platform/clock";
import { formatsForSale, priceOfFree } from "./for-sale.server";

export type HandChoice = {
  formatId: string;
  title: string;
  /** "Smooth cotton, sheet 420 × 420 mm" */
  words: string;
  limit: number;
  nextNumber: number;
  nextAmount: number;
};

/** What can be ordered by hand: every format of an open edition that has a number in hand, released or not. */
export async function handChoices(): Promise<HandChoice[]> {
  const open = await db
    .select({ id: formats.id })
    .from(formats)
    .innerJoin(editions, eq(editions.id, formats.editionId))
    .innerJoin(prints, eq(prints.id, editions.printId))
    .where(eq(editions.state, "open"))
    .orderBy(asc(prints.title), asc(editions.position), asc(formats.position));
  const sale = await formatsForSale(
    db,
    open.map((f) => f.id),
    now(),
  );
  return sale.flatMap((f) => {
    const [next] = f.free;
    const nextAmount = next === undefined ? null : priceOfFree(f, next);
    if (next === undefined || nextAmount === null) return [];
    return [
      {
        formatId: f.formatId,
        title: f.title,
        words: `${f.paper}, sheet ${f.sheetWidthMm} × ${f.sheetHeightMm} mm`,
        limit: f.limit,
        nextNumber: next.number,
        nextAmount,
      },
    ];
  });
}

/** Parties of the book by name, to choose a buyer from; the first five hundred. */
export function partyChoices(): Promise<{ id: string; name: string; email: string | null }[]> {
  return db
    .select({ id: parties.id, name: parties.name, email: parties.email })
    .from(parties)
    .orderBy(asc(parties.name))
    .limit(500);
}
