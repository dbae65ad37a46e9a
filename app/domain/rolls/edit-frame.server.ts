import { db } from "db/client.server";
import { frames } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";
import { exposureOf, type FrameNotes } from "./frame-form";

type FrameOfRoll = { rollId: string; frameId: string };

/** Writes down how a frame was exposed, its number on the film's edge, and a note. Throws `not_allowed`, `not_found`. */
export async function noteFrame(actor: Actor, of: FrameOfRoll, form: FrameNotes): Promise<void> {
  await change(actor, of, { label: form.label, note: form.note, exposure: exposureOf(form) });
}

/** Marks a frame as chosen for a print, or takes the mark away. Throws `not_allowed`, `not_found`. */
export async function chooseFrame(actor: Actor, of: FrameOfRoll, chosen: boolean): Promise<void> {
  await change(actor, of, { chosen });
}

async function change(
  actor: Actor,
  { rollId, frameId }: FrameOfRoll,
  values: Partial<typeof frames.$inferInsert>,
): Promise<void> {
  mustBeAllowed(actor, "rolls.change");
  const changed = await db
    .update(frames)
    .set(values)
    .where(and(eq(frames.id, frameId), eq(frames.rollId, rollId)))
    .returning({ id: frames.id });
  if (changed.length === 0) throw new AppError("not_found");
}
