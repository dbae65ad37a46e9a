import { randomInt } from "node:crypto";

const ALPHABET = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";

/** A random id in Stripe's manner: a prefix that names the kind, then letters and digits. */
export function newId(prefix: string, length = 24): string {
  let id = prefix;
  for (let at = 0; at < length; at += 1) id += ALPHABET[randomInt(ALPHABET.length)];
  return id;
}
