/** What a ledger entry may hold: JSON without fractions, so that every implementation writes it alike. */
export type LedgerJson =
  | string
  | number
  | boolean
  | null
  | LedgerJson[]
  | { [key: string]: LedgerJson | undefined };

/**
 * Canonical JSON as in RFC 8785 for the values we allow: keys sorted by UTF-16 code units, no white space,
 * integers only (a fraction throws), `undefined` members left out.
 */
export function canonicalJson(value: LedgerJson): string {
  if (value === null || typeof value === "boolean" || typeof value === "string") return JSON.stringify(value);
  if (typeof value === "number") {
    if (!Number.isSafeInteger(value)) throw new RangeError(`not an integer: ${value}`);
    return JSON.stringify(value);
  }
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(",")}]`;
  const members: string[] = [];
  for (const key of Object.keys(value).sort()) {
    const member = value[key];
    if (member !== undefined) members.push(`${JSON.stringify(key)}:${canonicalJson(member)}`);
  }
  return `{${members.join(",")}}`;
}
