/**
 * Compares two keys by their UTF-8 bytes, the order of S3 listings. JavaScript's own order is by UTF-16 units, which
 * puts characters beyond U+FFFF before U+E000 to U+FFFF.
 */
export function compareKeys(a: string, b: string): number {
  const length = Math.min(a.length, b.length);
  for (let index = 0; index < length; index++) {
    const unitA = a.charCodeAt(index);
    const unitB = b.charCodeAt(index);
    if (unitA !== unitB) return utf8Rank(unitA) - utf8Rank(unitB);
  }
  return a.length - b.length;
}

/** Moves surrogates, which stand for the highest characters, above every other unit. */
function utf8Rank(unit: number): number {
  return unit >= 0xd800 && unit <= 0xdfff ? unit + 0x10000 : unit;
}

/** The index of the first key that `isAtOrAfter` holds for, in keys where it holds from some index on. */
export function firstIndex(keys: readonly string[], isAtOrAfter: (key: string) => boolean): number {
  let low = 0;
  let high = keys.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (isAtOrAfter(keys[middle] ?? "")) high = middle;
    else low = middle + 1;
  }
  return low;
}

/** Where a listing goes on: behind a key, or behind every key that begins with a prefix. */
export type ListPosition = { kind: "key"; value: string } | { kind: "prefix"; value: string };

export interface ListKeysOptions {
  prefix: string;
  /** Empty for none. */
  delimiter: string;
  after: ListPosition | undefined;
  /** The most entries to give, keys and common prefixes together. */
  limit: number;
}

export interface KeyListing {
  keys: string[];
  commonPrefixes: string[];
  /** Where the next page begins; undefined when this is the last one. */
  next: ListPosition | undefined;
}

/**
 * One page of a listing. Keys that share the text from the prefix up to the next delimiter are given as one common
 * prefix. The cost grows with the entries given, not with the keys behind them.
 * @param keys in the order of `compareKeys`
 */
export function listKeys(keys: readonly string[], options: ListKeysOptions): KeyListing {
  const { prefix, delimiter, after, limit } = options;
  const listing: KeyListing = { keys: [], commonPrefixes: [], next: undefined };
  if (limit === 0) return listing;

  let index = firstIndex(keys, (key) => compareKeys(key, prefix) >= 0);
  if (after) index = Math.max(index, indexAfter(keys, after));
  let last: ListPosition | undefined;
  let count = 0;
  for (;;) {
    const key = keys[index];
    if (key === undefined || !key.startsWith(prefix)) return listing;
    if (count === limit) {
      listing.next = last;
      return listing;
    }
    const end = delimiter === "" ? -1 : key.indexOf(delimiter, prefix.length);
    if (end === -1) {
      listing.keys.push(key);
      last = { kind: "key", value: key };
      index += 1;
    } else {
      last = { kind: "prefix", value: key.slice(0, end + delimiter.length) };
      listing.commonPrefixes.push(last.value);
      index = indexAfter(keys, last);
    }
    count += 1;
  }
}

function indexAfter(keys: readonly string[], position: ListPosition): number {
  const { kind, value } = position;
  return firstIndex(keys, (key) => compareKeys(key, value) > 0 && (kind === "key" || !key.startsWith(value)));
}
