import { useId } from "react";
import { numberRows, outsideRows, paperWords, price, type Shown } from "~/components/shop/edition-view";
import { useLiveEdition } from "~/components/shop/use-live-edition";
import { PriceLadder } from "~/components/ui/ladder";
import { LeafLegend } from "~/components/ui/leaf";
import { NumberSheet } from "~/components/ui/number-sheet";
import { Part, Window } from "~/components/ui/window";
import { formatInstant } from "~/domain/dates";
import type { ShownEdition } from "~/domain/prints/catalogue.server";
import { LANGUAGE_TAG } from "~/languages/language";
import { fill, messagesOf } from "~/languages/messages";

/** The number sheet and the ladder of one edition, kept up to date while the page is open. */
export function EditionSheet({
  edition: given,
  shown,
  seenAt,
}: {
  edition: ShownEdition;
  shown: Shown;
  seenAt: Date;
}) {
  const edition = useLiveEdition(given);
  const { shop } = messagesOf(shown.language);
  const id = useId();
  const [format] = edition.formats;
  if (format === undefined) return null;
  const numbered = edition.copies.filter((c) => c.run === "numbered");
  return (
    <>
      <Window labelledBy={`${id}-numbers`}>
        <Part
          headingId={`${id}-numbers`}
          title={shop.numberSheet}
          intro={fill(shop.numberSheetText, {
            paper: edition.formats.map(paperWords).join("; "),
            limit: edition.limit,
          })}
          note={fill(shop.seenAt, { time: formatInstant(seenAt, shown.zone, LANGUAGE_TAG[shown.language]) })}
          beside={
            <LeafLegend
              placements={[
                { placement: "free", name: shop.free, meaning: shop.freeText },
                { placement: "held", name: shop.held, meaning: shop.heldText },
                { placement: "gone", name: shop.gone, meaning: shop.goneText },
              ]}
            />
          }
        >
          <NumberSheet
            variant="shop"
            columns={5}
            rows={numberRows(edition, format, shown)}
            outside={outsideRows(edition, shown.language)}
          />
        </Part>
      </Window>
      {format.steps.length > 1 ? (
        <Window labelledBy={`${id}-ladder`}>
          <Part headingId={`${id}-ladder`} title={shop.priceBelongs} intro={shop.priceBelongsText}>
            {edition.formats.map((one) => (
              <PriceLadder
                key={one.id}
                label={fill(shop.priceEach, { limit: edition.limit })}
                steps={one.steps.map((s) => ({ ...s, price: price(s.amount, shown) }))}
                copies={numbered.map((c) => ({
                  number: c.number,
                  placement: c.placement,
                  next: c.number === edition.nextNumber && edition.sale === "now",
                  word: shop[c.placement],
                }))}
              />
            ))}
          </Part>
        </Window>
      ) : null}
    </>
  );
}
