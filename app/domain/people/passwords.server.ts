import argon2 from "argon2";
import { AppError } from "~/platform/errors";

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
const AT_ONCE = 2;
const MOST_WAITING = 60;

let running = 0;
const waiting: (() => void)[] = [];

async function inTurn<T>(work: () => Promise<T>): Promise<T> {
  if (running < AT_ONCE) {
    running++;
  } else {
    if (waiting.length >= MOST_WAITING) {
      throw new AppError("unavailable", "too many passwords are being checked", { retryAfter: 10 });
    }
    // Whoever finishes hands its place on, so the count stays as it is.
    await new Promise<void>((resolve) => waiting.push(resolve));
  }
  try {
    return await work();
  } finally {
    const next = waiting.shift();
    if (next === undefined) running--;
    else next();
  }
}

/** How many hashes are being made, and how many wait for it. */
export function passwordQueue(): { running: number; waiting: number } {
  return { running, waiting: waiting.length };
}

/** A password's hash in PHC string format. Throws AppError `unavailable` when too many wait already. */
export function hashPassword(password: string): Promise<string> {
  return inTurn(() => argon2.hash(password, ARGON2ID));
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
  const matches = await inTurn(() => argon2.verify(hash ?? NOBODY, password));
  return hash !== null && matches;
}

/** Whether a hash was made with other parameters than today's. */
export function isOutdated(hash: string): boolean {
  return argon2.needsRehash(hash, ARGON2ID);
}
