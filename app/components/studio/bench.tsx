import { type ReactNode, useId } from "react";

export type BenchHeadProps = {
  title: ReactNode;
  /** One or two sentences under it. */
  says?: ReactNode;
  /** Presses; one of them filled at most. */
  acts?: ReactNode;
};

/** The head of a studio page. */
export function BenchHead({ title, says, acts }: BenchHeadProps) {
  return (
    <div className="bench-head">
      <div>
        <h1>{title}</h1>
        {says ? <p className="says">{says}</p> : null}
      </div>
      {acts ? <div className="acts">{acts}</div> : null}
    </div>
  );
}

export type BlockProps = {
  title: string;
  /** At the right of the head: a count, or a link. */
  aside?: ReactNode;
  id?: string;
  children: ReactNode;
};

/** A section of a studio page under a ruled head. */
export function Block({ title, aside, id, children }: BlockProps) {
  const given = useId();
  const headingId = id ?? given;
  return (
    <section className="block" aria-labelledby={headingId}>
      <div className="block-head">
        <h2 id={headingId}>{title}</h2>
        {aside ? <div className="note">{aside}</div> : null}
      </div>
      {children}
    </section>
  );
}
