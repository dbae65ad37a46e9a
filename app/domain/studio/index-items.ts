import { href } from "react-router";
import type { Capability } from "~/domain/people/permissions";
import { can, type Role } from "~/domain/people/permissions";
import type { IndexCounts } from "./index-counts.server";

export type IndexItem = {
  label: string;
  to: string;
  count?: number;
  countWords?: string;
  /** Current only on its own address, not below it. */
  end?: boolean;
};

/** The entries of the studio's index that somebody with these roles may open, with what waits behind them. */
export function indexItems(roles: readonly Role[], counts: IndexCounts): IndexItem[] {
  const all: (IndexItem & { needs: Capability })[] = [
    { needs: "today.see", label: "Today", to: href("/studio"), end: true },
    {
      needs: "rolls.see",
      label: "Rolls",
      to: href("/studio/rolls"),
      count: counts.rolls,
      countWords: "scans to look at",
    },
    { needs: "prints.see", label: "Prints", to: href("/studio/prints") },
    { needs: "editions.see", label: "Editions", to: href("/studio/editions") },
    {
      needs: "printroom.see",
      label: "Print room",
      to: href("/studio/print-room"),
      count: counts.printRoom,
      countWords: "sheets to print",
    },
    {
      needs: "orders.see",
      label: "Orders",
      to: href("/studio/orders"),
      count: counts.orders,
      countWords: "to send or to look at",
    },
    { needs: "papers.see", label: "Papers", to: href("/studio/papers") },
    { needs: "people.see", label: "People", to: href("/studio/people") },
    { needs: "settings.see", label: "Settings", to: href("/studio/settings") },
  ];
  return all
    .filter(({ needs }) => can(roles, needs))
    .map(({ needs: _, count, countWords, ...item }) =>
      count === undefined || count === 0 ? item : { ...item, count, countWords },
    );
}
