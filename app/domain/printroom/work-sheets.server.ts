import { inTransaction } from "db/client.server";
import { copies, sheets } from "db/schema/schema";
import { eq } from "drizzle-orm";
import {
  type Actor,
  lockEdition,
  moveSheet,
  oweSheets,
  RefusedTransition,
} from "~/domain/editions/ledger.server";
import { can, type Role } from "~/domain/people/permissions";
import { AppError } from "~/platform/errors";

export type SheetAct =
  | { kind: "printed" | "signed" | "packed" }
  /** `fate`: what became of the failed sheet, in words. */
  | { kind: "spoiled"; reason: string; fate: string };

export type SheetActOutcome = { kind: "done" } | { kind: "refused"; sentence: string };

/**
 * Records what was done to one sheet. A spoiled sheet is recorded with its reason first; then its number is owed
 * a new one. Doing the same twice is refused with a sentence, and changes nothing.
 */
export async function workSheet(
  sheetId: string,
  actor: Actor & { roles: readonly Role[] },
  act: SheetAct,
): Promise<SheetActOutcome> {
  if (!can(actor.roles, "printroom.work")) throw new AppError("not_allowed");
  try {
    return await inTransaction(async (tx) => {
      const [row] = await tx.db
        .select({ editionId: copies.editionId, copyId: copies.id, placement: copies.placement })
        .from(sheets)
        .innerJoin(copies, eq(copies.id, sheets.copyId))
        .where(eq(sheets.id, sheetId));
      if (row === undefined) throw new AppError("not_found");
      const edition = await lockEdition(tx, row.editionId);
      await moveSheet(tx, edition, actor, {
        kind: act.kind,
        sheetId,
        ...(act.kind === "spoiled"
          ? { secret: { reason: act.fate === "" ? act.reason : `${act.reason} (${act.fate})` } }
          : {}),
      });
      if (act.kind === "spoiled") await oweSheets(tx, edition, row.copyId);
      return { kind: "done" };
    });
  } catch (error) {
    if (error instanceof RefusedTransition) return { kind: "refused", sentence: error.message };
    throw error;
  }
}
