import { db, inTransaction, sqlState, violatedConstraint } from "db/client.server";
import { rolls } from "db/schema/schema";
import { eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { exposedColumns, type RollFields } from "./roll-form";

type NewRoll = Omit<RollFields, "intent"> & { id: string };

export type RollMade = { code: "made"; rollId: string } | { code: "number_taken" };

/** Makes a roll. Sent twice with one id, it makes one. Throws AppError `not_allowed`. */
export async function makeRoll(actor: Actor, roll: NewRoll): Promise<RollMade> {
  mustBeAllowed(actor, "rolls.change");
  const { exposed, ...fields } = roll;
  try {
    return await inTransaction(async (tx): Promise<RollMade> => {
      const [before] = await tx.db.select({ id: rolls.id }).from(rolls).where(eq(rolls.id, roll.id));
      if (before === undefined) {
        await tx.db
          .insert(rolls)
          .values({ ...fields, ...exposedColumns(exposed), createdBy: actor.accountId });
      }
      return { code: "made", rollId: roll.id };
    });
  } catch (error) {
    if (sqlState(error) !== "23505") throw error;
    // The other of two simultaneous requests may have made this very roll.
    const [made] = await db.select({ id: rolls.id }).from(rolls).where(eq(rolls.id, roll.id));
    if (made !== undefined) return { code: "made", rollId: roll.id };
    if (isNumberTaken(error)) return { code: "number_taken" };
    throw error;
  }
}

/** Whether an error of the database says that another roll has the number. */
export function isNumberTaken(error: unknown): boolean {
  return sqlState(error) === "23505" && violatedConstraint(error) === "rolls_number_unique";
}
