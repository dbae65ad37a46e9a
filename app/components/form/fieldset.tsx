import type { ReactNode } from "react";

export type FieldsetProps = {
  legend: ReactNode;
  hint?: ReactNode;
  /** Two columns where there is room; a field with `span` takes both. */
  columns?: 1 | 2;
  children: ReactNode;
};

/** Fields that belong together. */
export function Fieldset({ legend, hint, columns = 1, children }: FieldsetProps) {
  return (
    <fieldset className="fieldset">
      <legend>{legend}</legend>
      {hint ? <p className="hint">{hint}</p> : null}
      <div className={columns === 2 ? "fields fields-2" : "fields"}>{children}</div>
    </fieldset>
  );
}
