import { type LeafPlacement, type LeafRun, runMark } from "~/components/ui/leaf";

export type ForeEdgeCopy = { number: number; run?: LeafRun; placement: LeafPlacement; next?: boolean };

export type ForeEdgeProps = {
  /** In the order of their numbers. */
  copies: readonly ForeEdgeCopy[];
  /** The same in words: "15 numbers: 6 sold, 1 given, 2 held, 6 in hand". */
  label: string;
};

const height = 20;

/** Pixels from one bar to the next, and the width of a bar: thinner for editions of many copies. */
function pitchFor(count: number): { pitch: number; bar: number } {
  if (count > 60) return { pitch: 4, bar: 3 };
  if (count > 30) return { pitch: 5, bar: 4 };
  return { pitch: 7, bar: 5 };
}

/** An edition seen from the side: one bar a copy. */
export function ForeEdge({ copies, label }: ForeEdgeProps) {
  const { pitch, bar } = pitchFor(copies.length);
  const width = copies.length * pitch + 2;
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
        <Bar key={`${runMark(copy.run)}${copy.number}`} copy={copy} x={at * pitch + 1} width={bar} />
      ))}
    </svg>
  );
}

function Bar({ copy, x, width }: { copy: ForeEdgeCopy; x: number; width: number }) {
  const open = { x: x + 0.5, width: width - 1 };
  const full = { x, width };
  if (copy.next)
    return <rect className="fe-next" x={x + 0.5} y="1" width={width - 0.5} height={height - 2} />;
  switch (copy.placement) {
    case "sold":
    case "given":
    case "kept":
    case "gone":
      return <rect className="fe-full" {...full} y="0" height={height} />;
    case "held":
      return <rect className="fe-open fe-dash" {...open} y="5" height={height - 5.5} />;
    case "set_aside":
      return (
        <>
          <rect className="fe-open" {...open} y="0.5" height={height - 1} />
          <rect className="fe-full" {...full} y="10" height="4" />
        </>
      );
    case "coming_back":
      return <rect className="fe-open" {...open} y="0.5" height={height / 2} />;
    case "consigned":
      return (
        <>
          <rect className="fe-open" {...open} y="0.5" height={height - 1} />
          <rect className="fe-full" {...full} y="0" height={height / 2} />
        </>
      );
    case "retired":
      return <rect className="fe-stub" {...full} y={height - 6.5} height="6.5" />;
    case "in_hand":
    case "free":
      return <rect className="fe-open" {...open} y="0.5" height={height - 1} />;
  }
}
