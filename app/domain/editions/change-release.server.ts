import { inTransaction } from "db/client.server";
import { editions, ledgerEntries } from "db/schema/schema";
import { and, asc, eq } from "drizzle-orm";
import { can } from "~/domain/people/permissions";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { enqueue } from "~/platform/queue.server";
import { lockEdition, writeEditionEntry } from "./ledger.server";
import type { CommandOutcome } from "./lower-limit.server";
import type { StudioActor } from "./studio-actor";

/**
 * Moves the release of an open edition that has not been released yet; null releases it at once. The book corrects the line
 * that opened the edition. Throws AppError `not_allowed`.
 */
export async function changeRelease(
  actor: StudioActor,
  editionId: string,
  to: Date | null,
): Promise<CommandOutcome> {
  if (!can(actor.roles, "editions.change")) throw new AppError("not_allowed", "editions.change");
  return inTransaction(async (tx): Promise<CommandOutcome> => {
    const edition = await lockEdition(tx, editionId);
    const at = now();
    const refuse = (sentence: string): CommandOutcome => ({ kind: "refused", sentence });
    if (edition.state !== "open" || edition.releaseAt === null) {
      return refuse("Only an open edition has a release to move.");
    }
    if (edition.releaseAt <= at) {
      return refuse("The edition has been released: that moment has passed and stays in the book.");
    }
    const releaseAt = to ?? at;
    if (releaseAt < at) return refuse("That time has passed. Choose a later one, or release it now.");
    if (releaseAt.getTime() === edition.releaseAt.getTime()) return { kind: "done" };
    const [opened] = await tx.db
      .select({ id: ledgerEntries.id })
      .from(ledgerEntries)
      .where(and(eq(ledgerEntries.editionId, editionId), eq(ledgerEntries.kind, "opened")))
      .orderBy(asc(ledgerEntries.line))
      .limit(1);
    await tx.db.update(editions).set({ releaseAt }).where(eq(editions.id, editionId));
    await writeEditionEntry(tx, edition, actor, {
      kind: "corrected",
      body: { release: releaseAt.toISOString(), wasRelease: edition.releaseAt.toISOString() },
      ...(opened === undefined ? {} : { corrects: opened.id }),
    });
    await enqueue(
      "publish-proofs",
      { printId: edition.printId },
      { client: tx.client, startAfter: releaseAt },
    );
    return { kind: "done" };
  });
}
