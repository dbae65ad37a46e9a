/**
 * Where a copy can stand, what can happen to a sheet, and which ledger entry may follow which state: the one table.
 *
 * A hold is no ledger line: it is a promise with an end, kept beside the book. "held" therefore appears here only as
 * a place from which entries are allowed or refused; `mayBeHeld` says what a hold may be laid on.
 */

/** Where a copy stands. One place at a time. */
export const PLACEMENTS = [
  "in_hand",
  "held",
  "set_aside",
  "sold",
  "coming_back",
  "given",
  "kept",
  "consigned",
  "retired",
] as const;
export type CopyPlacement = (typeof PLACEMENTS)[number];

/** What has become of a sheet. */
export const MAKINGS = [
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
] as const;
export type SheetMaking = (typeof MAKINGS)[number];

/** Words for the studio's screens. */
export const PLACEMENT_WORDS: Record<CopyPlacement, string> = {
  in_hand: "in hand",
  held: "held",
  set_aside: "set aside",
  sold: "sold",
  coming_back: "coming back",
  given: "given",
  kept: "kept",
  consigned: "consigned",
  retired: "retired",
};

/** Words for the studio's screens. */
export const MAKING_WORDS: Record<SheetMaking, string> = {
  to_print: "to print",
  printed: "printed",
  signed: "signed",
  packed: "packed",
  dispatched: "dispatched",
  delivered: "delivered",
  spoiled: "spoiled",
  lost: "lost",
  returned: "returned",
  destroyed: "destroyed",
};

/** Entries that say something of a copy. */
export const COPY_ENTRY_KINDS = [
  "opened",
  "limit_lowered",
  "prices_changed",
  "closed_early",
  "sold",
  "sold_by_stockist",
  "refunded",
  "sale_cancelled",
  "coming_back",
  "inspected_back",
  "given",
  "kept",
  "no_longer_kept",
  "set_aside",
  "released_from_set_aside",
  "consigned",
  "brought_back",
  "retired",
  "passed_on",
  "certificate_issued",
  "certificate_voided",
  "certificate_replaced",
  "corrected",
] as const;
export type CopyEntryKind = (typeof COPY_ENTRY_KINDS)[number];

/** Entries that say something of an edition as a whole, and through it of its copies. */
export type EditionEntryKind = "opened" | "limit_lowered" | "prices_changed" | "closed_early";

/** Entries that say something of a sheet. */
export const SHEET_ENTRY_KINDS = [
  "printed",
  "printed_again",
  "signed",
  "packed",
  "unpacked",
  "dispatched",
  "delivered",
  "spoiled",
  "lost",
  "returned",
  "destroyed",
] as const;
export type SheetEntryKind = (typeof SHEET_ENTRY_KINDS)[number];

/** Everything the ledger can say. */
export type LedgerEntryKind = CopyEntryKind | SheetEntryKind;
export const LEDGER_ENTRY_KINDS: readonly LedgerEntryKind[] = [...COPY_ENTRY_KINDS, ...SHEET_ENTRY_KINDS];

/** What an entry says, for the studio's screens. */
export const ENTRY_WORDS: Record<LedgerEntryKind, string> = {
  opened: "edition opened",
  limit_lowered: "limit lowered",
  prices_changed: "prices changed",
  closed_early: "edition closed early",
  sold: "sold",
  sold_by_stockist: "sold by the stockist",
  refunded: "refunded",
  sale_cancelled: "sale cancelled",
  coming_back: "coming back",
  inspected_back: "back and looked over",
  given: "given",
  kept: "kept",
  no_longer_kept: "no longer kept",
  set_aside: "set aside",
  released_from_set_aside: "no longer set aside",
  consigned: "consigned",
  brought_back: "brought back from the stockist",
  retired: "retired",
  passed_on: "passed on to a new owner",
  certificate_issued: "certificate issued",
  certificate_voided: "certificate voided",
  certificate_replaced: "certificate replaced",
  corrected: "corrected",
  printed: "printed",
  printed_again: "printed again",
  signed: "signed",
  packed: "packed",
  unpacked: "unpacked",
  dispatched: "dispatched",
  delivered: "delivered",
  spoiled: "spoiled",
  lost: "lost",
  returned: "returned",
  destroyed: "destroyed",
};

export type RefusalCode =
  | "not_from_here"
  | "held_elsewhere"
  | "not_for_sale"
  | "already_dispatched"
  | "not_dispatched"
  | "already_issued"
  | "reason_missing"
  | "sheet_lost"
  | "sheet_still_there"
  | "no_sheet_before"
  | "has_sheet_before";

/** The entry may not be written, and why, for the studio's screens. */
export type Refused = { readonly refused: RefusalCode; readonly sentence: string };

/** The entry may be written, and where it leaves the copy. */
export type CopyAllowed = { readonly to: CopyPlacement };

/** The entry may be written, and what it makes of the sheet. */
export type SheetAllowed = { readonly to: SheetMaking };

export type CopyContext = {
  /** The hold that stands on the copy belongs to the order the entry is for. Only then may a held copy be sold. */
  readonly holdOfSameOrder?: boolean;
  /**
   * A sheet of the copy has left the studio for the buyer. Left out, it counts as having left: a copy is then "coming back" until it has
   * been seen, and is never put up for sale on a guess.
   */
  readonly dispatched?: boolean;
  /** The copy may be sold at all: false for exhibition copies and hors commerce. */
  readonly forSale?: boolean;
  /** A number of the edition has been issued (see `ISSUING_KINDS`). Left out, one has. */
  readonly issued?: boolean;
  /** This very number has been issued, even if it has come back since. Left out, it has. */
  readonly copyIssued?: boolean;
};

const ANYWHERE_BUT_GONE: Partial<Record<CopyPlacement, CopyPlacement>> = {
  in_hand: "in_hand",
  held: "held",
  set_aside: "set_aside",
  sold: "sold",
  given: "given",
  kept: "kept",
  consigned: "consigned",
};
const ANYWHERE: Partial<Record<CopyPlacement, CopyPlacement>> = {
  ...ANYWHERE_BUT_GONE,
  coming_back: "coming_back",
  retired: "retired",
};

/** From where an entry may be written, and where it leads. Conditions that need more than the place are in `conditionOn`. */
const COPY_TABLE: Record<CopyEntryKind, Partial<Record<CopyPlacement | "nowhere", CopyPlacement>>> = {
  opened: { nowhere: "in_hand" },
  limit_lowered: { in_hand: "retired" },
  prices_changed: { in_hand: "in_hand", held: "held", set_aside: "set_aside", kept: "kept" },
  closed_early: { in_hand: "retired", set_aside: "retired" },
  sold: { in_hand: "sold", held: "sold", set_aside: "sold", consigned: "sold" },
  sold_by_stockist: { consigned: "sold" },
  // Money may go back before the sheet does, on its way, or after it has been looked over.
  refunded: { sold: "coming_back", coming_back: "coming_back", in_hand: "in_hand", retired: "retired" },
  sale_cancelled: { sold: "in_hand" },
  coming_back: { sold: "coming_back" },
  inspected_back: { coming_back: "in_hand" },
  given: { in_hand: "given", set_aside: "given" },
  kept: { in_hand: "kept", set_aside: "kept" },
  no_longer_kept: { kept: "in_hand" },
  set_aside: { in_hand: "set_aside" },
  released_from_set_aside: { set_aside: "in_hand" },
  consigned: { in_hand: "consigned", set_aside: "consigned" },
  brought_back: { consigned: "in_hand" },
  // From "coming back" when the sheet never arrived, from "consigned" when it was lost at the stockist's.
  retired: {
    in_hand: "retired",
    set_aside: "retired",
    kept: "retired",
    consigned: "retired",
    coming_back: "retired",
  },
  passed_on: { sold: "sold", given: "given" },
  certificate_issued: ANYWHERE_BUT_GONE,
  certificate_replaced: ANYWHERE_BUT_GONE,
  certificate_voided: ANYWHERE,
  corrected: ANYWHERE,
};

/** Entries after which a number of the edition counts as issued: from the first of them, the denominator never changes. */
export const ISSUING_KINDS: readonly LedgerEntryKind[] = [
  "sold",
  "sold_by_stockist",
  "given",
  "consigned",
  "signed",
  "dispatched",
  "certificate_issued",
];

/** Whether a hold may be laid on a copy that stands here. Letting a hold go puts the copy back in hand. */
export function mayBeHeld(from: CopyPlacement): boolean {
  return from === "in_hand";
}

function conditionOn(kind: CopyEntryKind, from: CopyPlacement | null, context: CopyContext): Refused | null {
  switch (kind) {
    case "sold":
    case "sold_by_stockist":
      if (context.forSale === false) {
        return { refused: "not_for_sale", sentence: "This copy belongs to a run that is not for sale." };
      }
      if (from === "held" && context.holdOfSameOrder !== true) {
        return { refused: "held_elsewhere", sentence: "This copy is held for another order." };
      }
      return null;
    case "sale_cancelled":
      return context.dispatched === false
        ? null
        : {
            refused: "already_dispatched",
            sentence: "The sheet has left the studio: the copy is coming back until it has been seen.",
          };
    case "coming_back":
      return context.dispatched === false
        ? {
            refused: "not_dispatched",
            sentence: "The sheet has not left the studio: cancel the sale instead.",
          }
        : null;
    case "limit_lowered":
      return context.issued === false
        ? null
        : {
            refused: "already_issued",
            sentence: "A number of this edition has been issued: its limit never changes again.",
          };
    default:
      return null;
  }
}

/**
 * Whether an entry may be written about a copy that stands at `from` (null: it is not in the book yet), and where it leaves
 * the copy. An entry that only records something leaves it where it is.
 *
 * The rules it keeps: a copy is sold only from in hand, from a hold of the same order, from set aside, or from
 * consignment; a refund never undoes a sale, and after dispatch the copy is coming back until its sheet has been seen;
 * the limit falls only while no number is issued; closing early retires the numbers never issued and leaves the rest.
 */
export function allowedCopyTransition(
  kind: CopyEntryKind,
  from: CopyPlacement | null,
  context: CopyContext = {},
): CopyAllowed | Refused {
  const to = COPY_TABLE[kind][from ?? "nowhere"];
  if (to === undefined) {
    if (from === "held") {
      return {
        refused: "held_elsewhere",
        sentence: "This copy is held for a checkout: wait until the hold ends.",
      };
    }
    const where = from === null ? "not in the book" : PLACEMENT_WORDS[from];
    return {
      refused: "not_from_here",
      sentence: `A copy that is ${where} cannot be "${ENTRY_WORDS[kind]}".`,
    };
  }
  const refusal = conditionOn(kind, from, context);
  if (refusal !== null) return refusal;
  if (kind === "refunded" && from === "sold" && context.dispatched === false) return { to: "in_hand" };
  if (kind === "closed_early" && context.copyIssued !== false && from !== null) return { to: from };
  return { to };
}

/** Where a copy stands after its entries, oldest first; null when it was never opened. Throws RangeError at the first entry the table refuses. */
export function replayCopy(
  entries: readonly { readonly kind: CopyEntryKind; readonly context?: CopyContext }[],
): CopyPlacement | null {
  let placement: CopyPlacement | null = null;
  for (const [index, { kind, context }] of entries.entries()) {
    // A sale out of a hold is written when the copy is in hand to the book: the hold itself left no line.
    const result: CopyAllowed | Refused = allowedCopyTransition(kind, placement, context);
    if ("refused" in result) throw new RangeError(`Entry ${index + 1} (${kind}): ${result.sentence}`);
    placement = result.to;
  }
  return placement;
}

export type SheetContext = {
  /** Why the sheet was spoiled; without it a spoiling is not recorded. */
  readonly reason?: string;
  /** What became of the sheet of the same copy and picture before this one; null when this is the first. */
  readonly previous?: SheetMaking | null;
};

const SHEET_TABLE: Record<SheetEntryKind, Partial<Record<SheetMaking, SheetMaking>>> = {
  printed: { to_print: "printed" },
  printed_again: { to_print: "printed" },
  signed: { printed: "signed" },
  packed: { signed: "packed", returned: "packed" },
  unpacked: { packed: "signed" },
  // A studio that packs and sends in one act records the sending alone.
  dispatched: { signed: "dispatched", packed: "dispatched", returned: "dispatched" },
  // From "signed", "packed" or "returned" when the sheet is handed over in person.
  delivered: { dispatched: "delivered", signed: "delivered", packed: "delivered", returned: "delivered" },
  // From "to print" when the press itself ruined the sheet.
  spoiled: {
    to_print: "spoiled",
    printed: "spoiled",
    signed: "spoiled",
    packed: "spoiled",
    returned: "spoiled",
  },
  lost: {
    printed: "lost",
    signed: "lost",
    packed: "lost",
    dispatched: "lost",
    delivered: "lost",
    returned: "lost",
  },
  returned: { dispatched: "returned", delivered: "returned", lost: "returned" },
  // From "delivered" when its owner has proved the destruction. Never from "lost": what is lost may turn up.
  destroyed: {
    printed: "destroyed",
    signed: "destroyed",
    packed: "destroyed",
    delivered: "destroyed",
    returned: "destroyed",
  },
};

/** Whether a sheet still stands for its copy. A lost one does: it may turn up, and until it has, its number is not printed again. */
export function isLive(making: SheetMaking): boolean {
  return making !== "spoiled" && making !== "destroyed";
}

/**
 * Whether a further sheet of a copy may be printed, given what became of the one before it (null: there was none). Only
 * a spoiled or a destroyed sheet makes room; a lost one does so only by coming back first and then being spoiled or destroyed.
 */
export function mayPrintAgain(previous: SheetMaking | null): Refused | null {
  if (previous === null) {
    return { refused: "no_sheet_before", sentence: "This number has not been printed yet." };
  }
  if (previous === "lost") {
    return {
      refused: "sheet_lost",
      sentence:
        "The sheet of this number is lost, and may turn up: it is not printed again unless it comes back.",
    };
  }
  return isLive(previous)
    ? {
        refused: "sheet_still_there",
        sentence: "This number still has its sheet: spoil or destroy that one first.",
      }
    : null;
}

/**
 * Whether an entry may be written about a sheet, and what it makes of it. A sheet put in the queue is no ledger line:
 * nothing has happened to paper yet. A spoiled sheet is recorded with its reason before its number is printed again, and a
 * number whose sheet is lost is not printed again unless the sheet comes back.
 */
export function allowedSheetTransition(
  kind: SheetEntryKind,
  from: SheetMaking,
  context: SheetContext = {},
): SheetAllowed | Refused {
  const to = SHEET_TABLE[kind][from];
  if (to === undefined) {
    return {
      refused: "not_from_here",
      sentence: `A sheet that is ${MAKING_WORDS[from]} cannot be "${ENTRY_WORDS[kind]}".`,
    };
  }
  if (kind === "spoiled" && (context.reason ?? "").trim() === "") {
    return { refused: "reason_missing", sentence: "Say why the sheet was spoiled." };
  }
  const previous = context.previous ?? null;
  if (kind === "printed_again") return mayPrintAgain(previous) ?? { to };
  if (kind === "printed" && previous !== null) {
    return (
      mayPrintAgain(previous) ?? {
        refused: "has_sheet_before",
        sentence: "This number had a sheet before: record it as printed again.",
      }
    );
  }
  return { to };
}

export type EditionState = {
  readonly stage: "draft" | "open" | "closed";
  /** Copies of the numbered run that have been issued (see `ISSUING_KINDS`). */
  readonly issued: number;
  /** Holds that have not ended. */
  readonly held: number;
};

/** Why an entry may not be written about a whole edition, or null when it may. */
export function refusedForEdition(kind: EditionEntryKind, edition: EditionState): Refused | null {
  if (kind === "opened") {
    return edition.stage === "draft"
      ? null
      : { refused: "not_from_here", sentence: "This edition has been opened already." };
  }
  if (edition.stage !== "open") {
    return {
      refused: "not_from_here",
      sentence:
        edition.stage === "draft" ? "This edition has not been opened yet." : "This edition has been closed.",
    };
  }
  if (kind === "prices_changed") return null;
  if (kind === "limit_lowered" && edition.issued > 0) {
    return {
      refused: "already_issued",
      sentence: "A number of this edition has been issued: its limit never changes again.",
    };
  }
  return edition.held > 0
    ? {
        refused: "held_elsewhere",
        sentence: "Copies of this edition are held for a checkout: wait until the holds end.",
      }
    : null;
}
