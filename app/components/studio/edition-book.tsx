import type { ReactNode } from "react";
import { href, Link } from "react-router";
import { Block } from "~/components/studio/bench";
import { editionFacts } from "~/components/studio/edition-draft";
import { placementWords } from "~/components/studio/edition-table";
import {
  bookLine,
  formatWords,
  LEGEND,
  nextNumber,
  outsideRows,
  sheetRows,
  sumExact,
} from "~/components/studio/edition-view";
import { studioPicture } from "~/components/studio/studio-picture";
import { Book } from "~/components/ui/book";
import { Facts } from "~/components/ui/facts";
import { LeafLegend } from "~/components/ui/leaf";
import { MountedPrint } from "~/components/ui/mounted-print";
import { NumberSheet } from "~/components/ui/number-sheet";
import { Pager } from "~/components/ui/pager";
import { CAP_OF_COPIES } from "~/domain/editions/cap";
import type { EditionPage, LedgerPage } from "~/domain/editions/edition-page.server";

export type EditionTopProps = { edition: EditionPage; children: ReactNode };

/** The number sheet, below it what can be done (`children`), beside it the print and how the edition stands. */
export function EditionTop({ edition, children }: EditionTopProps) {
  const next = nextNumber(edition);
  const numbered = edition.copies.filter((copy) => copy.run === "numbered");
  const { print } = edition;
  return (
    <div className="edition-top">
      <section aria-labelledby="number-sheet">
        <h2 id="number-sheet" className="vh">
          Number sheet
        </h2>
        <NumberSheet variant="studio" columns={10} rows={sheetRows(edition)} outside={outsideRows(edition)} />
        <details className="act-fold">
          <summary>What the leaves say</summary>
          <LeafLegend placements={LEGEND} />
        </details>
        {children}
      </section>
      <section aria-labelledby="standing">
        <h2 id="standing" className="vh">
          Standing
        </h2>
        <MountedPrint
          setting="loose"
          to={href("/studio/prints/:printId", { printId: print.id })}
          picture={{ ...studioPicture(print.picture), sizes: "21rem" }}
          marginLine={{
            number: next === null ? null : `${next}/${edition.limit}`,
            title: print.title,
            signature: print.year === null ? edition.signature : `${edition.signature} ${print.year}`,
          }}
        />
        <Facts
          items={[
            { term: "Copies", detail: placementWords(numbered) },
            ...editionFacts(edition),
            { term: "Limit", detail: limitWords(edition) },
            {
              term: "Copies of the picture",
              detail: `${edition.copiesOfPicture} of the ${CAP_OF_COPIES} that tax law treats as works of art${
                edition.copiesOfPicture > CAP_OF_COPIES ? ": past it" : ""
              }`,
            },
            ...edition.formats.map((format, f) => ({
              term: edition.formats.length > 1 ? `Format ${f + 1}` : "Format",
              detail: formatWords(format),
            })),
            ...edition.formats.map((format, f) => ({
              term: edition.formats.length > 1 ? `If sold out, format ${f + 1}` : "If sold out",
              detail: sumExact(format.sellOut, edition.currency),
            })),
          ]}
        />
      </section>
    </div>
  );
}

function limitWords(edition: EditionPage): string {
  if (edition.state === "closed") return `${edition.limit}, closed early: the denominator stays as signed`;
  if (edition.lowestLimit === null) return `${edition.limit}, for good: a number has been issued`;
  return edition.lowestLimit < edition.limit
    ? `${edition.limit}; until a number is issued it can fall to ${edition.lowestLimit}`
    : `${edition.limit}`;
}

export type EditionLedgerProps = { edition: EditionPage; ledger: LedgerPage };

/** The ledger, newest line first, fifty lines a page. */
export function EditionLedger({ edition, ledger }: EditionLedgerProps) {
  const { lines, page, pages, total } = ledger;
  const at = (to: number) =>
    `${href("/studio/editions/:editionId", { editionId: edition.id })}?page=${to}#ledger`;
  const [newest, oldest] = [lines[0]?.line ?? 0, lines.at(-1)?.line ?? 0];
  return (
    <Block title="Ledger" id="ledger" aside={total === 1 ? "1 line" : `${total} lines`}>
      <p className="quiet">
        Lines are added at the top and never changed. To put one right, write another that names it. Times are{" "}
        {edition.zoneLabel}.
      </p>
      <Book
        caption={`Ledger of ${edition.print.title}, edition of ${edition.limit}`}
        lines={lines.map((line) => bookLine(line, edition.zone))}
        open={page === 1}
      />
      {pages > 1 ? (
        <Pager
          label="Pages of the ledger"
          words={`Lines ${newest} to ${oldest} of ${total}`}
          {...(page > 1 ? { previous: { label: "Newer lines", to: at(page - 1) } } : {})}
          {...(page < pages ? { next: { label: "Older lines", to: at(page + 1) } } : {})}
        />
      ) : null}
      <p className="quiet">
        <Link to={href("/studio/editions")}>All editions</Link>
      </p>
    </Block>
  );
}
