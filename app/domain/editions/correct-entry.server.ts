import { inTransaction } from "db/client.server";
import { ledgerEntries } from "db/schema/schema";
import { and, eq } from "drizzle-orm";
import { can } from "~/domain/people/permissions";
import { AppError } from "~/platform/errors";
import { type Happened, lockEdition, moveCopy, RefusedTransition, writeEditionEntry } from "./ledger.server";
import type { CommandOutcome } from "./lower-limit.server";
import type { StudioActor } from "./studio-actor";

export type Correction = {
  /** The line that is put right. */
  line: number;
  /** What is right, in words. */
  words: string;
  /** When the thing really happened, where that is what was wrong; null leaves it open. */
  happened: Happened | null;
};

/**
 * Puts a line of the ledger right by a new one that names it; the old line stays as it is. It changes no placement: what was
 * done wrongly is undone by the act that undoes it. Throws AppError `not_allowed`.
 */
export async function correctEntry(
  actor: StudioActor,
  editionId: string,
  correction: Correction,
): Promise<CommandOutcome> {
  if (!can(actor.roles, "copies.place")) throw new AppError("not_allowed", "copies.place");
  const refuse = (sentence: string, field?: string): CommandOutcome => ({
    kind: "refused",
    sentence,
    ...(field === undefined ? {} : { field }),
  });
  if (correction.words.trim() === "") return refuse("Say what is right.", "words");
  try {
    return await inTransaction(async (tx): Promise<CommandOutcome> => {
      const edition = await lockEdition(tx, editionId);
      const [entry] = await tx.db
        .select()
        .from(ledgerEntries)
        .where(and(eq(ledgerEntries.editionId, editionId), eq(ledgerEntries.line, correction.line)));
      if (entry === undefined) return refuse(`There is no line ${correction.line} in this ledger.`, "line");
      const written = {
        kind: "corrected" as const,
        corrects: entry.id,
        secret: { reason: correction.words },
        ...(correction.happened === null ? {} : { happened: correction.happened }),
      };
      if (entry.copyId === null) await writeEditionEntry(tx, edition, actor, written);
      else await moveCopy(tx, edition, actor, { ...written, copyId: entry.copyId });
      return { kind: "done" };
    });
  } catch (error) {
    if (error instanceof RefusedTransition) return refuse(error.message);
    throw error;
  }
}
