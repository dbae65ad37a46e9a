import type { ReactNode } from "react";
import { Link } from "react-router";
import { ForeEdge, type ForeEdgeProps } from "~/components/ui/fore-edge";
import { Money } from "~/components/ui/money";
import { Picture, type PictureProps } from "~/components/ui/picture";
import { ProgressBar, type ProgressBarProps } from "~/components/ui/progress-bar";

export type MoneyLineProps = { items: readonly { term: string; sum: string; large?: boolean }[] };

/** Sums and what they are of, one of them large. */
export function MoneyLine({ items }: MoneyLineProps) {
  return (
    <dl className="money-line">
      {items.map((item) => (
        <div key={item.term}>
          <dt>{item.term}</dt>
          <dd>
            <Money large={item.large}>{item.sum}</Money>
          </dd>
        </div>
      ))}
    </dl>
  );
}

export type NearlyGoneProps = {
  items: readonly { key: string; title: string; to: string; left: string; foreEdge: ForeEdgeProps }[];
};

/** Editions of which little is left. */
export function NearlyGone({ items }: NearlyGoneProps) {
  return (
    <ul className="ends">
      {items.map((item) => (
        <li key={item.key}>
          <Link className="title-it" to={item.to}>
            {item.title}
          </Link>
          <span className="fig">{item.left}</span>
          <ForeEdge {...item.foreEdge} />
        </li>
      ))}
    </ul>
  );
}

export type NextReleaseProps = {
  picture: PictureProps;
  title: string;
  to: string;
  /** "25 sheets, Friday 11 December, 18:00" */
  words: string;
  /** "213 people asked to be told" */
  more?: string;
};

/** The release that comes next. */
export function NextRelease({ picture, title, to, words, more }: NextReleaseProps) {
  return (
    <div className="next-one">
      <Picture sizes="6.5rem" {...picture} />
      <p>
        <Link className="title-it" to={to}>
          {title}
        </Link>
        <br />
        {words}
        {more ? (
          <>
            <br />
            <span className="quiet fig">{more}</span>
          </>
        ) : null}
      </p>
    </div>
  );
}

export type WholeBarProps = {
  /** "Five of ten scans are in, two are arriving." */
  title: string;
  /** "1.4 of 2.4 GB, about 4 minutes left." */
  words: string;
  progress: ProgressBarProps;
  acts?: ReactNode;
};

/** How far a transfer of many files has come. */
export function WholeBar({ title, words, progress, acts }: WholeBarProps) {
  return (
    <section className="whole-bar" aria-label={progress.label}>
      <p>
        <b>{title}</b>
        <br />
        <span className="quiet fig">{words}</span>
      </p>
      <ProgressBar {...progress} />
      {acts ? <div className="acts">{acts}</div> : null}
    </section>
  );
}
