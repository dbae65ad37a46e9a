import { db, inTransaction } from "db/client.server";
import { printPictures, scans } from "db/schema/schema";
import { and, asc, eq, gt, inArray, lt, sql } from "drizzle-orm";
import type { QueueName } from "~/jobs/queues";
import { now } from "~/platform/clock";
import { enqueue } from "~/platform/queue.server";
import { takeIfArrived } from "./finish-upload.server";
import { printsOutOfLine, publishProofs } from "./publish-proofs.server";

/*
 * What the worker looks after again and again, because a browser may be closed and a machine may stop at any moment.
 */

const MINUTE = 60_000;
const DAY = 24 * 60 * MINUTE;

/**
 * Takes scans that have been sent completely although the page that sent them was closed before it could say so. Those
 * announced within the last minute are left to their page; after a day the photographer is the one to choose again.
 */
export async function takeArrivedScans(): Promise<void> {
  const at = now().getTime();
  const waiting = await db
    .select({ id: scans.id })
    .from(scans)
    .where(
      and(
        eq(scans.state, "expected"),
        lt(scans.createdAt, new Date(at - MINUTE)),
        gt(scans.createdAt, new Date(at - DAY)),
      ),
    )
    .orderBy(asc(scans.createdAt))
    .limit(200);
  for (const { id } of waiting) await takeIfArrived(id);
}

const GIVEN_UP = "The machine stopped again and again while it was at work on this scan.";

/**
 * Finds scans and prints' pictures that wait for a job that does not exist. Where the queue has given it up, that is
 * written down so that it can be seen; where it was lost, there is a new one.
 */
export async function findLostImaging(): Promise<void> {
  const checking = await idsOf(
    db
      .select({ id: scans.id })
      .from(scans)
      .where(and(eq(scans.state, "checking"), unfinished(scans.proofState))),
  );
  const building = await idsOf(
    db
      .select({ id: scans.id })
      .from(scans)
      .where(and(eq(scans.state, "ready"), unfinished(scans.proofState))),
  );
  const prints = await idsOf(
    db
      .select({ id: printPictures.id })
      .from(printPictures)
      // The demo's prints are there before their scans are drawn.
      .innerJoin(scans, and(eq(scans.id, printPictures.scanId), eq(scans.state, "ready")))
      .where(unfinished(printPictures.proofState)),
  );
  await putRight("check-scan", "scanId", checking);
  await putRight("build-proofs", "scanId", building);
  await putRight("build-print-proofs", "printPictureId", prints);
}

function unfinished(column: typeof scans.proofState | typeof printPictures.proofState) {
  return inArray(column, ["waiting", "working"]);
}

async function idsOf(rows: Promise<{ id: string }[]> | PromiseLike<{ id: string }[]>): Promise<string[]> {
  return (await rows).map((row) => row.id);
}

async function putRight(queue: QueueName, key: "scanId" | "printPictureId", ids: string[]): Promise<void> {
  if (ids.length === 0) return;
  const { rows } = await db.execute<{ id: string; live: boolean; failed: boolean }>(sql`
    select data->>${key} as id, bool_or(state < 'completed') as live, bool_or(state = 'failed') as failed
      from pgboss.job where name = ${queue} and data->>${key} in ${ids} group by 1`);
  const jobs = new Map(rows.map((row) => [row.id, row]));
  for (const id of ids) {
    const job = jobs.get(id);
    if (job?.live === true) continue;
    if (job?.failed === true) await giveUp(key, id);
    else await inTransaction((tx) => enqueue(queue, { [key]: id }, { client: tx.client }));
  }
}

async function giveUp(key: "scanId" | "printPictureId", id: string): Promise<void> {
  const values = { proofState: "failed", proofFailure: GIVEN_UP } as const;
  if (key === "scanId") {
    await db
      .update(scans)
      .set(values)
      .where(and(eq(scans.id, id), unfinished(scans.proofState)));
  } else {
    await db
      .update(printPictures)
      .set(values)
      .where(and(eq(printPictures.id, id), unfinished(printPictures.proofState)));
  }
}

/** Makes the pictures public whose release has come, and takes back those that may no longer be seen. */
export async function keepReleases(): Promise<void> {
  for (const printId of await printsOutOfLine()) await publishProofs(printId);
}
