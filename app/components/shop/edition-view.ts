import type { ForeEdgeProps } from "~/components/ui/fore-edge";
import type { LeafCopy } from "~/components/ui/leaf";
import type { NumberSheetOutside, NumberSheetRow } from "~/components/ui/number-sheet";
import { formatInstant } from "~/domain/dates";
import { numberMark } from "~/domain/editions/numbering";
import type { ShownEdition, ShownFormat } from "~/domain/prints/catalogue.server";
import { LANGUAGE_TAG, type Language } from "~/languages/language";
import { count, fill, messagesOf } from "~/languages/messages";
import { currencyCode, formatMoney } from "~/platform/money";

/** Copies and editions in words: what components are given, in a language. */

export type Shown = { language: Language; currency: string; zone: string };

/** An amount in minor units as printed: "£280" where it is whole, "£280.50" where not. */
export function price(amount: number, { currency, language }: Pick<Shown, "currency" | "language">): string {
  const written = formatMoney({ amount, currency: currencyCode(currency) }, LANGUAGE_TAG[language]);
  return written.replace(/[.,]00(?=\D*$)/, "");
}

export function nextMark(edition: Pick<ShownEdition, "nextNumber" | "limit">): string | null {
  return edition.nextNumber === null
    ? null
    : numberMark({ run: "numbered", number: edition.nextNumber, total: edition.limit });
}

/** "4 of 15 left", "all gone", "opens Friday 11 December, 18:00 GMT". */
export function leftWords(
  edition: ShownEdition,
  { language, zone }: Pick<Shown, "language" | "zone">,
): string {
  const { shop } = messagesOf(language);
  if (edition.sale === "before") {
    return fill(shop.opensOn, { time: formatInstant(edition.releaseAt, zone, LANGUAGE_TAG[language]) });
  }
  if (edition.free === 0) return edition.held > 0 && !edition.closed ? shop.heldAll : shop.goneAll;
  if (edition.free === 1) return fill(shop.lastOf, { limit: edition.limit });
  return count(language, shop.leftOf, edition.free, { limit: edition.limit });
}

function numbered(edition: ShownEdition) {
  return edition.copies.filter((c) => c.run === "numbered");
}

/** The edition seen from the side. */
export function foreEdge(edition: ShownEdition, shown: Pick<Shown, "language" | "zone">): ForeEdgeProps {
  return {
    copies: numbered(edition).map((c) => ({ ...c, next: c.number === edition.nextNumber })),
    label: leftWords(edition, shown),
  };
}

function leaf(copy: ShownEdition["copies"][number], edition: ShownEdition, language: Language): LeafCopy {
  const { shop } = messagesOf(language);
  const next = copy.run === "numbered" && copy.number === edition.nextNumber && edition.sale === "now";
  // A proof outside the run that has not gone is with the studio; it cannot be bought here.
  const word =
    copy.run !== "numbered" && copy.placement === "free" ? shop.withTheStudio : shop[copy.placement];
  return { ...copy, word: next ? shop.next : word, next };
}

/** The rows of the number sheet: one for each step of a format's ladder. */
export function numberRows(edition: ShownEdition, format: ShownFormat, shown: Shown): NumberSheetRow[] {
  const { shop } = messagesOf(shown.language);
  return format.steps.map((step) => {
    const copies = numbered(edition).filter((c) => c.number >= step.fromNumber && c.number <= step.toNumber);
    const free = copies.filter((c) => c.placement === "free").length;
    const held = copies.filter((c) => c.placement === "held").length;
    const isNow =
      edition.sale === "now" &&
      edition.nextNumber !== null &&
      edition.nextNumber >= step.fromNumber &&
      edition.nextNumber <= step.toNumber;
    const left = free === 0 ? shop.rowNone : fill(isNow ? shop.rowNow : shop.rowLeft, { n: free });
    return {
      fromNumber: step.fromNumber,
      toNumber: step.toNumber,
      price: price(step.amount, shown),
      words: fill(step.fromNumber === step.toNumber ? shop.rowNumber : shop.rowNumbers, {
        from: step.fromNumber,
        to: step.toNumber,
      }),
      left: held > 0 ? `${left}, ${fill(shop.rowHeld, { n: held })}` : left,
      isNow,
      copies: copies.map((c) => leaf(c, edition, shown.language)),
    };
  });
}

/** Copies outside the run, under their own heading. */
export function outsideRows(edition: ShownEdition, language: Language): NumberSheetOutside[] {
  const { shop } = messagesOf(language);
  const copies = edition.copies.filter((c) => c.run !== "numbered");
  if (copies.length === 0) return [];
  return [
    {
      label: shop.outsideTheRun,
      words: shop.notForSale,
      copies: copies.map((c) => leaf(c, edition, language)),
    },
  ];
}

/** "3 artist's proofs (AP), 1 printer's proof (PP)", or "none". */
export function outsideWords(edition: Pick<ShownEdition, "proofsOutside">, language: Language): string {
  const { shop } = messagesOf(language);
  const { ap, pp, hc, bat, exhibition } = edition.proofsOutside;
  const parts: [number, { one: string; other: string }][] = [
    [ap, shop.runAp],
    [pp, shop.runPp],
    [hc, shop.runHc],
    [bat, shop.runBat],
    [exhibition, shop.runExhibition],
  ];
  const said = parts.filter(([n]) => n > 0).map(([n, forms]) => count(language, forms, n));
  return said.length === 0 ? shop.runNone : said.join(", ");
}

/** "Smooth matt cotton, 310 g/m²" */
export function paperWords(format: Pick<ShownFormat, "paper">): string {
  return `${format.paper.name}, ${format.paper.grammage} g/m²`;
}

/** "image 300 × 240 mm, sheet 420 × 360 mm" */
export function sizeWords(format: Pick<ShownFormat, "image" | "sheet">, language: Language): string {
  const { shop } = messagesOf(language);
  const times = (s: { width: number; height: number }) => `${s.width} × ${s.height}`;
  return `${fill(shop.image, { size: times(format.image) })}, ${fill(shop.sheet, { size: times(format.sheet) })}`;
}
