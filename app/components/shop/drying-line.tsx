import { Link } from "react-router";
import { Picture, type PictureProps } from "~/components/ui/picture";

export type DryingPrint = {
  key: string;
  to: string;
  picture: Omit<PictureProps, "alt">;
  title: string;
  /** "9 of 25 left", "opens 11 December" */
  words: string;
};

export type DryingLineProps = {
  prints: readonly DryingPrint[];
  /** How many hang on one wire where there is room; 5 when left out. */
  perLine?: number;
};

function hangs({ proofs, width, height }: DryingPrint["picture"]): string {
  const shape = proofs[0] ?? { width: width ?? 5, height: height ?? 4 };
  const ratio = shape.width / shape.height;
  if (ratio < 0.9) return "hangs-tall";
  if (ratio < 1.1) return "hangs-square";
  return ratio < 1.42 ? "hangs-wide" : "hangs-long";
}

/** A series as prints pegged to the drying line. */
export function DryingLine({ prints, perLine = 5 }: DryingLineProps) {
  const lines = Array.from({ length: Math.ceil(prints.length / perLine) }, (_, at) =>
    prints.slice(at * perLine, (at + 1) * perLine),
  );
  return (
    <div className="line-clip">
      {lines.map((line) => (
        <ul className="line-of-prints" key={line[0]?.key}>
          {line.map((print) => (
            <li key={print.key} className={hangs(print.picture)}>
              <span className="wire" aria-hidden="true" />
              <Link to={print.to}>
                <Picture loading="lazy" sizes="(min-width: 56rem) 18rem, 50vw" {...print.picture} alt="" />
                <span className="name">{print.title}</span> <span className="left">{print.words}</span>
              </Link>
            </li>
          ))}
        </ul>
      ))}
    </div>
  );
}
