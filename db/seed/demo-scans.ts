import { and, eq, like } from "drizzle-orm";
import { now } from "~/platform/clock";
import { sha256 } from "~/platform/ids.server";
import { enqueue } from "~/platform/queue.server";
import { putObject } from "~/platform/storage.server";
import { db, inTransaction } from "../client.server";
import { printPictures, scans } from "../schema/schema";
import { demoScanKey } from "./demo";
import { frameKey, prints, rolls } from "./scans/catalogue";
import { renderAll } from "./scans/render-all";

/**
 * Draws the demo's scans that are not in storage yet, and asks for the proofs of each as it comes.
 *
 * @param most draw only until so many are there, those of the first prints before others.
 */
export async function seedScans(say: (line: string) => void, most = Number.POSITIVE_INFINITY): Promise<void> {
  const waiting = await db
    .select({ id: scans.id, key: scans.objectKey })
    .from(scans)
    .where(and(eq(scans.state, "expected"), like(scans.objectKey, "scans/demo/%")));
  const ids = new Map(waiting.map((s) => [s.key, s.id]));
  const all = rolls.flatMap((roll) =>
    roll.frames.map((frame) => ({ roll: roll.number, position: frame.position })),
  );
  const printed = prints.flatMap((print) => print.frames).slice(0, most);
  const wanted = Number.isFinite(most) ? printed : all;
  const only = wanted.filter((ref) => ids.has(demoScanKey(ref)));
  if (only.length === 0) return;
  let done = 0;
  await renderAll(
    async ({ roll, frame, tiff, width, height, dpi }) => {
      const ref = { roll: roll.number, position: frame.position };
      const scanId = ids.get(demoScanKey(ref));
      if (scanId === undefined) throw new Error(`no scan ${frameKey(ref)}`);
      await putObject("private", demoScanKey(ref), tiff, "image/tiff");
      await inTransaction(async (tx) => {
        await tx.db
          .update(scans)
          .set({
            state: "ready",
            declaredBytes: tiff.byteLength,
            bytes: tiff.byteLength,
            sha256: sha256(tiff),
            mediaType: "image/tiff",
            width,
            height,
            bitDepth: 16,
            channels: 1,
            colourSpace: "grey16",
            pixelsPerInch: Math.round(dpi),
            uploadedAt: now(),
            checkedAt: now(),
          })
          .where(eq(scans.id, scanId));
        // Printed pictures first: the shop waits for them, the contact sheets can come after.
        const pictures = await tx.db
          .select({ id: printPictures.id })
          .from(printPictures)
          .where(eq(printPictures.scanId, scanId));
        for (const picture of pictures)
          await enqueue("build-print-proofs", { printPictureId: picture.id }, { client: tx.client });
        await enqueue("build-proofs", { scanId }, { client: tx.client });
      });
      done += 1;
      if (done % 5 === 0 || done === only.length) say(`scan ${done} of ${only.length}`);
    },
    { concurrency: 2, only },
  );
}
