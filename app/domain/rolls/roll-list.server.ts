import { db } from "db/client.server";
import { frames, rolls } from "db/schema/schema";
import { asc, desc, max } from "drizzle-orm";
import type { PartialDate } from "~/domain/dates";
import { filmFormat } from "~/domain/imaging/film";
import { type FrameProof, frameProofs, scansOfFrames, shownScan } from "./frame-pictures.server";
import { exposedDate } from "./roll-form";
import { frameStanding } from "./scan-words";

export type RollLine = {
  id: string;
  number: number;
  format: string;
  camera: string;
  film: string;
  exposed: PartialDate;
  frames: number;
  chosen: number;
  /** Frames of which somebody has to look at the scan. */
  needsLook: number;
  /** Frames the worker is still at. */
  pending: number;
  /** Of the first chosen frame, or the first of all. */
  proofs: FrameProof[];
  size: { width: number; height: number } | null;
};

/** All rolls, the latest number first. */
export async function rollList(): Promise<RollLine[]> {
  const all = await db.select().from(rolls).orderBy(desc(rolls.number));
  const everyFrame = await db.select().from(frames).orderBy(asc(frames.position));
  const versions = await scansOfFrames(everyFrame.map((frame) => frame.id));
  const framesOf = new Map<string, typeof everyFrame>();
  for (const frame of everyFrame) framesOf.set(frame.rollId, [...(framesOf.get(frame.rollId) ?? []), frame]);
  const pictured = new Map(
    all.map((roll) => {
      const own = framesOf.get(roll.id) ?? [];
      const inOrder = [...own.filter((frame) => frame.chosen), ...own];
      const shown = inOrder
        .map((frame) => shownScan(versions.get(frame.id) ?? []))
        .find((scan) => scan !== null);
      return [roll.id, shown ?? null] as const;
    }),
  );
  const proofs = await frameProofs([...pictured.values()].flatMap((scan) => scan?.id ?? []));
  return all.map((roll) => {
    const own = framesOf.get(roll.id) ?? [];
    const standings = own.map((frame) => frameStanding(versions.get(frame.id)?.[0] ?? null));
    const picture = pictured.get(roll.id) ?? null;
    return {
      id: roll.id,
      number: roll.number,
      format: filmFormat(roll.filmFormat)?.name ?? roll.filmFormat,
      camera: roll.camera,
      film: roll.film,
      exposed: exposedDate(roll),
      frames: own.length,
      chosen: own.filter((frame) => frame.chosen).length,
      needsLook: standings.filter((standing) => standing.needsLook).length,
      pending: standings.filter((standing) => standing.pending).length,
      proofs: picture === null ? [] : (proofs.get(picture.id) ?? []),
      size: picture?.width && picture.height ? { width: picture.width, height: picture.height } : null,
    };
  });
}

/** The number a new roll would get. */
export async function nextRollNumber(): Promise<number> {
  const [row] = await db.select({ last: max(rolls.number) }).from(rolls);
  return (row?.last ?? 0) + 1;
}

/** What the latest roll was made with, to begin the next one's form with. */
export async function usualRoll(): Promise<{ filmFormat: string; camera: string; film: string }> {
  const [last] = await db
    .select({ filmFormat: rolls.filmFormat, camera: rolls.camera, film: rolls.film })
    .from(rolls)
    .orderBy(desc(rolls.number))
    .limit(1);
  return last ?? { filmFormat: "120-6x6", camera: "", film: "" };
}
