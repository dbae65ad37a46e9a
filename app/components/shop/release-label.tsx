import type { ReactNode } from "react";
import { type Fact, Facts } from "~/components/ui/facts";

export type ReleaseLabelProps = {
  /** "Release" */
  kind: string;
  /** "31" */
  number?: string;
  title: string;
  titleId?: string;
  /** 1 where it heads the page. */
  level?: 1 | 2;
  facts: readonly Fact[];
  /** A form that asks to be told, or a link to the print. */
  children?: ReactNode;
};

/** A release as the label on a box of paper. */
export function ReleaseLabel({
  kind,
  number,
  title,
  titleId,
  level = 1,
  facts,
  children,
}: ReleaseLabelProps) {
  const Heading = `h${level}` as const;
  return (
    <div className="box-label">
      <div>
        <p className="top">
          <span>{kind}</span> {number ? <span>{number}</span> : null}
        </p>
        <Heading id={titleId}>{title}</Heading>
        <Facts items={facts} variant="leaders" />
        {children}
      </div>
    </div>
  );
}
