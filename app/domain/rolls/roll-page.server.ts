import { db } from "db/client.server";
import { frames, printPictures, prints, rolls } from "db/schema/schema";
import { asc, eq } from "drizzle-orm";
import { filmFormat } from "~/domain/imaging/film";
import { theStudio } from "~/domain/studio/studio.server";
import { isUuid } from "~/platform/uuid";
import { formatSeconds } from "./exposure";
import { exposureLine } from "./frame-form";
import {
  type FrameProof,
  frameProofs,
  type ScanRow,
  sameFiles,
  scansOfFrames,
  shownScan,
} from "./frame-pictures.server";
import { exposedDate } from "./roll-form";
import { type FrameStanding, frameStanding } from "./scan-words";

export type RollFacts = {
  id: string;
  number: number;
  filmFormat: string;
  formatName: string;
  camera: string;
  film: string;
  exposed: ReturnType<typeof exposedDate>;
  notes: string;
  /** The studio's initials, as burnt into the film's edge: "S H". */
  initials: string;
};

/** One version of a frame's scan, as the studio shows it. */
export type ShownScan = {
  id: string;
  version: number;
  fileName: string;
  bytes: number;
  sha256: string | null;
  mediaType: string | null;
  width: number | null;
  height: number | null;
  bitDepth: number | null;
  channels: number | null;
  colourSpace: string | null;
  pixelsPerInch: number | null;
  standing: FrameStanding;
  /** Where the very same file lies already: "frame 3 of roll 12". */
  sameAs: string | null;
};

export type RollFrame = {
  id: string;
  position: number;
  label: string;
  chosen: boolean;
  note: string;
  exposure: string;
  metered: string;
  standing: FrameStanding;
  /** The newest version. */
  scan: ShownScan | null;
  proofs: FrameProof[];
};

export type RollPage = { roll: RollFacts; frames: RollFrame[] };

/** A roll with its frames in order; null where there is none. */
export async function rollPage(rollId: string): Promise<RollPage | null> {
  const roll = await rollFacts(rollId);
  if (roll === null) return null;
  const own = await db.select().from(frames).where(eq(frames.rollId, rollId)).orderBy(asc(frames.position));
  const versions = await scansOfFrames(own.map((frame) => frame.id));
  const newest = [...versions.values()].flatMap((list) => list[0] ?? []);
  const shown = new Map([...versions].map(([frameId, list]) => [frameId, shownScan(list)]));
  const [proofs, same] = await Promise.all([
    frameProofs([...shown.values()].flatMap((scan) => scan?.id ?? [])),
    sameFiles(newest),
  ]);
  return {
    roll,
    frames: own.map((frame) => {
      const scan = versions.get(frame.id)?.[0] ?? null;
      const { meteredSeconds } = frame.exposure;
      return {
        id: frame.id,
        position: frame.position,
        label: frame.label,
        chosen: frame.chosen,
        note: frame.note,
        exposure: exposureLine(frame.exposure),
        metered: meteredSeconds === undefined ? "" : `metered ${formatSeconds(meteredSeconds)}`,
        standing: frameStanding(scan),
        scan: scan === null ? null : showScan(scan, same),
        proofs: proofs.get(shown.get(frame.id)?.id ?? "") ?? [],
      };
    }),
  };
}

export type FramePage = {
  roll: RollFacts;
  frame: RollFrame & { fields: Record<string, string> };
  versions: ShownScan[];
  prints: { id: string; title: string; state: "draft" | "published" | "withdrawn" }[];
  earlier: { id: string; label: string } | null;
  later: { id: string; label: string } | null;
};

/** A frame with the versions of its scan and the prints made of it; null where the roll has none such. */
export async function framePage(rollId: string, frameId: string): Promise<FramePage | null> {
  const page = isUuid(frameId) ? await rollPage(rollId) : null;
  const at = page?.frames.findIndex((frame) => frame.id === frameId) ?? -1;
  const frame = page?.frames[at];
  if (page === null || frame === undefined) return null;
  const versions = (await scansOfFrames([frameId])).get(frameId) ?? [];
  const [same, made, [row]] = await Promise.all([
    sameFiles(versions),
    db
      .selectDistinct({ id: prints.id, title: prints.title, state: prints.state })
      .from(printPictures)
      .innerJoin(prints, eq(prints.id, printPictures.printId))
      .where(eq(printPictures.frameId, frameId))
      .orderBy(asc(prints.title)),
    db.select().from(frames).where(eq(frames.id, frameId)),
  ]);
  const neighbour = (index: number) => {
    const other = page.frames[index];
    return other === undefined ? null : { id: other.id, label: other.label };
  };
  const { exposure = {} } = row ?? {};
  const seconds = (value: number | undefined) => (value === undefined ? "" : formatSeconds(value));
  return {
    roll: page.roll,
    frame: {
      ...frame,
      fields: {
        label: frame.label,
        note: frame.note,
        aperture: exposure.aperture === undefined ? "" : `f/${exposure.aperture}`,
        time: seconds(exposure.timeSeconds),
        metered: seconds(exposure.meteredSeconds),
        lens: exposure.lens ?? "",
        filter: exposure.filter ?? "",
        light: exposure.light ?? "",
        place: exposure.place ?? "",
      },
    },
    versions: versions.map((scan) => showScan(scan, same)),
    prints: made,
    earlier: neighbour(at - 1),
    later: neighbour(at + 1),
  };
}

async function rollFacts(rollId: string): Promise<RollFacts | null> {
  if (!isUuid(rollId)) return null;
  const [roll] = await db.select().from(rolls).where(eq(rolls.id, rollId));
  if (roll === undefined) return null;
  const { photographer } = await theStudio();
  return {
    id: roll.id,
    number: roll.number,
    filmFormat: roll.filmFormat,
    formatName: filmFormat(roll.filmFormat)?.name ?? roll.filmFormat,
    camera: roll.camera,
    film: roll.film,
    exposed: exposedDate(roll),
    notes: roll.notes,
    initials: photographer
      .split(/\s+/)
      .flatMap((word) => word[0]?.toUpperCase() ?? [])
      .join(" "),
  };
}

function showScan(scan: ScanRow, same: ReadonlyMap<string, string>): ShownScan {
  return {
    id: scan.id,
    version: scan.version,
    fileName: scan.fileName,
    bytes: scan.bytes ?? scan.declaredBytes,
    sha256: scan.sha256,
    mediaType: scan.mediaType,
    width: scan.width,
    height: scan.height,
    bitDepth: scan.bitDepth,
    channels: scan.channels,
    colourSpace: scan.colourSpace,
    pixelsPerInch: scan.pixelsPerInch,
    standing: frameStanding(scan),
    sameAs: same.get(scan.id) ?? null,
  };
}
