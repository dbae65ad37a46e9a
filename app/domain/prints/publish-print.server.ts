import { inTransaction } from "db/client.server";
import { frames, printPictures, prints, scans } from "db/schema/schema";
import { asc, eq } from "drizzle-orm";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { enqueue } from "~/platform/queue.server";
import { missingForPublishing } from "./publishing";

export type PublishOutcome = { kind: "done" } | { kind: "missing"; sentences: string[] };

/** Puts a print into the shop, for the first time or again. Throws AppError `not_allowed`, `not_found`. */
export async function publishPrint(actor: Actor, printId: string): Promise<PublishOutcome> {
  mustBeAllowed(actor, "prints.change");
  return inTransaction(async (tx): Promise<PublishOutcome> => {
    const [print] = await tx.db.select().from(prints).where(eq(prints.id, printId)).for("update");
    if (print === undefined) throw new AppError("not_found");
    if (print.state === "published") return { kind: "done" };
    const pictures = await tx.db
      .select({ label: frames.label, description: printPictures.description, state: scans.state })
      .from(printPictures)
      .innerJoin(frames, eq(frames.id, printPictures.frameId))
      .innerJoin(scans, eq(scans.id, printPictures.scanId))
      .where(eq(printPictures.printId, printId))
      .orderBy(asc(printPictures.position));
    const sentences = missingForPublishing({
      title: print.title,
      year: print.year,
      pictures: pictures.map((picture) => ({ ...picture, scanReady: picture.state === "ready" })),
    });
    if (sentences.length > 0) return { kind: "missing", sentences };
    await tx.db
      .update(prints)
      .set({ state: "published", publishedAt: now(), withdrawnAt: null })
      .where(eq(prints.id, printId));
    await enqueue("publish-proofs", { printId }, { client: tx.client });
    return { kind: "done" };
  });
}

/**
 * Takes a print out of the shop: it can no longer be seen or bought, its proofs are taken back, orders and the book stay as
 * they are. Throws AppError `not_allowed`, `not_found`.
 */
export async function withdrawPrint(actor: Actor, printId: string): Promise<void> {
  mustBeAllowed(actor, "prints.change");
  await inTransaction(async (tx) => {
    const [print] = await tx.db.select().from(prints).where(eq(prints.id, printId)).for("update");
    if (print === undefined) throw new AppError("not_found");
    if (print.state !== "published") return;
    await tx.db.update(prints).set({ state: "withdrawn", withdrawnAt: now() }).where(eq(prints.id, printId));
    await enqueue("publish-proofs", { printId }, { client: tx.client });
  });
}
