import { href, Link } from "react-router";
import { studioPicture } from "~/components/studio/studio-picture";
import { EmptyState } from "~/components/ui/empty-state";
import { ForeEdge } from "~/components/ui/fore-edge";
import { Picture } from "~/components/ui/picture";
import { Table, type TableColumn } from "~/components/ui/table";
import { formatInstant } from "~/domain/dates";
import type { EditionLine, EditionsAsked } from "~/domain/editions/edition-page.server";
import { type CopyPlacement, PLACEMENT_WORDS, PLACEMENTS } from "~/domain/editions/transitions";

export type EditionTableProps = { editions: readonly EditionLine[]; asked: EditionsAsked; zone: string };

/** "25 numbers: 6 sold, 1 given, 18 in hand" */
export function placementWords(copies: readonly { placement: CopyPlacement }[]): string {
  const counts = PLACEMENTS.map((placement) => {
    const n = copies.filter((copy) => copy.placement === placement).length;
    return n === 0 ? null : `${n} ${PLACEMENT_WORDS[placement]}`;
  }).filter((part) => part !== null);
  return `${copies.length} ${copies.length === 1 ? "number" : "numbers"}: ${counts.join(", ")}`;
}

function stateWords(edition: EditionLine): string {
  if (edition.state !== "open") return edition.state;
  if (!edition.released) return "to be released";
  return edition.left === 0 ? "open, none left" : "open";
}

/** Editions with what is left of each, drawn as the edge of the stack. */
export function EditionTable({ editions, asked, zone }: EditionTableProps) {
  const sort = (key: EditionsAsked["sort"]) => {
    const search = new URLSearchParams();
    if (asked.q !== "") search.set("q", asked.q);
    if (asked.state !== "") search.set("state", asked.state);
    search.set("sort", key);
    if (asked.sort === key && !asked.down) search.set("down", "1");
    return {
      to: `${href("/studio/editions")}?${search}`,
      ...(asked.sort === key ? { order: asked.down ? ("descending" as const) : ("ascending" as const) } : {}),
    };
  };
  const columns: TableColumn<EditionLine>[] = [
    {
      key: "picture",
      head: "Picture",
      headHidden: true,
      cell: (edition) => (
        <div className="thumb">
          <Picture {...studioPicture(edition.picture, "")} sizes="4.5rem" loading="lazy" />
        </div>
      ),
    },
    {
      key: "title",
      head: "Print",
      names: true,
      sort: sort("title"),
      cell: (edition) => (
        <Link to={href("/studio/editions/:editionId", { editionId: edition.id })}>{edition.title}</Link>
      ),
    },
    {
      key: "formats",
      head: "Format",
      cell: (edition) =>
        edition.formats.length === 0 ? (
          <span className="quiet">none yet</span>
        ) : (
          edition.formats.map((format) => (
            <span className="line" key={format}>
              {format}
            </span>
          ))
        ),
    },
    {
      key: "limit",
      head: "Limit",
      numeric: true,
      sort: sort("limit"),
      cell: (edition) => (edition.outside > 0 ? `${edition.limit} + ${edition.outside}` : edition.limit),
    },
    {
      key: "left",
      head: "Left",
      sort: sort("left"),
      cell: (edition) =>
        edition.copies.length === 0 ? null : (
          <span className="left-cell">
            <span className="fig">{edition.left}</span>
            <ForeEdge copies={edition.copies} label={placementWords(edition.copies)} />
          </span>
        ),
    },
    { key: "state", head: "State", cell: stateWords },
    {
      key: "release",
      head: "Release",
      sort: sort("release"),
      cell: (edition) =>
        edition.releaseAt === null ? (
          <span className="quiet">when opened</span>
        ) : (
          formatInstant(edition.releaseAt, zone, "en-GB")
        ),
    },
  ];
  return (
    <Table
      caption="Editions"
      rows={editions}
      rowKey={(edition) => edition.id}
      columns={columns}
      empty={
        <EmptyState action={<Link to={href("/studio/editions")}>Show all editions</Link>}>
          Editions that answer to this will stand here once they are planned.
        </EmptyState>
      }
    />
  );
}
