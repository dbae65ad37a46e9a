import { href, Link } from "react-router";
import { studioPicture } from "~/components/studio/studio-picture";
import { EmptyState } from "~/components/ui/empty-state";
import { Picture } from "~/components/ui/picture";
import type { PrintLine } from "~/domain/prints/studio-prints.server";

export type EditionPrintsProps = { prints: readonly PrintLine[] };

/** Prints to plan an edition of. */
export function EditionPrints({ prints }: EditionPrintsProps) {
  if (prints.length === 0) {
    return (
      <EmptyState action={<Link to={href("/studio/prints/new")}>Make a print</Link>}>
        An edition is of a print: make one first.
      </EmptyState>
    );
  }
  return (
    <ul className="print-choices">
      {prints.map((print) => (
        <li key={print.id}>
          <Picture {...studioPicture(print.picture, "")} sizes="9rem" loading="lazy" />
          <Link to={`${href("/studio/editions/new")}?print=${print.id}`}>{print.title}</Link>
        </li>
      ))}
    </ul>
  );
}
