import { inTransaction, type Tx } from "db/client.server";
import { frames, rolls, scans } from "db/schema/schema";
import { asc, eq } from "drizzle-orm";
import { refusals } from "~/domain/imaging/refusals";
import { type Actor, mustBeAllowed } from "~/domain/people/allowed";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId } from "~/platform/ids.server";
import { inFileOrder } from "./file-order";
import type { BegunScan } from "./uploading";

export type AnnouncedFile = { name: string; size: number };

type Begin = {
  rollId: string;
  /** The frame of which the one file is another version; otherwise each file is a frame of its own. */
  frameId?: string | undefined;
  files: readonly AnnouncedFile[];
};

type Known = {
  frameId: string;
  scanId: string;
  version: number;
  state: string;
  fileName: string;
  size: number;
};

/**
 * Makes room for files that are about to be sent: frames in the order of the file names, scans that are expected.
 * A file that was announced before and never arrived, or was refused, takes its old frame again, so that choosing the
 * same files once more goes on where it stopped. Answers in the order of `files`.
 *
 * Throws AppError `not_allowed`, `not_found` (roll or frame), `bad_request` (several versions at once).
 */
export async function beginUploads(actor: Actor, { rollId, frameId, files }: Begin): Promise<BegunScan[]> {
  mustBeAllowed(actor, "rolls.change");
  if (frameId !== undefined && files.length !== 1) throw new AppError("bad_request", "one version at a time");
  return inTransaction(async (tx) => {
    const [roll] = await tx.db.select({ id: rolls.id }).from(rolls).where(eq(rolls.id, rollId)).for("update");
    if (roll === undefined) throw new AppError("not_found");
    const begun = new Map<AnnouncedFile, BegunScan>();
    const latest = await latestScans(tx, rollId);
    let places = await nextPlaces(tx, rollId);

    for (const file of inFileOrder(files)) {
      const taken = new Set([...begun.values()].map((scan) => scan.frameId));
      const found =
        frameId === undefined ? resumable(latest, file, taken) : await ofFrame(tx, rollId, frameId, latest);
      if (found !== null && found.state === "expected" && isSame(found, file)) {
        begun.set(file, { scanId: found.scanId, frameId: found.frameId, refused: null });
        continue;
      }
      let target = found?.frameId;
      if (target === undefined) {
        target = newId();
        await tx.db
          .insert(frames)
          .values({ id: target, rollId, position: places.position, label: String(places.label) });
        places = { position: places.position + 1, label: places.label + 1 };
      }
      begun.set(file, await expectScan(tx, target, (found?.version ?? 0) + 1, file));
    }
    return files.map((file) => {
      const scan = begun.get(file);
      if (scan === undefined) throw new Error("a file was announced but not answered");
      return scan;
    });
  });
}

async function expectScan(tx: Tx, frameId: string, version: number, file: AnnouncedFile): Promise<BegunScan> {
  const scanId = newId();
  const refused = file.size === 0 ? refusals.empty() : null;
  await tx.db.insert(scans).values({
    id: scanId,
    frameId,
    version,
    state: refused === null ? "expected" : "refused",
    refusedReason: refused,
    fileName: file.name,
    objectKey: `scans/${scanId}`,
    declaredBytes: file.size,
    ...(refused === null ? {} : { checkedAt: now() }),
  });
  return { scanId, frameId, refused };
}

const isSame = (known: Known, file: AnnouncedFile) =>
  known.fileName === file.name && known.size === file.size;

/** The frame whose file this is: announced but not arrived, or refused and now sent again under the same name. */
function resumable(latest: readonly Known[], file: AnnouncedFile, taken: ReadonlySet<string>): Known | null {
  const open = latest.filter((known) => !taken.has(known.frameId));
  return (
    open.find((known) => known.state === "expected" && isSame(known, file)) ??
    open.find((known) => known.state === "refused" && known.fileName === file.name) ??
    null
  );
}

async function ofFrame(tx: Tx, rollId: string, frameId: string, latest: readonly Known[]): Promise<Known> {
  const known = latest.find((scan) => scan.frameId === frameId);
  if (known !== undefined) return known;
  const [frame] = await tx.db.select().from(frames).where(eq(frames.id, frameId));
  if (frame?.rollId !== rollId) throw new AppError("not_found");
  return { frameId, scanId: "", version: 0, state: "none", fileName: "", size: -1 };
}

/** The newest scan of every frame of the roll, in their order. */
async function latestScans(tx: Tx, rollId: string): Promise<Known[]> {
  const rows = await tx.db
    .select({
      frameId: scans.frameId,
      scanId: scans.id,
      version: scans.version,
      state: scans.state,
      fileName: scans.fileName,
      size: scans.declaredBytes,
    })
    .from(scans)
    .innerJoin(frames, eq(frames.id, scans.frameId))
    .where(eq(frames.rollId, rollId))
    .orderBy(asc(frames.position), asc(scans.version));
  return [...new Map(rows.map((row) => [row.frameId, row])).values()];
}

/** Where the next frame goes, and the number it gets: past every number that is on the roll already. */
async function nextPlaces(tx: Tx, rollId: string): Promise<{ position: number; label: number }> {
  const rows = await tx.db
    .select({ position: frames.position, label: frames.label })
    .from(frames)
    .where(eq(frames.rollId, rollId));
  const numbers = rows.map((row) => (/^\d{1,6}$/.test(row.label) ? Number(row.label) : 0));
  return {
    position: 1 + Math.max(0, ...rows.map((row) => row.position)),
    label: 1 + Math.max(0, ...numbers),
  };
}
