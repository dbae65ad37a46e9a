import { db } from "db/client.server";
import { studio } from "db/schema/schema";
import { AppError } from "~/platform/errors";

/** The studio itself: its name, address, zone (IANA), currency (ISO 4217). One row, made by /setup or the demo. */
export type Studio = Readonly<Omit<typeof studio.$inferSelect, "only">>;

/** How long a process may go on with what it read (milliseconds): settings are seen by all within seconds. */
const FRESH_FOR = 3_000;

let read: { at: number; row: Promise<Studio | null> } | undefined;

async function readStudio(): Promise<Studio | null> {
  const [row] = await db.select().from(studio).limit(1);
  if (row === undefined) return null;
  const { only: _, ...rest } = row;
  return rest;
}

/** The studio, or null before it has been set up. Read at most every few seconds; "none yet" is never kept. */
export async function studioOrNull(): Promise<Studio | null> {
  const at = performance.now();
  if (read === undefined || at - read.at > FRESH_FOR) read = { at, row: readStudio() };
  const mine = read;
  try {
    const row = await mine.row;
    if (row === null && read === mine) read = undefined;
    return row;
  } catch (error) {
    if (read === mine) read = undefined;
    throw error;
  }
}

/** The studio. Throws AppError `unavailable` before it has been set up. */
export async function theStudio(): Promise<Studio> {
  const row = await studioOrNull();
  if (row === null) throw new AppError("unavailable", "the studio has not been set up");
  return row;
}

/** Forgets what was read: call it after changing the row. Other processes see the change within seconds. */
export function forgetStudio(): void {
  read = undefined;
}
