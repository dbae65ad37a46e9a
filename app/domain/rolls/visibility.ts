/** What decides whether a print's pictures may be seen by anyone. */
export type PrintShown = {
  state: "draft" | "published" | "withdrawn";
  /** The photographer lets it be seen before the first of its editions is released. */
  shownBeforeRelease: boolean;
};

export type EditionShown = { state: "draft" | "open" | "closed"; releaseAt: Date | null };

/**
 * Whether the proofs of a print lie under public names: exactly while it is published and either may be shown early or
 * has an edition that was opened and whose release has come. A closed edition was released once.
 */
export function picturesArePublic(print: PrintShown, editions: readonly EditionShown[], now: Date): boolean {
  if (print.state !== "published") return false;
  if (print.shownBeforeRelease) return true;
  return editions.some(
    (edition) => edition.state !== "draft" && edition.releaseAt !== null && edition.releaseAt <= now,
  );
}
