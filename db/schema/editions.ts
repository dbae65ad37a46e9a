import { sql } from "drizzle-orm";
import {
  type AnyPgColumn,
  bigint,
  check,
  foreignKey,
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
import { orderLines } from "./orders";
import { accounts, parties } from "./people";
import { datePrecision, printPictures, prints } from "./pictures";
import { papers } from "./studio";

export const editionState = pgEnum("edition_state", ["draft", "open", "closed"]);
export const run = pgEnum("run", ["numbered", "ap", "pp", "hc", "bat", "exhibition"]);
export const placement = pgEnum("placement", [
  "in_hand",
  "held",
  "set_aside",
  "sold",
  "coming_back",
  "given",
  "kept",
  "consigned",
  "retired",
]);
export const making = pgEnum("making", [
  "to_print",
  "printed",
  "signed",
  "packed",
  "dispatched",
  "delivered",
  "spoiled",
  "lost",
  "returned",
  "destroyed",
]);
export const numberOrder = pgEnum("number_order", ["lowest_free", "buyer_may_ask"]);
export const returnedNumber = pgEnum("returned_number", ["in_hand", "retired"]);
export const returnedPrice = pgEnum("returned_price", ["own", "next"]);

/** A numbered run of a print with one limit, offered in one or more formats. */
export const editions = pgTable(
  "editions",
  {
    id: id(),
    printId: uuid()
      .notNull()
      .references(() => prints.id),
    state: editionState().notNull().default("draft"),
    /** The denominator. */
    limit: integer("limit").notNull(),
    artistsProofs: integer().notNull().default(0),
    printersProofs: integer().notNull().default(0),
    horsCommerce: integer().notNull().default(0),
    bonATirer: integer().notNull().default(0),
    exhibitionCopies: integer().notNull().default(0),
    numberOrder: numberOrder().notNull().default("lowest_free"),
    returnedNumber: returnedNumber().notNull().default("in_hand"),
    returnedPrice: returnedPrice().notNull().default("own"),
    /** One sentence about further editions of the picture, shown to buyers and on the certificate. */
    furtherEditions: text().notNull().default(""),
    releaseAt: instant(),
    openedAt: instant(),
    closedAt: instant(),
    /** When the first number was issued; from then on the database refuses any change of the limit. */
    firstIssuedAt: instant(),
    position: integer().notNull().default(0),
    createdAt: recordedAt(),
  },
  (t) => [
    check("edition_limit", sql`${t.limit} between 1 and 10000`),
    check(
      "edition_proofs",
      sql`least(${t.artistsProofs}, ${t.printersProofs}, ${t.horsCommerce}, ${t.bonATirer}, ${t.exhibitionCopies}) >= 0`,
    ),
    check("edition_bat_is_one", sql`${t.bonATirer} <= 1`),
    check(
      "edition_open_is_dated",
      sql`${t.state} = 'draft' or (${t.openedAt} is not null and ${t.releaseAt} is not null)`,
    ),
    check("edition_closed_is_dated", sql`(${t.state} = 'closed') = (${t.closedAt} is not null)`),
    index("editions_print").on(t.printId),
  ],
);

/** Paper, process and sizes (mm) in which an edition's copies are offered. */
export const formats = pgTable(
  "formats",
  {
    id: id(),
    editionId: uuid()
      .notNull()
      .references(() => editions.id),
    position: integer().notNull().default(0),
    paperId: uuid()
      .notNull()
      .references(() => papers.id),
    process: text().notNull(),
    imageWidthMm: integer().notNull(),
    imageHeightMm: integer().notNull(),
    sheetWidthMm: integer().notNull(),
    sheetHeightMm: integer().notNull(),
  },
  (t) => [
    unique("format_position").on(t.editionId, t.position),
    unique("format_of_edition").on(t.id, t.editionId),
    check("format_image_positive", sql`${t.imageWidthMm} > 0 and ${t.imageHeightMm} > 0`),
    check(
      "format_image_on_sheet",
      sql`${t.imageWidthMm} <= ${t.sheetWidthMm} and ${t.imageHeightMm} <= ${t.sheetHeightMm}`,
    ),
  ],
);

/** Price of a block of numbers of a format, home tax included; dated, never overwritten. */
export const priceSteps = pgTable(
  "price_steps",
  {
    id: id(),
    formatId: uuid()
      .notNull()
      .references(() => formats.id),
    fromNumber: integer().notNull(),
    toNumber: integer().notNull(),
    amount: bigint({ mode: "number" }).notNull(),
    currency: text().notNull(),
    validFrom: recordedAt(),
    supersededAt: instant(),
  },
  (t) => [
    check("price_step_order", sql`${t.fromNumber} between 1 and ${t.toNumber}`),
    check("price_step_positive", sql`${t.amount} > 0`),
    check("price_step_currency", sql`${t.currency} ~ '^[A-Z]{3}$'`),
    index("price_steps_format").on(t.formatId),
  ],
);

/** One number of an edition: 7/25, AP 2/3. `placement` is the projection of the ledger and of live holds. */
export const copies = pgTable(
  "copies",
  {
    id: id(),
    editionId: uuid()
      .notNull()
      .references(() => editions.id),
    run: run().notNull(),
    number: integer().notNull(),
    placement: placement().notNull().default("in_hand"),
    /** Taken when the copy is held, sold, given or printed. */
    formatId: uuid(),
    /** The order line that holds or has bought this copy. */
    orderLineId: uuid().references((): AnyPgColumn => orderLines.id),
    ownerPartyId: uuid().references(() => parties.id),
    /** Public code by which anyone holding the print can look it up; made when the copy is sold or given. */
    checkCode: text().unique(),
  },
  (t) => [
    unique("copy_number").on(t.editionId, t.run, t.number),
    unique("copy_of_edition").on(t.id, t.editionId),
    foreignKey({
      name: "copy_format",
      columns: [t.formatId, t.editionId],
      foreignColumns: [formats.id, formats.editionId],
    }),
    check("copy_number_positive", sql`${t.number} >= 1`),
    check(
      "copy_held_by_line",
      sql`${t.placement} not in ('held') or (${t.orderLineId} is not null and ${t.formatId} is not null)`,
    ),
    check("copy_in_hand_is_free", sql`${t.placement} <> 'in_hand' or ${t.orderLineId} is null`),
    uniqueIndex("copy_of_line").on(t.orderLineId).where(sql`${t.placement} in ('held', 'sold')`),
    index("copies_edition_placement").on(t.editionId, t.placement),
  ],
);

/** One physical impression of a copy: a copy has many over time, and at most one live for each picture. */
export const sheets = pgTable(
  "sheets",
  {
    id: id(),
    copyId: uuid()
      .notNull()
      .references(() => copies.id),
    printPictureId: uuid()
      .notNull()
      .references(() => printPictures.id),
    serial: integer().notNull(),
    making: making().notNull().default("to_print"),
    createdAt: recordedAt(),
  },
  (t) => [
    unique("sheet_serial").on(t.copyId, t.printPictureId, t.serial),
    // A lost sheet still blocks another: its number is not printed again unless it comes back.
    uniqueIndex("sheet_live")
      .on(t.copyId, t.printPictureId)
      .where(sql`${t.making} not in ('spoiled', 'destroyed')`),
    index("sheets_making").on(t.making),
  ],
);

/** A copy set aside for one checkout until a stated time. Not a ledger line. */
export const holds = pgTable(
  "holds",
  {
    id: id(),
    copyId: uuid()
      .notNull()
      .references(() => copies.id),
    orderLineId: uuid()
      .notNull()
      .references((): AnyPgColumn => orderLines.id),
    heldAt: recordedAt(),
    until: instant().notNull(),
    endedAt: instant(),
    endedAs: text({ enum: ["sold", "freed"] }),
  },
  (t) => [
    uniqueIndex("hold_live_copy").on(t.copyId).where(sql`${t.endedAt} is null`),
    uniqueIndex("hold_live_line").on(t.orderLineId).where(sql`${t.endedAt} is null`),
    check("hold_end", sql`(${t.endedAt} is null) = (${t.endedAs} is null)`),
  ],
);

/**
 * The append-only record. The application's role may only insert and read.
 * `line` counts the entries of one edition from 1, without gaps. `body` holds the public fields as canonical
 * JSON; what is private lies in `ledger_private` and is bound to the entry by `commitment`.
 */
export const ledgerEntries = pgTable(
  "ledger_entries",
  {
    id: bigint({ mode: "number" }).primaryKey().generatedAlwaysAsIdentity(),
    editionId: uuid()
      .notNull()
      .references(() => editions.id),
    line: integer().notNull(),
    kind: text().notNull(),
    copyId: uuid(),
    sheetId: uuid().references(() => sheets.id),
    /** "photographer", "assistant", "shop", ... : who acted, without a name. */
    actor: text().notNull(),
    happenedAt: instant(),
    happenedPrecision: datePrecision().notNull(),
    recordedAt: recordedAt(),
    body: text().notNull(),
    /** SHA-256 (hex) over salt and canonical private part; null where nothing is private. */
    commitment: text(),
    corrects: bigint({ mode: "number" }).references((): AnyPgColumn => ledgerEntries.id),
  },
  (t) => [
    unique("ledger_line").on(t.editionId, t.line),
    foreignKey({
      name: "ledger_copy",
      columns: [t.copyId, t.editionId],
      foreignColumns: [copies.id, copies.editionId],
    }),
    check("ledger_when", sql`(${t.happenedPrecision} = 'unknown') = (${t.happenedAt} is null)`),
    index("ledger_copy_entries").on(t.copyId),
    index("ledger_recorded").on(t.recordedAt),
  ],
);

/** The erasable half of an entry: party, price, free text, and the salt of its commitment. */
export type LedgerPrivateJson = {
  partyId?: string;
  partyName?: string;
  orderId?: string;
  orderNumber?: number;
  amount?: number;
  currency?: string;
  reason?: string;
  accountId?: string;
  reference?: string;
};

export const ledgerPrivate = pgTable("ledger_private", {
  entryId: bigint({ mode: "number" })
    .primaryKey()
    .references(() => ledgerEntries.id),
  salt: text(),
  body: jsonb().$type<LedgerPrivateJson>(),
  erasedAt: instant(),
});

/** Another number offered to a buyer whose payment came for one that had gone. */
export const numberOffers = pgTable(
  "number_offers",
  {
    id: id(),
    orderLineId: uuid()
      .notNull()
      .references((): AnyPgColumn => orderLines.id),
    copyId: uuid()
      .notNull()
      .references(() => copies.id),
    offeredAt: recordedAt(),
    until: instant().notNull(),
    decidedAt: instant(),
    decision: text({ enum: ["accepted", "declined", "lapsed"] }),
    decidedBy: uuid().references(() => accounts.id),
  },
  (t) => [uniqueIndex("offer_live_line").on(t.orderLineId).where(sql`${t.decidedAt} is null`)],
);
