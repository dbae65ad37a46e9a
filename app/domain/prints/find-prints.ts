import type { ShownPrint } from "./catalogue.server";

/** What the list of prints can be asked for; the address carries it. */
export type PrintsWanted = {
  series: string;
  /** Id of a paper. */
  paper: string;
  left: "" | "now" | "before";
  sort: "" | "price" | "year" | "left";
};

/** Reads the wishes from an address; what is not understood counts as not asked. */
export function printsWanted(search: URLSearchParams): PrintsWanted {
  const left = search.get("left");
  const sort = search.get("sort");
  return {
    series: search.get("series") ?? "",
    paper: search.get("paper") ?? "",
    left: left === "now" || left === "before" ? left : "",
    sort: sort === "price" || sort === "year" || sort === "left" ? sort : "",
  };
}

const lowestPrice = (print: ShownPrint) =>
  Math.min(
    ...print.editions.flatMap((e) => e.formats.flatMap((f) => f.nextAmount ?? [])),
    Number.POSITIVE_INFINITY,
  );
const leastLeft = (print: ShownPrint) =>
  Math.min(...print.editions.filter((e) => e.free > 0).map((e) => e.free), Number.POSITIVE_INFINITY);

/** Prints that answer to what was asked, in the order asked for; equal ones stay in the studio's order. */
export function findPrints(prints: readonly ShownPrint[], wanted: PrintsWanted): ShownPrint[] {
  const found = prints.filter(
    (print) =>
      (wanted.series === "" || print.series?.slug === wanted.series) &&
      (wanted.paper === "" ||
        print.editions.some((e) => e.formats.some((f) => f.paper.id === wanted.paper))) &&
      (wanted.left === "" ||
        print.editions.some((e) => e.sale === wanted.left && (wanted.left === "before" || e.free > 0))),
  );
  // Differences of two infinities are no number: compare instead of subtracting.
  const by = (a: number, b: number) => (a < b ? -1 : a > b ? 1 : 0);
  if (wanted.sort === "price") return found.toSorted((a, b) => by(lowestPrice(a), lowestPrice(b)));
  if (wanted.sort === "year") return found.toSorted((a, b) => by(b.year ?? 0, a.year ?? 0));
  if (wanted.sort === "left") return found.toSorted((a, b) => by(leastLeft(a), leastLeft(b)));
  return found;
}
