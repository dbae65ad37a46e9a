import { and, eq, inArray, sql } from "drizzle-orm";
import type { Tx } from "db/client.server";
import { copies, editions, ledgerEntries, ledgerPrivate, sheets, type LedgerPrivateJson } from "db/schema/schema";
import { now } from "~/platform/clock";
import { newId, randomSecret, sha256 } from "~/platform/ids.server";
import { canonicalJson, type LedgerJson } from "./canonical-json";
import { numberMark, type Run } from "./numbering";
import {
  allowedCopyTransition,
  allowedSheetTransition,
  type CopyEntryKind,
  type EditionEntryKind,
  type LedgerEntryKind,
  type Making,
  type Placement,
  type SheetEntryKind,
} from "./transitions";

/** Who acted, as the public part of an entry says it: a role or the shop itself, never a name. */
export type Actor = { as: "shop" | "photographer" | "assistant" | "stockist" | "collector"; accountId?: string };

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

/** Locks one edition; throws when it does not exist. */
export async function lockEdition(tx: Tx, id: string): Promise<LockedEdition> {
  const edition = (await lockEditions(tx, [id])).get(id);
  if (edition === undefined) throw new Error(`no edition ${id}`);
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
  readonly code: string;
  constructor(code: string, sentence: string) {
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
};

/**
 * Moves a copy to where the entry's kind leads, and writes the entry: placement and ledger change together or
 * not at all. Throws RefusedTransition where the table does not allow it.
 */
export async function moveCopy(tx: Tx, edition: LockedEdition, actor: Actor, move: CopyMove): Promise<number> {
  const [copy] = await tx.db
    .select()
    .from(copies)
    .where(and(eq(copies.id, move.copyId), eq(copies.editionId, edition.id)))
    .for("update");
  if (copy === undefined) throw new Error(`no copy ${move.copyId} in edition ${edition.id}`);
  const transition = allowedCopyTransition(move.kind, copy.placement);
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

export type SheetMove = Entry<SheetEntryKind> & { sheetId: string };

/** Moves a sheet to the making its entry leads to, and writes the entry. Throws RefusedTransition. */
export async function moveSheet(tx: Tx, edition: LockedEdition, actor: Actor, move: SheetMove): Promise<number> {
  const [row] = await tx.db
    .select({ sheet: sheets, copy: copies })
    .from(sheets)
    .innerJoin(copies, eq(copies.id, sheets.copyId))
    .where(and(eq(sheets.id, move.sheetId), eq(copies.editionId, edition.id)))
    .for("update", { of: sheets });
  if (row === undefined) throw new Error(`no sheet ${move.sheetId} in edition ${edition.id}`);
  const transition = allowedSheetTransition(move.kind, row.sheet.making);
  if ("refused" in transition) throw new RefusedTransition(transition.refused, transition.sentence);
  await tx.db.update(sheets).set({ making: transition.to }).where(eq(sheets.id, row.sheet.id));
  return write(tx, edition, actor, move, {
    copyId: row.copy.id,
    sheetId: row.sheet.id,
    body: {
      run: row.copy.run,
      number: row.copy.number,
      of: runTotal(edition, row.copy.run),
      sheet: row.sheet.serial,
    },
  });
}

/**
 * Makes the next sheet of a copy for one picture, to be printed. The database refuses a second live one.
 * The first is no ledger line (nothing has happened to paper yet); a further one is "printed_again".
 */
export async function addSheet(
  tx: Tx,
  edition: LockedEdition,
  actor: Actor,
  sheet: { copyId: string; printPictureId: string },
): Promise<string> {
  const [last] = await tx.db
    .select({ serial: sql<number>`coalesce(max(${sheets.serial}), 0)` })
    .from(sheets)
    .where(and(eq(sheets.copyId, sheet.copyId), eq(sheets.printPictureId, sheet.printPictureId)));
  const serial = 1 + Number(last?.serial ?? 0);
  const id = newId();
  await tx.db.insert(sheets).values({ id, ...sheet, serial, createdAt: now() });
  if (serial > 1) {
    const [copy] = await tx.db.select().from(copies).where(eq(copies.id, sheet.copyId));
    if (copy === undefined) throw new Error(`no copy ${sheet.copyId}`);
    await write(tx, edition, actor, { kind: "printed_again" }, {
      copyId: copy.id,
      sheetId: id,
      body: { run: copy.run, number: copy.number, of: runTotal(edition, copy.run), sheet: serial },
    });
  }
  return id;
}

/** The mark of a copy of an edition: "7/25", "AP 2/3". */
export function markOf(edition: typeof editions.$inferSelect, copy: { run: Run; number: number }): string {
  return numberMark({ run: copy.run, number: copy.number, total: runTotal(edition, copy.run) });
}

export type { Making, Placement };
