import type { ReactNode } from "react";

export type FieldWords = {
  /** The control's id; its name when left out. */
  id?: string;
  label: ReactNode;
  /** What to know before answering. */
  hint?: ReactNode;
  /** What is wrong with the answer; the same sentence as in the summary. */
  error?: string | string[];
  /** Take the whole width of a form in two columns. */
  span?: boolean;
};

/** The ids and ARIA attributes that tie a control to its hint and its mistake. */
export function ariaFor(id: string, { hint, error }: Pick<FieldWords, "hint" | "error">) {
  const wrong = firstError(error) !== undefined;
  const ids = [hint ? `${id}-hint` : null, wrong ? `${id}-wrong` : null].filter(Boolean).join(" ");
  return { "aria-describedby": ids || undefined, "aria-invalid": wrong || undefined };
}

export function firstError(error: string | string[] | undefined): string | undefined {
  return typeof error === "string" ? error || undefined : error?.[0];
}

/** Label, hint and mistake, in this order, above the control they belong to. */
export function FieldFrame({
  id,
  label,
  hint,
  error,
  span,
  children,
}: Omit<FieldWords, "id"> & { id: string; children: ReactNode }) {
  const wrong = firstError(error);
  return (
    <div className={span ? "field span" : "field"} data-wrong={wrong ? "" : undefined}>
      <label htmlFor={id}>{label}</label>
      {hint ? (
        <span className="hint" id={`${id}-hint`}>
          {hint}
        </span>
      ) : null}
      {wrong ? <Wrong id={`${id}-wrong`}>{wrong}</Wrong> : null}
      {children}
    </div>
  );
}

export type WrongProps = { id?: string; children: ReactNode };

/** A mistake: a drawn cross and the sentence. */
export function Wrong({ id, children }: WrongProps) {
  return (
    <p className="wrong" id={id}>
      <svg viewBox="0 0 14 14" aria-hidden="true" focusable="false">
        <path d="M2 2L12 12M12 2L2 12" />
      </svg>
      <span>{children}</span>
    </p>
  );
}
