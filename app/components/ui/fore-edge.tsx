import { type LeafPlacement, type LeafRun, runMark } from "~/components/ui/leaf";

export type ForeEdgeCopy = { number: number; run?: LeafRun; placement: LeafPlacement; next?: boolean };

export type ForeEdgeProps = {
  /** In the order of their numbers. */
  copies: readonly ForeEdgeCopy[];
  /** The same in words: "15 numbers: 6 sold, 1 given, 2 held, 6 in hand". */
  label: string;
};

/** Bars in a row; a longer edition is cut into as many even rows as it takes. */
const longestRow = 30;
const pitch = 7;
const bar = 5;
const gap = 4;

/** An edition seen from the side: one bar a copy. */
export function ForeEdge({ copies, label }: ForeEdgeProps) {
  const rows = Math.max(1, Math.ceil(copies.length / longestRow));
  const perRow = Math.ceil(copies.length / rows);
  const high = rows === 1 ? 20 : 14;
  const width = perRow * pitch + 2;
  const height = rows * (high + gap) - gap;
  return (
    <svg
      className="fore-edge"
      role="img"
      aria-label={label}
      width={width}
      height={height}
      viewBox={`0 0 ${width} ${height}`}
      preserveAspectRatio="none"
    >
      {copies.map((copy, at) => (
        <g
          key={`${runMark(copy.run)}${copy.number}`}
          transform={`translate(${(at % perRow) * pitch + 1} ${Math.floor(at / perRow) * (high + gap)})`}
        >
          <Bar copy={copy} high={high} />
        </g>
      ))}
    </svg>
  );
}

function Bar({ copy, high }: { copy: ForeEdgeCopy; high: number }) {
  const open = { x: 0.5, width: bar - 1 };
  const full = { x: 0, width: bar };
  const half = high / 2;
  if (copy.next) return <rect className="fe-next" x="0.5" y="1" width={bar - 0.5} height={high - 2} />;
  switch (copy.placement) {
    case "sold":
    case "given":
    case "kept":
    case "gone":
      return <rect className="fe-full" {...full} y="0" height={high} />;
    case "held":
      return <rect className="fe-open fe-dash" {...open} y={high * 0.25} height={high * 0.75 - 0.5} />;
    case "set_aside":
      return (
        <>
          <rect className="fe-open" {...open} y="0.5" height={high - 1} />
          <rect className="fe-full" {...full} y={half} height="4" />
        </>
      );
    case "coming_back":
      return <rect className="fe-open" {...open} y="0.5" height={half} />;
    case "consigned":
      return (
        <>
          <rect className="fe-open" {...open} y="0.5" height={high - 1} />
          <rect className="fe-full" {...full} y="0" height={half} />
        </>
      );
    case "retired":
      return <rect className="fe-stub" {...full} y={high * 0.68} height={high * 0.32} />;
    case "in_hand":
    case "free":
      return <rect className="fe-open" {...open} y="0.5" height={high - 1} />;
  }
}
