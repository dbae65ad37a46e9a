import { inTransaction } from "db/client.server";
import { copies, editions } from "db/schema/schema";
import { and, asc, eq, inArray } from "drizzle-orm";
import { can } from "~/domain/people/permissions";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { heldCopies, issuedCopies } from "./issued.server";
import { lockEdition, moveCopy, writeEditionEntry } from "./ledger.server";
import type { CommandOutcome } from "./lower-limit.server";
import type { StudioActor } from "./studio-actor";
import { refusedForEdition } from "./transitions";

/**
 * Closes an edition early: numbers never issued, in hand or set aside, are retired for good, the denominator stays as it was
 * signed. Numbers that were issued and came back stay as they are, and so do proofs. Refused while copies are held for a
 * checkout. Throws AppError `not_allowed`.
 */
export async function closeEarly(
  actor: StudioActor,
  editionId: string,
  reason: string,
): Promise<CommandOutcome> {
  if (!can(actor.roles, "editions.change")) throw new AppError("not_allowed", "editions.change");
  return inTransaction(async (tx): Promise<CommandOutcome> => {
    const edition = await lockEdition(tx, editionId);
    const refused = refusedForEdition("closed_early", {
      stage: edition.state,
      issued: edition.firstIssuedAt === null ? 0 : 1,
      held: await heldCopies(tx.db, editionId),
    });
    if (refused !== null) return { kind: "refused", sentence: refused.sentence };
    if (reason.trim() === "")
      return { kind: "refused", sentence: "Say why the edition is closed.", field: "reason" };
    const issued = await issuedCopies(tx.db, editionId);
    const left = await tx.db
      .select()
      .from(copies)
      .where(
        and(
          eq(copies.editionId, editionId),
          eq(copies.run, "numbered"),
          inArray(copies.placement, ["in_hand", "set_aside"]),
        ),
      )
      .orderBy(asc(copies.number));
    const retired = left.filter((copy) => !issued.has(copy.id));
    await tx.db.update(editions).set({ state: "closed", closedAt: now() }).where(eq(editions.id, editionId));
    await writeEditionEntry(tx, edition, actor, {
      kind: "closed_early",
      body: { limit: edition.limit, retired: retired.map((copy) => copy.number) },
      secret: { reason },
    });
    for (const copy of retired) {
      await moveCopy(tx, edition, actor, {
        kind: "closed_early",
        copyId: copy.id,
        context: { copyIssued: false },
      });
    }
    return { kind: "done" };
  });
}
