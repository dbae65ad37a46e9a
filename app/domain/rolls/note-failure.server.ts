import { db } from "db/client.server";
import { printPictures, scans } from "db/schema/schema";
import { and, eq, inArray, ne } from "drizzle-orm";
import { failureWords } from "./store-proofs.server";

/*
 * A job that failed is seen in the studio: as one that is tried again, and, when the queue has given up, as one that
 * waits for somebody to press a button.
 */

export async function noteScanFailure(scanId: string, error: unknown, last: boolean): Promise<void> {
  await db
    .update(scans)
    .set({ proofState: last ? "failed" : "waiting", proofFailure: failureWords(error) })
    .where(
      and(eq(scans.id, scanId), inArray(scans.state, ["checking", "ready"]), ne(scans.proofState, "ready")),
    );
}

export async function notePrintPictureFailure(id: string, error: unknown, last: boolean): Promise<void> {
  await db
    .update(printPictures)
    .set({ proofState: last ? "failed" : "waiting", proofFailure: failureWords(error) })
    .where(and(eq(printPictures.id, id), ne(printPictures.proofState, "ready")));
}
