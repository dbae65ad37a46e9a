/** What a print needs before it is published, and what may be done with it. Pure; the command asks again. */

export type PrintState = "draft" | "published" | "withdrawn";

/** Words for the studio's screens. */
export const PRINT_STATE_WORDS: Record<PrintState, string> = {
  draft: "draft",
  published: "in the shop",
  withdrawn: "withdrawn from the shop",
};

export type PublishedThings = {
  title: string;
  year: number | null;
  pictures: readonly { label: string; description: string; scanReady: boolean }[];
};

/** What is missing before a print can be published, as sentences; an empty list when nothing is. */
export function missingForPublishing(print: PublishedThings): string[] {
  const missing: string[] = [];
  if (print.title.trim() === "") missing.push("Give the print a title.");
  if (print.year === null) missing.push("Give the year of exposure.");
  if (print.pictures.length === 0) missing.push("Choose a picture.");
  for (const picture of print.pictures) {
    const which = print.pictures.length > 1 ? `picture ${picture.label}` : "the picture";
    if (!picture.scanReady) missing.push(`The scan of ${which} has not been checked yet.`);
    if (picture.description.trim() === "") {
      missing.push(`Describe ${which} for those who cannot see it.`);
    }
  }
  return missing;
}

/** Why pictures and crop of a print stay as they are, or null while they may change. */
export function picturesFixedBecause(
  editions: readonly { state: "draft" | "open" | "closed" }[],
): string | null {
  const opened = editions.filter((edition) => edition.state !== "draft");
  if (opened.length === 0) return null;
  return `${
    opened.length === 1 ? "An edition of this print has" : `${opened.length} editions of this print have`
  } been opened: its copies are all of one picture, so pictures, scan version and crop stay as they are. Another crop is another print of the same frame.`;
}

/** Why the readable address stays as it is, or null while it may change. */
export function slugFixedBecause(state: PrintState): string | null {
  return state === "draft"
    ? null
    : "The print has been in the shop: people keep its address, so it stays as it is.";
}
