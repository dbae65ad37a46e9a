import { href, Link } from "react-router";
import { MoveButtons } from "~/components/studio/move-buttons";
import { studioPicture } from "~/components/studio/studio-picture";
import { EmptyState } from "~/components/ui/empty-state";
import { Picture } from "~/components/ui/picture";
import { Table, type TableColumn } from "~/components/ui/table";
import { PRINT_STATE_WORDS } from "~/domain/prints/publishing";
import type { PrintLine, PrintsAsked } from "~/domain/prints/studio-prints.server";

export type PrintTableProps = { prints: readonly PrintLine[]; asked: PrintsAsked; mayMove: boolean };

/** "2 open, 14 left", "none" */
function editionWords({ editions, left }: PrintLine): string {
  const parts = [
    editions.open > 0 ? `${editions.open} open, ${left} left` : null,
    editions.draft > 0 ? `${editions.draft} draft` : null,
    editions.closed > 0 ? `${editions.closed} closed` : null,
  ].filter((part) => part !== null);
  return parts.length === 0 ? "none" : parts.join("; ");
}

/** Prints with what stands about them; in the studio's own order they can be moved. */
export function PrintTable({ prints, asked, mayMove }: PrintTableProps) {
  const sort = (key: PrintsAsked["sort"]) => {
    const down = asked.sort === key && !asked.down;
    const search = new URLSearchParams();
    if (asked.q !== "") search.set("q", asked.q);
    if (asked.state !== "") search.set("state", asked.state);
    if (asked.series !== "") search.set("series", asked.series);
    search.set("sort", key);
    if (down) search.set("down", "1");
    return {
      to: `${href("/studio/prints")}?${search}`,
      ...(asked.sort === key ? { order: asked.down ? ("descending" as const) : ("ascending" as const) } : {}),
    };
  };
  const inOrder =
    asked.q === "" && asked.state === "" && asked.series === "" && asked.sort === "order" && !asked.down;
  const columns: TableColumn<PrintLine>[] = [
    {
      key: "picture",
      head: "Picture",
      headHidden: true,
      cell: (print) => (
        <div className="thumb">
          <Picture {...studioPicture(print.picture, "")} sizes="4.5rem" loading="lazy" />
        </div>
      ),
    },
    {
      key: "title",
      head: "Title",
      names: true,
      sort: sort("title"),
      cell: (print) => <Link to={href("/studio/prints/:printId", { printId: print.id })}>{print.title}</Link>,
    },
    { key: "year", head: "Year", numeric: true, sort: sort("year"), cell: (print) => print.year },
    { key: "series", head: "Series", cell: (print) => print.series },
    { key: "state", head: "State", sort: sort("state"), cell: (print) => PRINT_STATE_WORDS[print.state] },
    { key: "editions", head: "Editions", cell: editionWords },
    {
      key: "pictures",
      head: "Pictures",
      numeric: true,
      cell: (print) => (print.pictures === 1 ? "1" : `${print.pictures}, portfolio`),
    },
  ];
  if (mayMove && inOrder) {
    columns.push({
      key: "move",
      head: "Order",
      headHidden: true,
      cell: (print) => (
        <MoveButtons
          of={print.title}
          fields={{ intent: "move", id: print.id }}
          first={print.id === prints[0]?.id}
          last={print.id === prints.at(-1)?.id}
        />
      ),
    });
  }
  return (
    <Table
      caption="Prints"
      rows={prints}
      rowKey={(print) => print.id}
      columns={columns}
      empty={
        <EmptyState action={<Link to={href("/studio/prints")}>Show all prints</Link>}>
          A print is made of a frame whose scan is in; those that answer to this will stand here.
        </EmptyState>
      }
    />
  );
}
