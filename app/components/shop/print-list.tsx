import { Link } from "react-router";
import { ForeEdge, type ForeEdgeProps } from "~/components/ui/fore-edge";
import { Picture, type PictureProps } from "~/components/ui/picture";

export type ListedPrint = {
  key: string;
  to: string;
  picture: Omit<PictureProps, "alt">;
  title: string;
  /** "smooth matt cotton, image 300 × 300 mm" */
  words: string;
  foreEdge?: ForeEdgeProps;
  /** "8 left, next is 18/25" */
  left: string;
  /** "£320", or "from £320" */
  price: string;
};

export type PrintListProps = { prints: readonly ListedPrint[] };

/** Prints as lines of a list: small picture, title, paper, what is left, price. */
export function PrintList({ prints }: PrintListProps) {
  return (
    <ul className="list-of-prints">
      {prints.map((print) => (
        <li key={print.key}>
          <Picture loading="lazy" sizes="5.5rem" {...print.picture} alt="" />
          <Link className="name" to={print.to}>
            {print.title}
          </Link>
          <span className="words">{print.words}</span>
          <span className="stands">
            {print.foreEdge ? <ForeEdge {...print.foreEdge} /> : null}
            <span className="note">{print.left}</span>
          </span>
          <span className="from">{print.price}</span>
        </li>
      ))}
    </ul>
  );
}
