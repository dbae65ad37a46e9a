import type { ReactNode } from "react";
import { CopyNumber, Money } from "~/components/ui/money";
import { Picture, type PictureProps } from "~/components/ui/picture";

export type SlipLine = {
  key: string;
  picture: Omit<PictureProps, "alt">;
  /** "12/15"; nothing while no number is held. */
  number?: string;
  title: ReactNode;
  /** "smooth matt cotton, sheet 420 × 360 mm" */
  words: ReactNode;
  sum: string;
  /** A form that lets the line go. */
  act?: ReactNode;
};

export type SlipSum = {
  label: string;
  sum: string;
  /** `quiet` is part of another line, `total` closes the slip. */
  kind?: "quiet" | "total";
};

export type OrderSlipProps = { lines: readonly SlipLine[]; sums: readonly SlipSum[] };

/** What is being bought, line by line, and what it comes to. */
export function OrderSlip({ lines, sums }: OrderSlipProps) {
  return (
    <>
      <ul className="slip-lines">
        {lines.map((line) => (
          <li className="slip-line" key={line.key}>
            <span>
              <Picture sizes="5.25rem" {...line.picture} alt="" />
            </span>
            <span>{line.number ? <CopyNumber>{line.number}</CopyNumber> : null}</span>
            <span className="sum">
              <Money>{line.sum}</Money>
            </span>
            <span className="title-it">{line.title}</span>
            <div className="note">
              {line.words}
              {line.act}
            </div>
          </li>
        ))}
      </ul>
      <Sums sums={sums} />
    </>
  );
}

export type SumsProps = { sums: readonly SlipSum[] };

/** Sums under one another, the last one large. */
export function Sums({ sums }: SumsProps) {
  return (
    <dl className="sums">
      {sums.map((sum) => (
        <div key={sum.label} className={sum.kind}>
          <dt>{sum.label}</dt>
          <dd>{sum.sum}</dd>
        </div>
      ))}
    </dl>
  );
}
