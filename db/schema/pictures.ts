import { sql } from "drizzle-orm";
import {
  bigint,
  boolean,
  check,
  date,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  text,
  unique,
  uniqueIndex,
  uuid,
} from "drizzle-orm/pg-core";
import { id, instant, recordedAt } from "./columns";
import { accounts } from "./people";

export const datePrecision = pgEnum("date_precision", ["unknown", "year", "month", "day", "instant"]);
export const scanState = pgEnum("scan_state", ["expected", "checking", "ready", "refused"]);
export const proofState = pgEnum("proof_state", ["waiting", "working", "ready", "failed"]);
export const proofFormat = pgEnum("proof_format", ["avif", "webp", "jpeg"]);
export const printState = pgEnum("print_state", ["draft", "published", "withdrawn"]);

/** How a frame was exposed, as noted by the photographer. Times in seconds, aperture as f-number. */
export type ExposureJson = {
  aperture?: number;
  timeSeconds?: number;
  meteredSeconds?: number;
  filter?: string;
  lens?: string;
  light?: string;
  place?: string;
};

/** A crop in millionths of the upright scan's width and height; the scan itself is never touched. */
export type CropJson = { x: number; y: number; width: number; height: number };

export const rolls = pgTable("rolls", {
  id: id(),
  number: integer().notNull().unique(),
  filmFormat: text().notNull(),
  camera: text().notNull().default(""),
  film: text().notNull().default(""),
  exposedOn: date({ mode: "string" }),
  exposedPrecision: datePrecision().notNull().default("unknown"),
  notes: text().notNull().default(""),
  createdAt: recordedAt(),
  createdBy: uuid().references(() => accounts.id),
});

/** One exposure of a roll: the picture. Two crops of it are two prints of one picture. */
export const frames = pgTable(
  "frames",
  {
    id: id(),
    rollId: uuid()
      .notNull()
      .references(() => rolls.id),
    position: integer().notNull(),
    label: text().notNull(),
    exposure: jsonb().$type<ExposureJson>().notNull().default({}),
    note: text().notNull().default(""),
    chosen: boolean().notNull().default(false),
    createdAt: recordedAt(),
  },
  (t) => [
    unique("frame_position").on(t.rollId, t.position),
    check("frame_position_positive", sql`${t.position} >= 1`),
  ],
);

/** The full-resolution file of a frame, in versions; never public. */
export const scans = pgTable(
  "scans",
  {
    id: id(),
    frameId: uuid()
      .notNull()
      .references(() => frames.id),
    version: integer().notNull(),
    state: scanState().notNull().default("expected"),
    refusedReason: text(),
    fileName: text().notNull(),
    objectKey: text().notNull().unique(),
    declaredBytes: bigint({ mode: "number" }).notNull(),
    bytes: bigint({ mode: "number" }),
    sha256: text(),
    mediaType: text(),
    width: integer(),
    height: integer(),
    bitDepth: integer(),
    channels: integer(),
    colourSpace: text(),
    pixelsPerInch: integer(),
    proofState: proofState().notNull().default("waiting"),
    proofFailure: text(),
    createdAt: recordedAt(),
    uploadedAt: instant(),
    checkedAt: instant(),
  },
  (t) => [
    unique("scan_version").on(t.frameId, t.version),
    check("scan_refusal_has_reason", sql`(${t.state} = 'refused') = (${t.refusedReason} is not null)`),
    check(
      "scan_ready_is_known",
      sql`${t.state} <> 'ready' or (${t.sha256} is not null and ${t.width} > 0 and ${t.height} > 0 and ${t.bytes} > 0)`,
    ),
  ],
);

export const series = pgTable("series", {
  id: id(),
  slug: text().notNull().unique(),
  title: text().notNull(),
  statement: text().notNull().default(""),
  position: integer().notNull().default(0),
  createdAt: recordedAt(),
});

/** A finished work: usually one picture; a portfolio is a print of several, sold as one. */
export const prints = pgTable(
  "prints",
  {
    id: id(),
    slug: text().notNull().unique(),
    title: text().notNull(),
    /** The year of exposure; the year a sheet was printed belongs to the sheet. */
    year: integer(),
    seriesId: uuid().references(() => series.id),
    statement: text().notNull().default(""),
    state: printState().notNull().default("draft"),
    /** Whether the picture may be seen before the first of its editions is released. */
    shownBeforeRelease: boolean().notNull().default(false),
    /** Set when the proofs lie under public names; cleared when they have been taken back. */
    proofsPublicAt: instant(),
    position: integer().notNull().default(0),
    publishedAt: instant(),
    withdrawnAt: instant(),
    createdAt: recordedAt(),
  },
  (t) => [
    check("print_slug", sql`${t.slug} ~ '^[a-z0-9]+(-[a-z0-9]+)*$'`),
    check("print_year", sql`${t.year} is null or ${t.year} between 1826 and 2200`),
    index("prints_series").on(t.seriesId),
  ],
);

/** Which picture, which version of its scan and which crop a print rests on. */
export const printPictures = pgTable(
  "print_pictures",
  {
    id: id(),
    printId: uuid()
      .notNull()
      .references(() => prints.id),
    position: integer().notNull(),
    frameId: uuid()
      .notNull()
      .references(() => frames.id),
    scanId: uuid()
      .notNull()
      .references(() => scans.id),
    crop: jsonb().$type<CropJson>().notNull().default({ x: 0, y: 0, width: 1_000_000, height: 1_000_000 }),
    /** What is to be seen, for those who cannot see it. */
    description: text().notNull().default(""),
    proofState: proofState().notNull().default("waiting"),
    proofFailure: text(),
  },
  (t) => [
    unique("print_picture_position").on(t.printId, t.position),
    unique("print_picture_frame").on(t.printId, t.frameId),
    index("print_pictures_frame").on(t.frameId),
  ],
);

/**
 * A smaller picture built from a scan. With `print_picture_id` it is that print's crop and may be made
 * public; without, it is the whole frame for the contact sheet and never leaves the private bucket.
 */
export const proofs = pgTable(
  "proofs",
  {
    id: id(),
    scanId: uuid()
      .notNull()
      .references(() => scans.id),
    printPictureId: uuid().references(() => printPictures.id, { onDelete: "cascade" }),
    format: proofFormat().notNull(),
    width: integer().notNull(),
    height: integer().notNull(),
    bytes: integer().notNull(),
    sha256: text().notNull(),
    /** Content-hashed name, the same in the private and the public bucket. */
    objectKey: text().notNull(),
    createdAt: recordedAt(),
  },
  (t) => [
    uniqueIndex("proof_of_print")
      .on(t.printPictureId, t.format, t.width)
      .where(sql`${t.printPictureId} is not null`),
    uniqueIndex("proof_of_scan").on(t.scanId, t.format, t.width).where(sql`${t.printPictureId} is null`),
  ],
);
