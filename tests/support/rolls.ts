import { randomUUID } from "node:crypto";
import { db } from "db/client.server";
import { accounts, frames, parties, scans } from "db/schema/schema";
import { asc, eq } from "drizzle-orm";
import type { Actor } from "~/domain/people/allowed";
import type { Role } from "~/domain/people/permissions";
import { beginUploads } from "~/domain/rolls/begin-uploads.server";
import { finishUpload } from "~/domain/rolls/finish-upload.server";
import { makeRoll } from "~/domain/rolls/make-roll.server";
import { signUpload } from "~/domain/rolls/sign-upload.server";
import { handler as buildPrintProofs } from "~/jobs/build-print-proofs.handler.server";
import { handler as buildProofs } from "~/jobs/build-proofs.handler.server";
import { handler as checkScan } from "~/jobs/check-scan.handler.server";
import { handler as publishProofs } from "~/jobs/publish-proofs.handler.server";
import { newId } from "~/platform/ids.server";
import { startQueue } from "~/platform/queue.server";
import { createStorageServer, type StorageServer } from "../../storage-fake/server";
import { readStorageSettings } from "../../storage-fake/settings";

export const IMAGING = [checkScan, buildProofs, buildPrintProofs, publishProofs];

/** The storage of the test file's environment, at the address its program expects. */
export async function startStorage(): Promise<StorageServer> {
  const storage = createStorageServer(readStorageSettings(process.env));
  await storage.listen();
  return storage;
}

export async function makeActor(...roles: Role[]): Promise<Actor> {
  const [partyId, accountId] = [newId(), newId()];
  await db.insert(parties).values({ id: partyId, name: "Ingrid Maddox" });
  await db.insert(accounts).values({ id: accountId, partyId, email: `${accountId}@harcastle.example` });
  return { accountId, roles };
}

export async function makeTestRoll(actor: Actor, number: number): Promise<string> {
  const made = await makeRoll(actor, {
    id: randomUUID(),
    number,
    filmFormat: "120-6x7",
    camera: "6x7 folding camera, 90 mm",
    film: "ISO 125 traditional film",
    exposed: { value: "2026-11", precision: "month" },
    notes: "",
  });
  if (made.code !== "made") throw new Error("the number is taken");
  return made.rollId;
}

export type TestFile = { name: string; contents: Buffer };

/** Sends files as the page does: announced together, each PUT to the address signed for it, then said to be sent. */
export async function sendFiles(
  actor: Actor,
  rollId: string,
  files: readonly TestFile[],
  frameId?: string,
): Promise<string[]> {
  const announced = files.map(({ name, contents }) => ({ name, size: contents.length }));
  const begun = await beginUploads(actor, { rollId, frameId, files: announced });
  for (const [i, scan] of begun.entries()) {
    if (scan.refused !== null) continue;
    const signed = await signUpload(actor, { rollId, scanId: scan.scanId, method: "PUT" });
    const answer = await fetch(signed.url, {
      method: "PUT",
      headers: signed.headers,
      body: new Uint8Array(files[i]?.contents ?? []),
    });
    if (!answer.ok) throw new Error(`storage answered ${answer.status}: ${await answer.text()}`);
    const { arrived } = await finishUpload(actor, { rollId, scanId: scan.scanId });
    if (!arrived) throw new Error("what was sent is not in storage");
  }
  return begun.map((scan) => scan.scanId);
}

/**
 * Does the imaging jobs that are due, one after the other, until there is none; what they throw is the queue's to
 * judge, as in the worker. Returns how many there were of each queue.
 */
export async function workOff(): Promise<Record<string, number>> {
  const boss = await startQueue();
  const done: Record<string, number> = {};
  for (let found = true; found; ) {
    found = false;
    for (const handler of IMAGING) {
      const [job] = await boss.fetch(handler.queue, { includeMetadata: true, batchSize: 1 });
      if (job === undefined) continue;
      found = true;
      done[handler.queue] = (done[handler.queue] ?? 0) + 1;
      const about = {
        attempt: job.retryCount + 1,
        last: job.retryCount >= job.retryLimit,
        signal: new AbortController().signal,
      };
      try {
        await handler.run(job.data, about);
        await boss.complete(handler.queue, job.id);
      } catch (error) {
        await boss.fail(handler.queue, job.id, { message: String(error) });
      }
    }
  }
  return done;
}

export async function scanRow(scanId: string) {
  const [row] = await db.select().from(scans).where(eq(scans.id, scanId));
  if (row === undefined) throw new Error("no such scan");
  return row;
}

export async function framesOf(rollId: string) {
  return db.select().from(frames).where(eq(frames.rollId, rollId)).orderBy(asc(frames.position));
}
