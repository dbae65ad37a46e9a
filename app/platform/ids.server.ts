import { createHash, createHmac, randomBytes, timingSafeEqual } from "node:crypto";
import { env } from "./env.server";

/** A time-ordered UUID (version 7, RFC 9562). Not a secret. */
export function newId(at: number = Date.now()): string {
  const bytes = randomBytes(16);
  bytes.writeUIntBE(at, 0, 6);
  bytes.writeUInt8((bytes.readUInt8(6) & 0x0f) | 0x70, 6);
  bytes.writeUInt8((bytes.readUInt8(8) & 0x3f) | 0x80, 8);
  const hex = bytes.toString("hex");
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-${hex.slice(12, 16)}-${hex.slice(16, 20)}-${hex.slice(20)}`;
}

/** `bytes` random bytes as base64url; 32 by default. */
export function randomSecret(bytes = 32): string {
  return randomBytes(bytes).toString("base64url");
}

/** SHA-256 as hex. */
export function sha256(data: string | Uint8Array): string {
  return createHash("sha256").update(data).digest("hex");
}

/**
 * An unguessable link that can be made again for a later e-mail although only its hash is looked up: the seed
 * (128 random bits) lies in the database, the server's secret does not, and the token needs both.
 */
export type LinkToken = { seed: string; token: string; hash: string };

/** Makes a new link token for one purpose ("order", "reset", ...). */
export function newLinkToken(purpose: string): LinkToken {
  const seed = randomSecret(16);
  const token = linkToken(purpose, seed);
  return { seed, token, hash: sha256(token) };
}

/** Derives the token of a seed again (192 bits as base64url, 32 characters). */
export function linkToken(purpose: string, seed: string): string {
  return createHmac("sha256", env.SESSION_SECRET)
    .update(`${purpose}:${seed}`)
    .digest()
    .subarray(0, 24)
    .toString("base64url");
}

/** Compares two strings without telling by its time where they differ. */
export function sameSecret(a: string, b: string): boolean {
  const x = createHash("sha256").update(a).digest();
  const y = createHash("sha256").update(b).digest();
  return timingSafeEqual(x, y);
}
