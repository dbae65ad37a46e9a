import { inTransaction } from "db/client.server";
import { frames, rolls } from "db/schema/schema";
import { asc, eq, max } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";

/**
 * Lets a frame change places with the one before or after it; at the end of the roll nothing happens. Its number on the
 * film's edge goes with it. Throws AppError `not_allowed`, `not_found`.
 */
export async function moveFrame(
  actor: Actor,
  { rollId, frameId, to }: { rollId: string; frameId: string; to: "earlier" | "later" },
): Promise<void> {
  mustBeAllowed(actor, "rolls.change");
  await inTransaction(async (tx) => {
    await tx.db.select({ id: rolls.id }).from(rolls).where(eq(rolls.id, rollId)).for("update");
    const order = await tx.db
      .select({ id: frames.id, position: frames.position })
      .from(frames)
      .where(eq(frames.rollId, rollId))
      .orderBy(asc(frames.position));
    const at = order.findIndex((frame) => frame.id === frameId);
    const frame = order[at];
    if (frame === undefined) throw new AppError("not_found");
    const other = order[to === "earlier" ? at - 1 : at + 1];
    if (other === undefined) return;
    // Two frames may not have one position even for a moment, so one steps past the end.
    const [{ last } = { last: 0 }] = await tx.db
      .select({ last: max(frames.position) })
      .from(frames)
      .where(eq(frames.rollId, rollId));
    const put = (id: string, position: number) =>
      tx.db.update(frames).set({ position }).where(eq(frames.id, id));
    await put(frame.id, (last ?? 0) + 1);
    await put(other.id, frame.position);
    await put(frame.id, other.position);
  });
}
