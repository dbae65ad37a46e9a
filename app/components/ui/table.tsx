import type { ReactNode } from "react";
import { Link } from "react-router";

export type TableColumn<Row> = {
  key: string;
  /** The heading; it is also the label beside the value where the table folds. */
  head: string;
  /** A heading only for those who hear it, as over a column of links. */
  headHidden?: boolean;
  cell: (row: Row) => ReactNode;
  /** Figures: to the right, never broken. */
  numeric?: boolean;
  /** The cell that names its row; one column has it. */
  names?: boolean;
  /** Where the cell goes in a dense row on a narrow page; `after` when left out. */
  place?: "first" | "main" | "sum" | "after";
  /** In a dense row, say the heading before the value. */
  says?: boolean;
  /** Makes the heading a link that sorts; `order` when the table is sorted by it now. */
  sort?: { to: string; order?: "ascending" | "descending" };
};

export type TableProps<Row> = {
  /** Names the table. Hidden from sight with `captionHidden`. */
  caption: string;
  captionHidden?: boolean;
  columns: readonly TableColumn<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string | number;
  /** On a narrow page: `folds` puts labels beside values, `dense` small facts under a line. */
  variant?: "folds" | "dense";
  /** Shown in place of the rows when there are none. */
  empty?: ReactNode;
  /** Cells of a closing row, by column key. */
  foot?: Partial<Record<string, ReactNode>>;
};

/** A ruled table: hairlines, figures right, words left. */
export function Table<Row>({
  caption,
  captionHidden = true,
  columns,
  rows,
  rowKey,
  variant = "folds",
  empty,
  foot,
}: TableProps<Row>) {
  if (rows.length === 0 && empty) return <>{empty}</>;
  return (
    // biome-ignore lint/a11y/noRedundantRoles: a table whose parts are folded with display:block loses its roles without them
    <table className={variant === "dense" ? "table folds dense" : "table folds"} role="table">
      <caption className={captionHidden ? "vh" : undefined}>{caption}</caption>
      {/* biome-ignore lint/a11y/noRedundantRoles: as above */}
      <thead role="rowgroup">
        {/* biome-ignore lint/a11y/noRedundantRoles: as above */}
        <tr role="row">
          {columns.map((column) => (
            <HeadCell key={column.key} column={column} />
          ))}
        </tr>
      </thead>
      {/* biome-ignore lint/a11y/noRedundantRoles: as above */}
      <tbody role="rowgroup">
        {rows.map((row) => (
          // biome-ignore lint/a11y/noRedundantRoles: as above
          <tr role="row" key={rowKey(row)}>
            {columns.map((column) => (
              <BodyCell key={column.key} column={column} content={column.cell(row)} />
            ))}
          </tr>
        ))}
      </tbody>
      {foot ? (
        // biome-ignore lint/a11y/noRedundantRoles: as above
        <tfoot role="rowgroup">
          {/* biome-ignore lint/a11y/noRedundantRoles: as above */}
          <tr role="row">
            {columns.map((column) => (
              <BodyCell key={column.key} column={{ ...column, names: false }} content={foot[column.key]} />
            ))}
          </tr>
        </tfoot>
      ) : null}
    </table>
  );
}

function HeadCell<Row>({ column }: { column: TableColumn<Row> }) {
  const { head, sort } = column;
  return (
    <th
      // biome-ignore lint/a11y/noRedundantRoles: see Table
      role="columnheader"
      scope="col"
      className={column.numeric ? "num" : undefined}
      aria-sort={sort?.order}
    >
      {sort ? (
        <Link className="sorts" to={sort.to} data-order={sort.order} preventScrollReset>
          {head}
          <svg width="9" height="12" viewBox="0 0 9 12" aria-hidden="true" focusable="false">
            <path className="up" d="M0.5 5L4.5 0.5L8.5 5Z" />
            <path className="down" d="M0.5 7L4.5 11.5L8.5 7Z" />
          </svg>
        </Link>
      ) : column.headHidden ? (
        <span className="vh">{head}</span>
      ) : (
        head
      )}
    </th>
  );
}

function BodyCell<Row>({ column, content }: { column: TableColumn<Row>; content: ReactNode }) {
  const shared = {
    className: [column.place ?? "after", column.numeric && "num", column.says && "says"]
      .filter(Boolean)
      .join(" "),
    "data-label": column.headHidden ? undefined : column.head,
    children: isBlank(content) ? null : <div className="cell">{content}</div>,
  };
  return column.names ? (
    // biome-ignore lint/a11y/noRedundantRoles: see Table
    <th role="rowheader" scope="row" {...shared} />
  ) : (
    // biome-ignore lint/a11y/noRedundantRoles: see Table
    <td role="cell" {...shared} />
  );
}

/** Nothing to be seen: where the table folds, the whole line is left out. */
function isBlank(content: ReactNode): boolean {
  return content === null || content === undefined || content === false || content === "";
}
