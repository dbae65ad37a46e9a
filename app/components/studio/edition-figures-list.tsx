import type { ReactNode } from "react";
import { Facts } from "~/components/ui/facts";
import { Notice } from "~/components/ui/notice";
import type { EditionFigures, FormatFigures } from "~/domain/editions/edition-figures";
import { currencyCode, formatMoney } from "~/platform/money";

export type FormatFiguresListProps = {
  figures: FormatFigures;
  sheetsACopy: number;
  currency: string;
};

const length = (mm: number) => mm.toLocaleString("en-GB", { maximumFractionDigits: 1 });

/** What one format comes to, as far as it is known. */
export function FormatFiguresList({ figures, sheetsACopy, currency }: FormatFiguresListProps) {
  const { resolution, distance, margins, grams, heightForWidth, sellOut, ladderProblems } = figures;
  return (
    <>
      <Facts
        variant="leaders"
        items={[
          {
            term: "Resolution",
            detail:
              resolution === null
                ? "give an image size"
                : `${resolution.ppi.toLocaleString("en-GB")} ppi, ${resolution.word}`,
          },
          {
            term: "Looked at from",
            detail:
              distance === null
                ? "give an image size"
                : `${(distance.nearest / 1000).toFixed(1)} to ${(distance.furthest / 1000).toFixed(1)} m`,
          },
          {
            term: "Margins",
            detail:
              margins === null
                ? "give image and sheet"
                : figures.fits
                  ? `${length(margins.left)} mm at the sides, ${length(margins.top)} mm above and below`
                  : "the image is larger than its sheet",
          },
          {
            term: sheetsACopy > 1 ? "One sheet weighs" : "The sheet weighs",
            detail:
              grams === null
                ? "choose paper and sheet"
                : `${length(grams)} g${sheetsACopy > 1 ? `, ${sheetsACopy} sheets ${length(grams * sheetsACopy)} g` : ""}`,
          },
          {
            term: "Sold out, it brings",
            detail:
              sellOut === null
                ? "give every number a price"
                : formatMoney({ amount: sellOut, currency: currencyCode(currency) }, "en-GB"),
          },
        ]}
      />
      {heightForWidth === null ? null : (
        <p className="hint">
          The picture has another shape: at this width it is {heightForWidth} mm high. As it stands, part of
          it would be cut away.
        </p>
      )}
      {ladderProblems.length === 0 ? null : <p className="hint">{ladderProblems.join(" ")}</p>}
    </>
  );
}

export type CapStandingProps = { figures: Pick<EditionFigures, "cap" | "copies" | "proofsUsual"> };

/** All copies of the picture against the cap, with its warning; and how many proofs are usual. */
export function CapStanding({ figures: { cap, copies, proofsUsual } }: CapStandingProps) {
  const others = cap === null || copies === null ? 0 : cap.total - copies;
  return (
    <>
      <Facts
        variant="leaders"
        items={[
          {
            term: "Copies of this edition",
            detail: copies === null ? "give the limit" : `${copies}, proofs counted`,
          },
          {
            term: "Copies of the picture",
            detail: cap === null ? "give the limit" : `${cap.total} of ${cap.cap}${othersWords(others)}`,
          },
          ...(proofsUsual === null
            ? []
            : [
                {
                  term: "Artist's proofs, a tenth",
                  detail:
                    proofsUsual.floor === proofsUsual.ceil
                      ? `${proofsUsual.floor}`
                      : `${proofsUsual.floor} or ${proofsUsual.ceil}`,
                },
              ]),
        ]}
      />
      {cap?.warning ? (
        <Notice
          kind="attention"
          level={3}
          title={cap.state === "at_cap" ? "No copy more within the cap" : "Past the cap"}
        >
          <p>{cap.warning}</p>
        </Notice>
      ) : cap ? (
        <p className="hint">
          {cap.room === 1 ? "One copy more stays" : `${cap.room} copies more stay`} within the {cap.cap} that
          tax law treats as works of art: all sizes together, proofs counted. Rules differ by place and
          change: ask your accountant.
        </p>
      ) : null}
    </>
  );
}

function othersWords(others: number): ReactNode {
  return others > 0 ? `, ${others} of them in other editions` : "";
}
