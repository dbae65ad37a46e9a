/** The copies of one picture set against the number up to which tax law treats signed photographs as works of art. */

/** 30 copies in the EU and the UK. A setting of the studio's country, never a hard limit of the product. */
export const CAP_OF_COPIES = 30;

/** Where the cap is laid down. */
export const CAP_SOURCE = "Directive 2006/112/EC, Annex IX, Part A, point 7";

/** What an edition of the picture adds to the count. Trial and working proofs are no copies and are left out. */
export type CountedEdition = {
  readonly limit: number;
  readonly ap: number;
  readonly pp: number;
  readonly hc: number;
  readonly bat: number;
  readonly exhibition: number;
  /** Copies that are neither signed nor numbered. */
  readonly unsigned?: number;
  /** A draft counts like the others, since it will; it is also told apart, so that a form can warn before it is opened. */
  readonly status?: "draft" | "open" | "closed";
};

export type CapCount = {
  /** Every copy of the picture: all editions, sizes and mounts together, proofs counted, drafts too. */
  readonly total: number;
  /** Of these, in editions not opened yet. */
  readonly drafts: number;
  readonly cap: number;
  /** How many copies more would stay within the cap; below zero by how many it is crossed. */
  readonly room: number;
  /** Whether the copies can count as works of art: within the cap, and every one signed and numbered. */
  readonly worksOfArt: boolean;
  readonly state: "within" | "at_cap" | "past_cap";
  /** For the studio's screens; null while there is room. */
  readonly warning: string | null;
};

/** How many copies an edition has in all: the numbered run and every proof outside it. */
export function copiesOf(edition: CountedEdition): number {
  const { limit, ap, pp, hc, bat, exhibition, unsigned = 0 } = edition;
  const counts = [limit, ap, pp, hc, bat, exhibition, unsigned];
  if (counts.some((count) => !Number.isSafeInteger(count) || count < 0)) {
    throw new RangeError("An edition's numbers are whole and not below 0.");
  }
  return counts.reduce((all, count) => all + count, 0);
}

/**
 * Counts all copies of one picture against the cap. An edition closed early still counts with its whole denominator: its
 * signed sheets say so. To warn before a new edition crosses the cap, count it along with the others.
 *
 * Source: Directive 2006/112/EC, Annex IX, Part A, point 7 (photographs taken by the artist, printed by or under the supervision of the
 * artist, signed and numbered and limited to 30 copies, all sizes and mounts included), and CJEU C-145/18. Whether artist's
 * proofs belong to the 30 is not spelled out; they are signed copies, so the cautious reading counts them.
 */
export function countAgainstCap(editions: readonly CountedEdition[], cap = CAP_OF_COPIES): CapCount {
  const total = editions.reduce((all, edition) => all + copiesOf(edition), 0);
  const drafts = editions
    .filter((edition) => edition.status === "draft")
    .reduce((all, edition) => all + copiesOf(edition), 0);
  const room = cap - total;
  const unsigned = editions.some((edition) => (edition.unsigned ?? 0) > 0);
  const state = room > 0 ? "within" : room === 0 ? "at_cap" : "past_cap";
  return {
    total,
    drafts,
    cap,
    room,
    worksOfArt: room >= 0 && !unsigned,
    state,
    warning: warningOf(state, total, cap),
  };
}

function warningOf(state: CapCount["state"], total: number, cap: number): string | null {
  if (state === "within") return null;
  const caution = `(${CAP_SOURCE}; proofs counted, to be cautious). Rules differ by place and change: ask your accountant.`;
  return state === "at_cap"
    ? `These are all ${cap} copies of the picture that tax law treats as works of art. One more, in any size, and none of them is ${caution}`
    : `That makes ${total} copies of the picture, past the ${cap} up to which tax law treats them as works of art: all of them would be taxed as ordinary goods ${caution}`;
}
