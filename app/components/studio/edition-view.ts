import type { BookLine } from "~/components/ui/book";
import type { LeafCopy, LegendEntry } from "~/components/ui/leaf";
import type { NumberSheetOutside, NumberSheetRow } from "~/components/ui/number-sheet";
import type {
  EditionCopy,
  EditionFormat,
  EditionPage,
  LedgerLine,
} from "~/domain/editions/edition-page.server";
import { entryWords, happenedWords, writtenWords } from "~/domain/editions/ledger-words";
import { countOfRun, RUNS } from "~/domain/editions/numbering";
import { PLACEMENT_WORDS } from "~/domain/editions/transitions";
import { priceOf } from "~/domain/pricing/ladder";
import { currencyCode, formatMoney } from "~/platform/money";

/** An edition's page as its components are given it, in the studio's English. */

const TAG = "en-GB";

/** "£280", "£280.50" */
export function sum(amount: number, currency: string): string {
  return formatMoney({ amount, currency: currencyCode(currency) }, TAG).replace(/[.,]00$/, "");
}

export function sumExact(amount: number, currency: string): string {
  return formatMoney({ amount, currency: currencyCode(currency) }, TAG);
}

/** "Smooth cotton, 310 g/m², pigment print, image 400 × 320 mm, sheet 500 × 420 mm" */
export function formatWords(format: EditionFormat): string {
  const { paper, process, image, sheet } = format;
  return `${paper.name}, ${paper.grammage} g/m², ${process}, image ${image.width} × ${image.height} mm, sheet ${sheet.width} × ${sheet.height} mm`;
}

/** The lowest number that can be bought now; null when there is none. */
export function nextNumber(edition: EditionPage): number | null {
  if (edition.state !== "open" || !edition.released) return null;
  return (
    edition.copies.find((copy) => copy.run === "numbered" && copy.placement === "in_hand")?.number ?? null
  );
}

function leaf(copy: EditionCopy, next: number | null): LeafCopy {
  const isNext = copy.run === "numbered" && copy.number === next;
  const word = isNext ? "next" : PLACEMENT_WORDS[copy.placement];
  return {
    number: copy.number,
    run: copy.run,
    placement: copy.placement,
    word: copy.reprinted ? `${word}, reprinted` : word,
    next: isNext,
    reprinted: copy.reprinted,
  };
}

/** Rows of the number sheet: as long as every format's price stays the same, numbers share a row. */
export function sheetRows(edition: EditionPage): NumberSheetRow[] {
  const numbered = edition.copies.filter((copy) => copy.run === "numbered");
  const next = nextNumber(edition);
  const prices = (number: number) => edition.formats.map((format) => priceOf(format.steps, number));
  const rows: { copies: EditionCopy[]; prices: (number | null)[] }[] = [];
  for (const copy of numbered) {
    const own = prices(copy.number);
    const last = rows.at(-1);
    if (last !== undefined && last.prices.join() === own.join()) last.copies.push(copy);
    else rows.push({ copies: [copy], prices: own });
  }
  return rows.flatMap(({ copies, prices: own }) => {
    const [first, last] = [copies[0], copies.at(-1)];
    if (first === undefined || last === undefined) return [];
    const inHand = copies.filter((copy) => copy.placement === "in_hand").length;
    const held = copies.filter((copy) => copy.placement === "held").length;
    const isNow = copies.some((copy) => copy.number === next);
    const left = inHand === 0 ? "none left" : `${isNow ? "now: " : ""}${inHand} left`;
    return [
      {
        fromNumber: first.number,
        toNumber: last.number,
        price: own
          .map((amount) => (amount === null ? "no price" : sum(amount, edition.currency)))
          .join(" / "),
        words:
          first.number === last.number
            ? `number ${first.number}`
            : `numbers ${first.number} to ${last.number}`,
        left: held > 0 ? `${left}, ${held} held` : left,
        isNow,
        copies: copies.map((copy) => leaf(copy, next)),
      },
    ];
  });
}

/** Copies outside the run. */
export function outsideRows(edition: EditionPage): NumberSheetOutside[] {
  const outside = edition.copies.filter((copy) => copy.run !== "numbered");
  if (outside.length === 0) return [];
  const kinds = RUNS.filter((run) => outside.some((copy) => copy.run === run));
  return [
    {
      label: "Outside the run",
      words: kinds
        .map((run) => countOfRun(run, outside.filter((copy) => copy.run === run).length))
        .join(", "),
      copies: outside.map((copy) => leaf(copy, null)),
    },
  ];
}

/** What the leaves say. */
export const LEGEND: readonly LegendEntry[] = [
  { placement: "in_hand", name: "In hand", meaning: "a bare sheet: it can be bought" },
  { placement: "held", name: "Held", meaning: "corner folded: set aside for someone at payment" },
  {
    placement: "set_aside",
    name: "Set aside",
    meaning: "banded: put by for a fair, an exhibition, a person",
  },
  { placement: "sold", name: "Sold", meaning: "inked: it has an owner" },
  { placement: "coming_back", name: "Coming back", meaning: "half out of its wrapper: repaid, not seen yet" },
  { placement: "kept", name: "Kept", meaning: "in photo corners: it stays with the studio" },
  { placement: "given", name: "Given", meaning: "tied with a ribbon: given, not sold" },
  { placement: "consigned", name: "Consigned", meaning: "framed and hung: with a stockist" },
  { placement: "retired", name: "Retired", meaning: "crossed: never to be issued" },
  {
    placement: "sold",
    name: "Reprinted",
    meaning: "a torn sheet behind: spoiled, printed again",
    reprinted: true,
  },
];

const ACTORS: Record<string, string> = {
  shop: "the shop",
  photographer: "photographer",
  assistant: "assistant",
  stockist: "stockist",
  collector: "collector",
};

/** A line of the ledger as the book shows it; money and names only where they may be seen. */
export function bookLine(line: LedgerLine, zone: string): BookLine {
  const words = entryWords(line, zone);
  const happened = happenedWords(line, zone);
  const { secret } = line;
  return {
    line: line.line,
    written: writtenWords(line.recordedAt, zone),
    writtenAt: line.recordedAt.toISOString(),
    ...(happened === null ? {} : { happened }),
    copy: line.mark,
    verb: words.verb,
    entry: words.rest,
    money:
      secret === null || secret.amount === null || secret.currency === null
        ? null
        : sumExact(secret.amount, secret.currency),
    by: secret?.who ?? ACTORS[line.actor] ?? line.actor,
    seal: line.seal,
  };
}
