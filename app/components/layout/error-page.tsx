import type { ReactNode } from "react";
import { PressLink } from "~/components/ui/press";

export type ErrorPageProps = {
  /** In plain words: what is the matter. */
  title: string;
  text: ReactNode;
  /** The next steps; the first is filled. */
  actions: readonly { label: string; to: string }[];
  /** "Quote this if you write to us: 01H…" */
  reference?: string;
};

/** What is shown in the place of a page that cannot be: an empty mount, and the way on. */
export function ErrorPage({ title, text, actions, reference }: ErrorPageProps) {
  return (
    <div className="error-sheet">
      <svg viewBox="0 0 120 150" aria-hidden="true" focusable="false">
        <path className="lf-sheet lf-dash" d="M16 16H104V134H16Z" />
        <path className="lf-stroke" d="M30 30H90V98H30ZM30 112H44M52 112H70M78 112H90" />
      </svg>
      <div className="flow">
        <h1>{title}</h1>
        <div className="flow">{text}</div>
        {actions.length > 0 ? (
          <p className="acts">
            {actions.map((action, at) => (
              <PressLink key={action.to} variant={at === 0 ? "filled" : "outlined"} to={action.to}>
                {action.label}
              </PressLink>
            ))}
          </p>
        ) : null}
        {reference ? <p className="note fig">{reference}</p> : null}
      </div>
    </div>
  );
}
