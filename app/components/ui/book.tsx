import type { ReactNode } from "react";
import { Money } from "~/components/ui/money";
import { Table, type TableColumn } from "~/components/ui/table";

export type BookLine = {
  /** The line's own number in its book. */
  line: number;
  /** When it was written, as printed: "2 Dec 18:22". */
  written: string;
  /** The same instant, ISO 8601. */
  writtenAt: string;
  /** When it happened, in words, where that differs from when it was written. */
  happened?: string;
  /** "18/25", "AP 2/3"; nothing for a line about the whole edition. */
  copy: string | null;
  /** The word the line is known by: "Sold". */
  verb: string;
  /** What follows it: "to Tobias Wrenfield, order 1181"; text that begins with a stop or comma joins the word. */
  entry: ReactNode;
  /** As printed; nothing where no money moved. */
  money: string | null;
  by: string;
  /** Shortened: "c41e…09". */
  seal: string | null;
};

export type BookProps = {
  /** Newest first. */
  lines: readonly BookLine[];
  /** Names the table: "Ledger of Amberley Locks, low water, 25". */
  caption: string;
  /** Leave a blank line at the top, where the next one will stand. */
  open?: boolean;
};

const columns: readonly TableColumn<BookLine>[] = [
  { key: "no", head: "Line", names: true, says: true, cell: (line) => line.line },
  {
    key: "written",
    head: "Written",
    cell: (line) => (
      <>
        <time className="nowrap" dateTime={line.writtenAt}>
          {line.written}
        </time>
        {line.happened ? <span className="happened">{line.happened}</span> : null}
      </>
    ),
  },
  {
    key: "copy",
    head: "Copy",
    place: "first",
    cell: (line) => (line.copy ? <span className="copy">{line.copy}</span> : null),
  },
  {
    key: "entry",
    head: "Entry",
    place: "main",
    cell: (line) => (
      <>
        <span className="verb">{line.verb}</span>
        {typeof line.entry === "string" && /^[,:;.]/.test(line.entry) ? null : " "}
        {line.entry}
      </>
    ),
  },
  {
    key: "money",
    head: "Money",
    numeric: true,
    place: "sum",
    cell: (line) => (line.money ? <Money>{line.money}</Money> : null),
  },
  { key: "by", head: "By", cell: (line) => <span className="nowrap">{line.by}</span> },
  {
    key: "seal",
    head: "Seal",
    cell: (line) => (line.seal ? <span className="chain fig">{line.seal}</span> : null),
  },
];

/** The ledger as lines in a book. Nothing in it can be pressed. */
export function Book({ lines, caption, open = true }: BookProps) {
  return (
    <div className={open ? "book book-open" : "book"}>
      <Table caption={caption} columns={columns} rows={lines} rowKey={(line) => line.line} variant="dense" />
    </div>
  );
}
