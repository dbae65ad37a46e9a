import { href, Link } from "react-router";
import { CheckForm } from "~/components/shop/check-form";
import { outsideWords } from "~/components/shop/edition-view";
import { Facts } from "~/components/ui/facts";
import { MountedPrint } from "~/components/ui/mounted-print";
import { Notice } from "~/components/ui/notice";
import { Part, Window } from "~/components/ui/window";
import { formatPartialDate } from "~/domain/dates";
import type { CheckedCopy } from "~/domain/orders/check-copy.server";
import { LANGUAGE_TAG, segmentOf } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";

type Size = NonNullable<CheckedCopy["format"]>;

/** What the book says of one copy, for whoever holds the print. */
export function CheckedCopySheet({ copy }: { copy: CheckedCopy }) {
  const { shop, checkout } = useMessages();
  const words = checkout.check;
  const language = useLanguage();
  const lang = segmentOf(language);
  const { print } = copy;
  const size = ({ paper, process, image, sheet }: Size) =>
    `${paper}, ${process}; ${fill(shop.image, { size: `${image.width} × ${image.height}` })}, ${fill(shop.sheet, { size: `${sheet.width} × ${sheet.height}` })}`;
  const title = `${shop.checkTitle}: ${copy.mark} ${print.title}`;
  const [picture] = copy.pictures;
  return (
    <>
      <title>{title}</title>
      <meta name="robots" content="noindex" />
      <div className="counter">
        <MountedPrint
          picture={{
            proofs: picture?.proofs ?? [],
            alt: picture?.description ?? "",
            sizes: "(min-width: 62rem) 52rem, 92vw",
            ...(copy.format === null ? {} : copy.format.image),
          }}
          marginLine={{
            number: copy.mark,
            title: print.title,
            signature: `${copy.signature} ${print.year ?? ""}`.trim(),
          }}
        />
        <Window as="aside" pad="slip">
          <div className="flow">
            <h1>
              {copy.mark} {print.title}
            </h1>
            <p className="lead">{shop.checkFound}.</p>
            <p className="fig">{copy.code}</p>
            <Notice kind="note" title={words.caution}>
              <p>{shop.checkCaution}</p>
            </Notice>
          </div>
        </Window>
      </div>
      <Window labelledBy="copy">
        <Part headingId="copy" title={shop.checkCopy}>
          <Facts
            items={[
              {
                term: words.print,
                detail: print.published ? (
                  <Link to={href("/:lang?/prints/:slug", { lang, slug: print.slug })}>{print.title}</Link>
                ) : (
                  `${print.title} (${shop.unpublished})`
                ),
              },
              { term: shop.factLimit, detail: String(copy.limit) },
              {
                term: words.outside,
                detail: outsideWords({ proofsOutside: copy.proofsOutside }, language),
              },
              ...(copy.format === null ? [] : [{ term: words.format, detail: size(copy.format) }]),
              ...(copy.otherFormats.length === 0
                ? []
                : [{ term: words.otherFormats, detail: copy.otherFormats.map(size).join("; ") }]),
              { term: words.stands, detail: words.placement[copy.placement] },
            ]}
          />
        </Part>
      </Window>
      <Window labelledBy="book">
        <Part headingId="book" title={shop.checkHistory} intro={words.historyIntro}>
          <BookLines copy={copy} />
        </Part>
      </Window>
      <Window>
        <div className="flow">
          <h2>{words.again}</h2>
          <CheckForm typed="" />
        </div>
      </Window>
    </>
  );
}

function BookLines({ copy }: { copy: CheckedCopy }) {
  const words = useMessages().checkout.check;
  const languageTag = LANGUAGE_TAG[useLanguage()];
  return (
    <ul className="order-history">
      {copy.history.map((entry) => {
        const sentence = sentenceOf(words.history, entry.kind);
        if (sentence === null) return null;
        return (
          <li key={entry.line}>
            <span className="quiet">
              {formatPartialDate(entry.when, { languageTag, zone: copy.zone, unknown: words.unknownDay })}:
            </span>{" "}
            {fill(sentence, { sheet: entry.sheet ?? 1 })}
          </li>
        );
      })}
    </ul>
  );
}

/** What is not in the table is of no concern to the public: setting aside, correcting, packing. */
function sentenceOf(table: Record<string, string>, kind: string): string | null {
  return Object.hasOwn(table, kind) ? (table[kind] ?? null) : null;
}
