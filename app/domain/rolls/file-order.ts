const byName = new Intl.Collator("en", { numeric: true, sensitivity: "base" });

/** Orders files as their names count: "roll_2.tif" before "roll_10.tif". Equal names keep the order they came in. */
export function inFileOrder<T extends { name: string }>(files: readonly T[]): T[] {
  return [...files].sort((a, b) => byName.compare(a.name, b.name));
}
