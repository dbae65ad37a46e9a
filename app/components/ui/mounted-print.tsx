import type { ReactNode } from "react";
import { Link } from "react-router";
import { MarginLine, type MarginLineProps } from "~/components/ui/margin-line";
import { Picture, type PictureProps } from "~/components/ui/picture";

export type MountedPrintProps = {
  picture: PictureProps;
  marginLine: MarginLineProps;
  /** Where a click on the picture leads. */
  to?: string;
  /** `window` cuts it into the board; `loose` lays the sheet on the paper, as in the studio. */
  setting?: "window" | "loose";
  children?: ReactNode;
};

/** A print in its mount with its margin line. */
export function MountedPrint({ picture, marginLine, to, setting = "window", children }: MountedPrintProps) {
  const drawn = <Picture {...picture} />;
  return (
    <figure className={setting === "window" ? "window print-hung" : "sheet-loose"}>
      <div className="sheet">
        {to ? <Link to={to}>{drawn}</Link> : drawn}
        <MarginLine {...marginLine} />
      </div>
      {children}
    </figure>
  );
}
