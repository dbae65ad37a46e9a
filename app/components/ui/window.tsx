import type { ReactNode } from "react";

export type WindowProps = {
  children: ReactNode;
  /** Id of the heading inside that names the section; without it the window is no landmark. */
  labelledBy?: string;
  id?: string;
  /** `sheet` is the ordinary padding, `slip` that of a narrow column, `none` leaves it to the content. */
  pad?: "sheet" | "slip" | "none";
  as?: "section" | "div" | "aside";
};

const pads = { sheet: "window window-pad", slip: "window slip", none: "window" };

/** A window cut in the mount, with paper behind it. */
export function Window({ children, labelledBy, id, pad = "sheet", as }: WindowProps) {
  const Element = as ?? (labelledBy ? "section" : "div");
  return (
    <Element className={pads[pad]} id={id} aria-labelledby={labelledBy}>
      {children}
    </Element>
  );
}

export type PartProps = {
  /** Id for the heading; give the same to `Window`'s `labelledBy`. */
  headingId: string;
  title: string;
  intro?: ReactNode;
  note?: ReactNode;
  children: ReactNode;
  /** A third, narrow column, such as a legend. */
  beside?: ReactNode;
};

/** A section in two or three columns: its head at the left, its matter at the right. */
export function Part({ headingId, title, intro, note, children, beside }: PartProps) {
  return (
    <div className={beside ? "part part-wide" : "part"}>
      <div className="aside-head">
        <h2 id={headingId}>{title}</h2>
        {intro ? <p>{intro}</p> : null}
        {note ? <p className="note">{note}</p> : null}
      </div>
      <div>{children}</div>
      {beside ? <div>{beside}</div> : null}
    </div>
  );
}
