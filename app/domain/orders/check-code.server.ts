import { randomInt } from "node:crypto";

/** Digits and letters that are not mistaken for one another when read aloud or copied by hand. */
const ALPHABET = "23456789ABCDEFGHJKMNPQRSTUVWXYZ";

/** A new check code: twelve characters in three groups, about 59 bits. Public: it proves nothing by itself. */
export function newCheckCode(): string {
  const characters = Array.from({ length: 12 }, () => ALPHABET[randomInt(ALPHABET.length)] ?? "");
  return [0, 4, 8].map((i) => characters.slice(i, i + 4).join("")).join("-");
}

/** A code as somebody typed it, in the form it is kept: upper case, groups of four. null if it cannot be one. */
export function normaliseCheckCode(typed: string): string | null {
  const plain = typed.toUpperCase().replace(/[^0-9A-Z]/g, "");
  if (plain.length !== 12) return null;
  return [0, 4, 8].map((i) => plain.slice(i, i + 4)).join("-");
}
