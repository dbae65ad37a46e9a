import type { Tx } from "db/client.server";
import {
  copies,
  editions,
  type LedgerPrivateJson,
  ledgerEntries,
  ledgerPrivate,
  printPictures,
  sheets,
} from "db/schema/schema";
import { and, desc, eq, inArray, lt, sql } from "drizzle-orm";
import { now } from "~/platform/clock";
import { AppError } from "~/platform/errors";
import { newId, randomSecret, sha256 } from "~/platform/ids.server";
import { canonicalJson, type LedgerJson } from "./canonical-json";
import { isForSale, numberMark, type Run } from "./numbering";
import {
  allowedCopyTransition,
  allowedSheetTransition,
  type CopyContext,
  type CopyEntryKind,
  isLive,
  type LedgerEntryKind,
  type RefusalCode,
  type SheetEntryKind,
  type SheetMaking,
} from "./transitions";

/** Who acted, as the public part of an entry says it: a role or the shop itself, never a name. */
export type Actor = {
  as: "shop" | "photographer" | "assistant" | "stockist" | "collector";
  accountId?: string;
};

/** The shop acting by itself, on a payment or a release. */
export const THE_SHOP: Actor = { as: "shop" };

/** When something happened, and how precisely that is known. */
export type Happened =
  | { precision: "unknown" }
  | { precision: "year" | "month" | "day" | "instant"; at: Date };

declare const locked: unique symbol;

/** An edition whose row this transaction has locked; nothing is written to its ledger without that. */
export type LockedEdition = typeof editions.$inferSelect & { readonly [locked]: true };

/**
 * Locks editions in the order of their ids, so that two transactions over the same editions never wait for
 * each other in a circle. Every change of a copy begins here.
 */
export async function lockEditions(tx: Tx, ids: readonly string[]): Promise<Map<string, LockedEdition>> {
  if (ids.length === 0) return new Map();
  const rows = await tx.db
    .select()
    .from(editions)
    .where(inArray(editions.id, [...new Set(ids)]))
    .orderBy(editions.id)
    .for("update");
  return new Map(rows.map((row) => [row.id, row as LockedEdition]));
}

/** Locks one edition. Throws AppError `not_found`. */
export async function lockEdition(tx: Tx, id: string): Promise<LockedEdition> {
  const edition = (await lockEditions(tx, [id])).get(id);
  if (edition === undefined) throw new AppError("not_found", `no edition ${id}`);
  return edition;
}

type Entry<K extends LedgerEntryKind> = {
  kind: K;
  /** The present instant unless said otherwise. */
  happened?: Happened;
  /** Public fields; no name, price or free text. */
  body?: Record<string, LedgerJson>;
  /** Party, price, free text: erasable, bound to the entry by a salted commitment. */
  secret?: LedgerPrivateJson;
  /** Id of the entry this one puts right. */
  corrects?: number;
};

type Subject = { copyId?: string; sheetId?: string; body: Record<string, LedgerJson> };

async function write(
  tx: Tx,
  edition: LockedEdition,
  actor: Actor,
  entry: Entry<LedgerEntryKind>,
  subject: Subject,
): Promise<number> {
  const recorded = now();
  const happened: Happened = entry.happened ?? { precision: "instant", at: recorded };
  const secret: LedgerPrivateJson = {
    ...entry.secret,
    ...(actor.accountId === undefined ? {} : { accountId: actor.accountId }),
  };
  const hasSecret = Object.keys(secret).length > 0;
  const salt = randomSecret(16);
  const [row] = await tx.db
    .insert(ledgerEntries)
    .values({
      editionId: edition.id,
      line: sql`1 + coalesce((select max(line) from ledger_entries where edition_id = ${edition.id}), 0)`,
      kind: entry.kind,
      copyId: subject.copyId ?? null,
      sheetId: subject.sheetId ?? null,
      actor: actor.as,
      happenedAt: happened.precision === "unknown" ? null : happened.at,
      happenedPrecision: happened.precision,
      recordedAt: recorded,
      body: canonicalJson({ ...subject.body, ...entry.body }),
      commitment: hasSecret ? sha256(salt + canonicalJson(secret)) : null,
      corrects: entry.corrects ?? null,
    })
    .returning({ id: ledgerEntries.id });
  if (row === undefined) throw new Error("the ledger entry was not written");
  if (hasSecret) await tx.db.insert(ledgerPrivate).values({ entryId: row.id, salt, body: secret });
  return row.id;
}

/** How many copies a run of an edition has: the denominator of its marks. */
export function runTotal(edition: typeof editions.$inferSelect, run: Run): number {
  return {
    numbered: edition.limit,
    ap: edition.artistsProofs,
    pp: edition.printersProofs,
    hc: edition.horsCommerce,
    bat: edition.bonATirer,
    exhibition: edition.exhibitionCopies,
  }[run];
}

/** Entries that are written once for an edition as a whole, not for each of its copies. */
export type EditionEntryKind = "opened" | "limit_lowered" | "prices_changed" | "closed_early" | "corrected";

/** Writes an entry about the edition as a whole. Returns the entry's id. */
export function writeEditionEntry(
  tx: Tx,
  edition: LockedEdition,
  actor: Actor,
  entry: Entry<EditionEntryKind>,
): Promise<number> {
  return write(tx, edition, actor, entry, { body: {} });
}

/** A transition the book does not allow. `code` is for machines, the message for people. */
export class RefusedTransition extends Error {
  readonly code: RefusalCode;
  constructor(code: RefusalCode, sentence: string) {
    super(sentence);
    this.name = "RefusedTransition";
    this.code = code;
  }
}

export type CopyMove = Entry<CopyEntryKind> & {
  copyId: string;
  formatId?: string;
  orderLineId?: string | null;
  ownerPartyId?: string | null;
  /** What the transition table needs to know beyond the placement. */
  context?: CopyContext;
};

/**
 * Moves a copy to where the entry's kind leads, and writes the entry: placement and ledger change together or
 * not at all. Throws RefusedTransition where the table does not allow it.
 */
export async function moveCopy(
  tx: Tx,
  edition: LockedEdition,
  actor: Actor,
  move: CopyMove,
): Promise<number> {
  const [copy] = await tx.db
    .select()
    .from(copies)
    .where(and(eq(copies.id, move.copyId), eq(copies.editionId, edition.id)))
    .for("update");
  if (copy === undefined) throw new Error(`no copy ${move.copyId} in edition ${edition.id}`);
  const transition = allowedCopyTransition(move.kind, copy.placement, {
    ...move.context,
    forSale: isForSale(copy.run),
    issued: edition.firstIssuedAt !== null,
  });
  if ("refused" in transition) throw new RefusedTransition(transition.refused, transition.sentence);
  await tx.db
    .update(copies)
    .set({
      placement: transition.to,
      ...(move.formatId === undefined ? {} : { formatId: move.formatId }),
      ...(move.orderLineId === undefined ? {} : { orderLineId: move.orderLineId }),
      ...(move.ownerPartyId === undefined ? {} : { ownerPartyId: move.ownerPartyId }),
    })
    .where(eq(copies.id, copy.id));
  return write(tx, edition, actor, move, {
    copyId: copy.id,
    body: { run: copy.run, number: copy.number, of: runTotal(edition, copy.run) },
  });
}

export type SheetMove = Entry<Exclude<SheetEntryKind, "printed_again">> & { sheetId: string };

/**
 * Moves a sheet to the making its entry leads to, and writes the entry. Printing a sheet whose forerunner was
 * spoiled or destroyed is written as "printed_again". Throws RefusedTransition.
 */
export async function moveSheet(
  tx: Tx,
  edition: LockedEdition,
  actor: Actor,
  move: SheetMove,
): Promise<number> {
  const [row] = await tx.db
    .select({ sheet: sheets, copy: copies })
    .from(sheets)
    .innerJoin(copies, eq(copies.id, sheets.copyId))
    .where(and(eq(sheets.id, move.sheetId), eq(copies.editionId, edition.id)))
    .for("update", { of: sheets });
  if (row === undefined) throw new Error(`no sheet ${move.sheetId} in edition ${edition.id}`);
  const { sheet, copy } = row;
  const previous = await makingBefore(tx, sheet);
  const kind = move.kind === "printed" && previous !== null ? "printed_again" : move.kind;
  const reason = move.secret?.reason;
  const transition = allowedSheetTransition(kind, sheet.making, {
    previous,
    ...(reason === undefined ? {} : { reason }),
  });
  if ("refused" in transition) throw new RefusedTransition(transition.refused, transition.sentence);
  await tx.db.update(sheets).set({ making: transition.to }).where(eq(sheets.id, sheet.id));
  return write(
    tx,
    edition,
    actor,
    { ...move, kind },
    {
      copyId: copy.id,
      sheetId: sheet.id,
      body: { run: copy.run, number: copy.number, of: runTotal(edition, copy.run), sheet: sheet.serial },
    },
  );
}

/** What became of the sheet of the same copy and picture before this one; null when this is the first. */
async function makingBefore(tx: Tx, sheet: typeof sheets.$inferSelect): Promise<SheetMaking | null> {
  const [previous] = await tx.db
    .select({ making: sheets.making })
    .from(sheets)
    .where(
      and(
        eq(sheets.copyId, sheet.copyId),
        eq(sheets.printPictureId, sheet.printPictureId),
        lt(sheets.serial, sheet.serial),
      ),
    )
    .orderBy(desc(sheets.serial))
    .limit(1);
  return previous?.making ?? null;
}

/**
 * Sees to it that a copy has a live sheet for each picture of its print, to be printed: for a copy just sold, or
 * one whose sheet was spoiled. No ledger line: nothing has happened to paper yet. Returns the new sheets' ids.
 */
export async function oweSheets(tx: Tx, edition: LockedEdition, copyId: string): Promise<string[]> {
  const pictures = await tx.db
    .select({ id: printPictures.id })
    .from(printPictures)
    .where(eq(printPictures.printId, edition.printId))
    .orderBy(printPictures.position);
  const there = await tx.db.select().from(sheets).where(eq(sheets.copyId, copyId));
  const made: string[] = [];
  for (const picture of pictures) {
    const own = there.filter((s) => s.printPictureId === picture.id);
    if (own.some((s) => isLive(s.making))) continue;
    const id = newId();
    const serial = 1 + own.reduce((most, s) => Math.max(most, s.serial), 0);
    await tx.db.insert(sheets).values({ id, copyId, printPictureId: picture.id, serial, createdAt: now() });
    made.push(id);
  }
  return made;
}

/** The mark of a copy of an edition: "7/25", "AP 2/3". */
export function markOf(edition: typeof editions.$inferSelect, copy: { run: Run; number: number }): string {
  return numberMark({ run: copy.run, number: copy.number, total: runTotal(edition, copy.run) });
}
