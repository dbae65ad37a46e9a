/** The facts of an object that conditional requests compare. */
export interface Validators {
  /** Without quotes. */
  etag: string;
  /** Milliseconds since the epoch. */
  modifiedAt: number;
}

/** The four conditional headers, or their copy-source forms. */
export interface Conditions {
  ifMatch: string | undefined;
  ifNoneMatch: string | undefined;
  ifModifiedSince: string | undefined;
  ifUnmodifiedSince: string | undefined;
}

export type ConditionOutcome = "proceed" | "not-modified" | "failed";

/**
 * Weighs conditions in the order of RFC 9110 section 13.2.2: an entity tag speaks before a date, and what must hold
 * before what must not. A date that cannot be read is ignored, as the RFC has it.
 */
export function evaluateConditions(conditions: Conditions, current: Validators): ConditionOutcome {
  const modifiedSecond = Math.floor(current.modifiedAt / 1000);
  if (conditions.ifMatch !== undefined) {
    if (!matchesETag(conditions.ifMatch, current.etag)) return "failed";
  } else if (conditions.ifUnmodifiedSince !== undefined) {
    const limit = Date.parse(conditions.ifUnmodifiedSince) / 1000;
    if (modifiedSecond > limit) return "failed";
  }
  if (conditions.ifNoneMatch !== undefined) {
    if (matchesETag(conditions.ifNoneMatch, current.etag)) return "not-modified";
  } else if (conditions.ifModifiedSince !== undefined) {
    const limit = Date.parse(conditions.ifModifiedSince) / 1000;
    if (modifiedSecond <= limit) return "not-modified";
  }
  return "proceed";
}

/** Whether a list of entity tags, or `*`, names this one. Tags may come without quotes, as some clients send them. */
export function matchesETag(list: string, etag: string): boolean {
  return list
    .split(",")
    .map((tag) => tag.trim())
    .some((tag) => tag === "*" || stripETag(tag) === etag);
}

/** An entity tag without its quotes and weakness mark. */
export function stripETag(tag: string): string {
  return tag
    .trim()
    .replace(/^W\//, "")
    .replace(/^"(.*)"$/, "$1");
}
