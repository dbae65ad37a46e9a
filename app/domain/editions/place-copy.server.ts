import { inTransaction, type Tx } from "db/client.server";
import { copies, formats, parties } from "db/schema/schema";
import { and, asc, eq, sql } from "drizzle-orm";
import { newCheckCode } from "~/domain/orders/check-code.server";
import { can } from "~/domain/people/permissions";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import type { HandAct } from "./hand-acts";
import { type Happened, lockEdition, moveCopy, oweSheets, RefusedTransition } from "./ledger.server";
import type { CommandOutcome } from "./lower-limit.server";
import type { StudioActor } from "./studio-actor";

export type PlaceCopy = {
  copyId: string;
  act: HandAct;
  reason: string;
  happened: Happened;
  /** Until which day a copy is set aside; "" for as long as it takes. */
  until: string;
  /** Who is given the copy. A party of the same e-mail address is taken for the same. */
  to: { name: string; email: string };
  /** Which format a given copy takes; null where the edition has one. */
  formatId: string | null;
};

/**
 * Places a copy by hand: set aside, given, kept, retired, or back in hand; the book says when and why. Copies held for a
 * checkout and whatever the table of transitions does not allow are refused with its sentence. Throws AppError
 * `not_allowed`, `not_found` (no such copy in this edition).
 */
export async function placeCopy(
  actor: StudioActor,
  editionId: string,
  place: PlaceCopy,
): Promise<CommandOutcome> {
  if (!can(actor.roles, "copies.place")) throw new AppError("not_allowed", "copies.place");
  const refuse = (sentence: string, field?: string): CommandOutcome => ({
    kind: "refused",
    sentence,
    ...(field === undefined ? {} : { field }),
  });
  try {
    return await inTransaction(async (tx): Promise<CommandOutcome> => {
      const edition = await lockEdition(tx, editionId);
      const [copy] = await tx.db
        .select()
        .from(copies)
        .where(and(eq(copies.id, place.copyId), eq(copies.editionId, editionId)));
      if (copy === undefined) throw new AppError("not_found");
      if ((place.act === "retired" || place.act === "set_aside") && place.reason === "") {
        return refuse(
          place.act === "retired" ? "Say why the copy is retired." : "Say what the copy is set aside for.",
          "reason",
        );
      }
      const secret = place.reason === "" ? {} : { reason: place.reason };
      if (place.act !== "given") {
        await moveCopy(tx, edition, actor, {
          kind: place.act,
          copyId: copy.id,
          happened: place.happened,
          secret,
          ...(place.act === "set_aside" && place.until !== "" ? { body: { until: place.until } } : {}),
        });
        return { kind: "done" };
      }
      if (place.to.name === "") return refuse("Say who was given the copy.", "toName");
      const formatId = copy.formatId ?? (await formatTaken(tx, editionId, place.formatId));
      if (formatId === null) return refuse("Say in which format the copy is given.", "formatId");
      const partyId = await partyGiven(tx, place.to);
      await moveCopy(tx, edition, actor, {
        kind: "given",
        copyId: copy.id,
        happened: place.happened,
        formatId,
        ownerPartyId: partyId,
        secret: { ...secret, partyId, partyName: place.to.name },
      });
      await tx.db
        .update(copies)
        .set({ checkCode: copy.checkCode ?? newCheckCode() })
        .where(eq(copies.id, copy.id));
      await oweSheets(tx, edition, copy.id);
      return { kind: "done" };
    });
  } catch (error) {
    if (error instanceof RefusedTransition) return refuse(error.message);
    throw error;
  }
}

async function formatTaken(tx: Tx, editionId: string, wanted: string | null): Promise<string | null> {
  const own = await tx.db
    .select({ id: formats.id })
    .from(formats)
    .where(eq(formats.editionId, editionId))
    .orderBy(asc(formats.position));
  if (own.length === 1) return own[0]?.id ?? null;
  return own.find((format) => format.id === wanted)?.id ?? null;
}

async function partyGiven(tx: Tx, to: { name: string; email: string }): Promise<string> {
  if (to.email !== "") {
    const [known] = await tx.db
      .select({ id: parties.id })
      .from(parties)
      .where(sql`lower(${parties.email}) = ${to.email.toLowerCase()}`)
      .orderBy(asc(parties.createdAt))
      .limit(1);
    if (known !== undefined) return known.id;
  }
  const id = newId();
  await tx.db.insert(parties).values({ id, name: to.name, email: to.email === "" ? null : to.email });
  return id;
}
