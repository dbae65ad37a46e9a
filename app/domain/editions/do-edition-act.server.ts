import { db } from "db/client.server";
import { editions } from "db/schema/schema";
import { eq } from "drizzle-orm";
import type { z } from "zod";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { changePrices } from "./change-prices.server";
import { changeRelease } from "./change-release.server";
import { closeEarly } from "./close-early.server";
import { correctEntry } from "./correct-entry.server";
import { deleteDraft } from "./draft-edition.server";
import type { editionActs } from "./edition-acts";
import { type CommandOutcome, lowerLimit } from "./lower-limit.server";
import { openEdition } from "./open-edition.server";
import { placeCopy } from "./place-copy.server";
import type { StudioActor } from "./studio-actor";

type EditionActForm = z.output<ReturnType<typeof editionActs>>;

export type ActOutcome =
  | { kind: "done" }
  /** The edition is no more. */
  | { kind: "gone" }
  | { kind: "refused"; sentences: string[]; field?: string };

const refuse = (sentences: string[], field?: string): ActOutcome => ({
  kind: "refused",
  sentences,
  ...(field === undefined ? {} : { field }),
});

function plain(outcome: CommandOutcome): ActOutcome {
  return outcome.kind === "done" ? outcome : refuse([outcome.sentence], outcome.field);
}

/** Gives the command that an act of the edition's page asks for. Throws AppError `not_allowed`, `not_found`. */
export async function doEditionAct(
  actor: StudioActor,
  editionId: string,
  form: EditionActForm,
): Promise<ActOutcome> {
  switch (form.intent) {
    case "open":
      return open(actor, editionId, form.acceptPastCap);
    case "delete":
      return (await deleteDraft(actor, editionId))
        ? { kind: "gone" }
        : refuse(["This edition has been opened: it stays in the book."]);
    case "lower-limit":
      return plain(await lowerLimit(actor, editionId, form.limit));
    case "prices": {
      const outcome = await changePrices(actor, editionId, form.formatId, form.steps);
      return outcome.kind === "refused" ? refuse(outcome.sentences) : { kind: "done" };
    }
    case "release":
      return plain(await changeRelease(actor, editionId, form.releaseAt));
    case "close":
      return plain(await closeEarly(actor, editionId, form.reason));
    case "place":
      return plain(
        await placeCopy(actor, editionId, {
          copyId: form.copyId,
          act: form.act,
          reason: form.reason,
          happened: form.happened,
          until: form.until,
          to: { name: form.toName, email: form.toEmail },
          formatId: form.formatId === "" ? null : form.formatId,
        }),
      );
    case "correct":
      return plain(
        await correctEntry(actor, editionId, {
          line: form.line,
          words: form.words,
          happened: form.happened,
        }),
      );
  }
}

async function open(actor: StudioActor, editionId: string, acceptPastCap: boolean): Promise<ActOutcome> {
  const [edition] = await db
    .select({ releaseAt: editions.releaseAt })
    .from(editions)
    .where(eq(editions.id, editionId));
  if (edition === undefined) throw new AppError("not_found");
  // A release planned for a time that has passed meanwhile is now.
  const releaseAt = edition.releaseAt !== null && edition.releaseAt > now() ? edition.releaseAt : null;
  const outcome = await openEdition(editionId, actor, { releaseAt, acceptPastCap });
  switch (outcome.kind) {
    case "opened":
    case "already":
      return { kind: "done" };
    case "problems":
      return refuse(outcome.sentences);
    case "past_the_cap":
      return refuse(
        [
          `That would make ${outcome.total} copies of the picture, past the cap of ${outcome.cap}: say that you know.`,
        ],
        "acceptPastCap",
      );
  }
}
