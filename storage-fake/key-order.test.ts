import fc from "fast-check";
import { expect, test } from "vitest";
import { compareKeys, type ListKeysOptions, type ListPosition, listKeys } from "./key-order";

const key = fc.oneof(
  fc.string({ maxLength: 8, unit: fc.constantFrom("a", "b", "/", "ü", " ", "\u{1f39e}", "\uffee") }),
  fc.string({ maxLength: 6, unit: "binary" }),
);

test("keys are in the order of their UTF-8 bytes", () => {
  fc.assert(
    fc.property(key, key, (a, b) => {
      expect(Math.sign(compareKeys(a, b))).toBe(Buffer.compare(Buffer.from(a), Buffer.from(b)));
    }),
  );
});

/** All pages of a listing, following each page's own mark. */
function allPages(keys: readonly string[], options: Omit<ListKeysOptions, "after">) {
  const found: string[] = [];
  const commonPrefixes: string[] = [];
  let after: ListPosition | undefined;
  for (;;) {
    const page = listKeys(keys, { ...options, after });
    expect(page.keys.length + page.commonPrefixes.length).toBeLessThanOrEqual(options.limit);
    found.push(...page.keys);
    commonPrefixes.push(...page.commonPrefixes);
    if (!page.next) return { found, commonPrefixes };
    after = page.next;
  }
}

test("the pages together hold every key once, or the common prefix it stands behind", () => {
  fc.assert(
    fc.property(
      fc.uniqueArray(key, { maxLength: 30 }),
      fc.constantFrom("", "a", "a/", "ü"),
      fc.constantFrom("", "/", "b"),
      fc.integer({ min: 1, max: 5 }),
      (unsorted, prefix, delimiter, limit) => {
        const keys = unsorted.sort(compareKeys);
        const expectedKeys: string[] = [];
        const expectedPrefixes = new Set<string>();
        for (const candidate of keys.filter((other) => other.startsWith(prefix))) {
          const end = delimiter === "" ? -1 : candidate.indexOf(delimiter, prefix.length);
          if (end === -1) expectedKeys.push(candidate);
          else expectedPrefixes.add(candidate.slice(0, end + delimiter.length));
        }
        const { found, commonPrefixes } = allPages(keys, { prefix, delimiter, limit });
        expect(found).toEqual(expectedKeys);
        expect(commonPrefixes).toEqual([...expectedPrefixes]);
      },
    ),
  );
});

test("a start inside a common prefix still shows the prefix when keys are left in it", () => {
  const keys = ["roll/1", "roll/2", "z"];
  const after: ListPosition = { kind: "key", value: "roll/1" };
  expect(listKeys(keys, { prefix: "", delimiter: "/", after, limit: 10 })).toEqual({
    keys: ["z"],
    commonPrefixes: ["roll/"],
    next: undefined,
  });
});

test("a limit of nothing gives nothing and no next page", () => {
  expect(listKeys(["a"], { prefix: "", delimiter: "", after: undefined, limit: 0 })).toEqual({
    keys: [],
    commonPrefixes: [],
    next: undefined,
  });
});
