import { useId } from "react";
import { type LeafCopy, Leaves, type LeavesProps } from "~/components/ui/leaf";

export type NumberSheetRow = {
  fromNumber: number;
  toNumber: number;
  /** Printed as it stands, for example "£280"; empty when this row has no price. */
  price: string;
  /** "numbers 1 to 5" */
  words: string;
  /** "none left", or on the current row "now: 4 left, 1 held". */
  left?: string;
  /** The step of the ladder that is sold from now. */
  isNow: boolean;
  copies: readonly LeafCopy[];
};

export type NumberSheetOutside = {
  /** "Outside the run" */
  label: string;
  /** "proofs, not for sale" */
  words?: string;
  copies: readonly LeafCopy[];
};

export type NumberSheetProps = {
  rows: readonly NumberSheetRow[];
  outside?: readonly NumberSheetOutside[];
  columns: 5 | 10;
  variant: "shop" | "studio";
};

/**
 * An edition as a page of leaves. Its rows are the steps of the price ladder, so that number, place
 * and price are read together. Put it under an h2: its rows are headed by h3.
 */
export function NumberSheet({ rows, outside = [], columns, variant }: NumberSheetProps) {
  return (
    <div className={`number-sheet number-sheet-${variant}`}>
      {rows.map((row) => (
        <Row key={row.fromNumber} row={row} columns={columns} />
      ))}
      {outside.map((group) => (
        <Outside key={group.label} group={group} columns={columns} />
      ))}
    </div>
  );
}

function Row({ row, columns }: { row: NumberSheetRow; columns: LeavesProps["columns"] }) {
  const id = useId();
  return (
    <div className={row.isNow ? "number-row is-now" : "number-row"}>
      <h3 className="step" id={id}>
        {row.price ? <span className="price">{row.price}</span> : null} <span>{row.words}</span>{" "}
        {row.left ? <span className="left">{row.left}</span> : null}
      </h3>
      <Leaves copies={row.copies} columns={columns} labelledBy={id} />
    </div>
  );
}

function Outside({ group, columns }: { group: NumberSheetOutside; columns: LeavesProps["columns"] }) {
  const id = useId();
  return (
    <div className="number-row">
      <h3 className="step" id={id}>
        <span>{group.label}</span> {group.words ? <span>{group.words}</span> : null}
      </h3>
      <Leaves copies={group.copies} columns={columns} labelledBy={id} />
    </div>
  );
}
