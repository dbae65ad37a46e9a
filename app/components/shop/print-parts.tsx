import { Form, href, Link } from "react-router";
import { Choices } from "~/components/form/choices";
import { CountrySelect } from "~/components/form/select";
import {
  foreEdge,
  leftWords,
  nextMark,
  outsideWords,
  paperWords,
  price,
  type Shown,
  sizeWords,
} from "~/components/shop/edition-view";
import { Facts } from "~/components/ui/facts";
import { ForeEdge } from "~/components/ui/fore-edge";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { sheetMassGrams } from "~/domain/imaging/sizes";
import type { ShownEdition, ShownFormat, ShownPrint } from "~/domain/prints/catalogue.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { count, fill, messagesOf } from "~/languages/messages";

type Offer = { edition: ShownEdition; format: ShownFormat };

/** Choosing an edition and its format, and putting its next number in the basket. Works without scripts. */
export function ChooseEdition(props: {
  print: ShownPrint;
  shown: Shown;
  holdMinutes: number;
  error?: string;
}) {
  const { print, shown, holdMinutes } = props;
  const { shop } = messagesOf(shown.language);
  const offers: Offer[] = print.editions.flatMap((edition) =>
    edition.formats.map((format) => ({ edition, format })),
  );
  const buyable = offers.filter(canBeBought);
  const [first] = buyable;
  const mark = first === undefined ? null : nextMark(first.edition);
  const several = buyable.length > 1;
  return (
    <Form method="post" className="choose">
      <Choices
        name="format"
        legend={shop.chooseEdition}
        legendHidden
        prices="title"
        {...(props.error === undefined ? {} : { error: props.error })}
        {...(first === undefined ? {} : { defaultValue: first.format.id })}
        options={offers.map(({ edition, format }) => ({
          value: format.id,
          name: paperWords(format),
          disabled: !canBeBought({ edition, format }),
          ...(format.nextAmount === null ? {} : { price: price(format.nextAmount, shown) }),
          more: (
            <>
              {sizeWords(format, shown.language)}
              <br />
              <ForeEdge {...foreEdge(edition, shown)} /> {leftWords(edition, shown)}
              {several && nextMark(edition) !== null && canBeBought({ edition, format })
                ? `, ${fill(shop.nextIs, { mark: nextMark(edition) ?? "" })}`
                : null}
            </>
          ),
        }))}
      />
      {mark === null ? (
        <Notice kind="note" title={shop.noneToBuy} level={3}>
          {offers.some((o) => o.edition.sale === "now" && o.edition.held > 0) ? <p>{shop.heldNow}</p> : null}
        </Notice>
      ) : (
        <>
          {several ? null : <p>{fill(shop.yours, { mark })}</p>}
          <Press wide>{several ? shop.putChosenInBasket : fill(shop.putInBasket, { mark })}</Press>
          <p className="note">{fill(shop.notSetAside, { minutes: holdMinutes })}</p>
        </>
      )}
    </Form>
  );
}

function canBeBought({ edition, format }: Offer): boolean {
  return edition.sale === "now" && edition.free > 0 && format.nextAmount !== null;
}

/** What each edition is, in the words a certificate will use. */
export function EditionFacts({ print, shown, total }: { print: ShownPrint; shown: Shown; total: number }) {
  const { shop } = messagesOf(shown.language);
  const grams = new Intl.NumberFormat(LANGUAGE_TAG[shown.language], {
    style: "unit",
    unit: "gram",
    maximumFractionDigits: 0,
  });
  return (
    <>
      {print.editions.map((edition) => (
        <Facts
          key={edition.id}
          items={[
            ...edition.formats.flatMap((format) => [
              { term: shop.factPaper, detail: paperWords(format) },
              { term: shop.factProcess, detail: format.process },
              { term: shop.imageAndSheet, detail: sizeWords(format, shown.language) },
              {
                term: shop.factWeight,
                detail: grams.format(
                  sheetMassGrams(format.sheet.width, format.sheet.height, format.paper.grammage),
                ),
              },
            ]),
            ...(print.pictures.length > 1
              ? [
                  {
                    term: shop.factPortfolio,
                    detail: count(shown.language, shop.portfolioOf, print.pictures.length),
                  },
                ]
              : []),
            { term: shop.factLimit, detail: String(edition.limit) },
            { term: shop.factOutside, detail: outsideWords(edition, shown.language) },
            { term: shop.factTotal, detail: String(total) },
            { term: shop.factSigned, detail: shop.factSignedText },
            {
              term: shop.factFurther,
              detail: edition.furtherEditions === "" ? shop.factFurtherNone : edition.furtherEditions,
            },
          ]}
        />
      ))}
    </>
  );
}

export type DeliveryShown = {
  country: string;
  countryName: string;
  delivery: { amount: number; daysFrom: number; daysTo: number } | null;
  home: { country: string; name: string };
  /** What the next number costs there, where that differs from the listed price. */
  exportPrice: { mark: string; amount: number } | null;
};

/** Delivery and tax to the buyer's country; the country is part of the address, so that the answer can be linked. */
export function DeliveryPart(props: {
  shown: Shown;
  to: DeliveryShown;
  countries: { code: string; name: string }[];
}) {
  const { shown, to } = props;
  const { shop } = messagesOf(shown.language);
  return (
    <div className="flow">
      <Form method="get" className="ask" preventScrollReset>
        <CountrySelect
          id="to"
          name="to"
          label={shop.deliverTo}
          value={to.country}
          countries={props.countries}
        />
        <Press variant="outlined">{shop.deliveryPress}</Press>
      </Form>
      <p role="status">
        {to.delivery === null
          ? fill(shop.deliveryNot, { country: to.countryName })
          : fill(shop.deliveryLine, {
              country: to.countryName,
              price: price(to.delivery.amount, shown),
              from: to.delivery.daysFrom,
              to: to.delivery.daysTo,
            })}
      </p>
      <p>
        {to.exportPrice === null
          ? fill(shop.taxHome, { country: to.home.name })
          : fill(shop.taxExport, {
              country: to.countryName,
              mark: to.exportPrice.mark,
              price: price(to.exportPrice.amount, shown),
            })}
      </p>
      {to.country === to.home.country ? null : <p className="note">{shop.borderCaution}</p>}
    </div>
  );
}

/** Other prints of the same picture, with their editions: the buyer is told of each. */
export function OtherEditions({ prints, shown }: { prints: ShownPrint[]; shown: Shown }) {
  const { shop } = messagesOf(shown.language);
  const lang = segmentOf(shown.language);
  if (prints.length === 0) return <p>{shop.otherEditionsNone}</p>;
  return (
    <ul className="flow">
      {prints.map((print) => (
        <li key={print.id}>
          <Link to={href("/:lang?/prints/:slug", { lang, slug: print.slug })}>{print.title}</Link>
          {print.editions.map((edition) => (
            <p className="note" key={edition.id}>
              {edition.formats.map((f) => `${paperWords(f)}, ${sizeWords(f, shown.language)}`).join("; ")};{" "}
              {count(shown.language, shop.numbered, edition.limit)}; {outsideWords(edition, shown.language)}
            </p>
          ))}
        </li>
      ))}
    </ul>
  );
}
