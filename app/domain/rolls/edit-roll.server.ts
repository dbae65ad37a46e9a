import { db } from "db/client.server";
import { rolls } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { AppError } from "~/platform/errors";
import { isNumberTaken } from "./make-roll.server";
import { exposedColumns, type RollFields } from "./roll-form";

/** Changes what is written of a roll. Throws AppError `not_allowed`, `not_found`. */
export async function editRoll(
  actor: Actor,
  rollId: string,
  fields: Omit<RollFields, "intent">,
): Promise<{ code: "saved" } | { code: "number_taken" }> {
  mustBeAllowed(actor, "rolls.change");
  const { number, filmFormat, camera, film, notes, exposed } = fields;
  try {
    const changed = await db
      .update(rolls)
      .set({ number, filmFormat, camera, film, notes, ...exposedColumns(exposed) })
      .where(eq(rolls.id, rollId))
      .returning({ id: rolls.id });
    if (changed.length === 0) throw new AppError("not_found");
    return { code: "saved" };
  } catch (error) {
    if (isNumberTaken(error)) return { code: "number_taken" };
    throw error;
  }
}
