import argon2 from "argon2";
import { turns } from "~/platform/turns";

/** Source: RFC 9106, section 4, second recommended option: argon2id, t=3, p=4, m=2^16 KiB, 128-bit salt, 256-bit tag. */
export const ARGON2ID = {
  type: argon2.argon2id,
  version: 0x13,
  timeCost: 3,
  parallelism: 4,
  memoryCost: 2 ** 16,
  hashLength: 32,
} as const;
const SALT_BYTES = 16;

/** Each hash takes 64 MiB and all cores: more than two at once would only be slower, and could exhaust memory. */
const hashing = turns({ atOnce: 2, mostWaiting: 60, retryAfter: 10 });

/** How many hashes are being made, and how many wait for it. */
export function passwordQueue(): { running: number; waiting: number } {
  return hashing.standing();
}

/** A password's hash in PHC string format. Throws AppError `unavailable` when too many wait already. */
export function hashPassword(password: string): Promise<string> {
  return hashing.take(() => argon2.hash(password, ARGON2ID));
}

// Right parameters, but no password has this tag: it is checked where there is no account, so that a wrong
// address takes as long as a wrong password.
const NOBODY = `$argon2id$v=19$m=${ARGON2ID.memoryCost},t=${ARGON2ID.timeCost},p=${ARGON2ID.parallelism}$${"A".repeat(
  Math.ceil((SALT_BYTES * 4) / 3),
)}$${"A".repeat(Math.ceil((ARGON2ID.hashLength * 4) / 3))}`;

/**
 * Whether the password belongs to the hash; a null hash (no account, no password yet) takes as long and never does.
 * Throws AppError `unavailable` when too many wait already.
 */
export async function verifyPassword(hash: string | null, password: string): Promise<boolean> {
  const matches = await hashing.take(() => argon2.verify(hash ?? NOBODY, password));
  return hash !== null && matches;
}

/** Whether a hash was made with other parameters than today's. */
export function isOutdated(hash: string): boolean {
  return argon2.needsRehash(hash, ARGON2ID);
}
