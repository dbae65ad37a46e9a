/** Readable addresses: lower-case Latin letters, figures and single hyphens. */

/** Letters that do not come apart into a plain letter and an accent. */
const SPELT: Record<string, string> = {
  ß: "ss",
  æ: "ae",
  œ: "oe",
  ø: "o",
  ł: "l",
  đ: "d",
  ð: "d",
  þ: "th",
  ı: "i",
};

/** The longest address suggested; whole words only. */
const LONGEST = 60;

/** An address from a title: "Weir at Saint Orrin's Mill" gives "weir-at-saint-orrins-mill"; "" where nothing is left. */
export function suggestSlug(title: string): string {
  const plain = title
    .toLowerCase()
    .replace(/[ßæœøłđðþı]/g, (letter) => SPELT[letter] ?? letter)
    .normalize("NFKD")
    .replace(/[\u0300-\u036f'’]/g, "")
    .replace(/[^a-z0-9]+/g, "-")
    .replace(/^-+|-+$/g, "");
  if (plain.length <= LONGEST) return plain;
  const cut = plain.slice(0, LONGEST + 1);
  return cut.includes("-") ? cut.slice(0, cut.lastIndexOf("-")) : plain.slice(0, LONGEST);
}

/** Whether a text can be an address. */
export function isSlug(text: string): boolean {
  return text.length <= 80 && /^[a-z0-9]+(-[a-z0-9]+)*$/.test(text);
}

/** The suggestion itself, or with the first number behind it that makes it free: "hag-down-2". */
export function freeSlug(suggestion: string, taken: ReadonlySet<string>): string {
  const base = suggestion === "" ? "untitled" : suggestion;
  if (!taken.has(base)) return base;
  for (let number = 2; ; number += 1) {
    const next = `${base}-${number}`;
    if (!taken.has(next)) return next;
  }
}
