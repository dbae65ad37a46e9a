import { useId } from "react";
import { type LeafPlacement, type LeafRun, runMark } from "~/components/ui/leaf";

export type LadderStep = {
  fromNumber: number;
  toNumber: number;
  /** Minor units; only the proportion between steps is used. */
  amount: number;
  /** The price as printed, "£280". */
  price: string;
};

export type LadderCopy = {
  number: number;
  run?: LeafRun;
  placement: LeafPlacement;
  next?: boolean;
  /** Spoken after the price: "sold", "the next to be sold". */
  word: string;
};

export type PriceLadderProps = {
  steps: readonly LadderStep[];
  /** The numbered run only, in order. */
  copies: readonly LadderCopy[];
  /** "Price of each number, 1 to 15" */
  label: string;
};

/** The highest bar takes this share of the drawing, per cent; the rest is for its price. */
const tallest = 86;
/** A bar is never lower than this, per cent, so that its number can be read. */
const lowest = 14;
/** The narrowest drawing the prices are fitted to, and the width of one of their characters, in px. */
const narrowest = 240;
const character = 9;

function shapeOf(copy: LadderCopy): string {
  if (copy.next) return "next";
  switch (copy.placement) {
    case "sold":
    case "gone":
      return "sold";
    case "held":
      return "held";
    case "in_hand":
    case "free":
      return "open";
    case "set_aside":
    case "coming_back":
    case "given":
    case "kept":
    case "consigned":
    case "retired":
      return "off";
  }
}

/** The price of every number: one bar a copy, its height the price. */
export function PriceLadder({ steps, copies, label }: PriceLadderProps) {
  const highest = Math.max(...steps.map((step) => step.amount), 1);
  const barWidth = narrowest / Math.max(copies.length, 1);
  const many = copies.length > 20;
  const hatch = useId();
  return (
    <ol className={many ? "ladder ladder-many" : "ladder"} aria-label={label}>
      {copies.map((copy) => {
        const step = steps.find((one) => copy.number >= one.fromNumber && copy.number <= one.toNumber);
        const share = step ? Math.max((step.amount / highest) * tallest, lowest) : lowest;
        const first = step?.fromNumber === copy.number;
        const room = copies.length - copy.number + 1;
        const tagWidth = (step?.price.length ?? 0) * character;
        const shape = shapeOf(copy);
        const stepWidth = step ? (step.toNumber - step.fromNumber + 1) * barWidth : 0;
        return (
          <li
            key={`${runMark(copy.run)}${copy.number}`}
            data-shape={shape}
            data-first={first || copy.number === copies.length ? "" : undefined}
          >
            <svg aria-hidden="true" focusable="false" width="100%" height="100%">
              {shape === "off" ? <Hatch id={`${hatch}${copy.number}`} /> : null}
              <rect
                className="ladder-bar"
                x="0"
                y={`${100 - share}%`}
                width="100%"
                height={`${share}%`}
                fill={shape === "off" ? `url(#${hatch}${copy.number})` : undefined}
              />
              {first && step ? (
                <text
                  className={stepWidth < tagWidth && room * barWidth >= tagWidth ? "tag tag-tight" : "tag"}
                  x={room * barWidth < tagWidth ? "100%" : "0"}
                  y={`${100 - share}%`}
                  dy="-6"
                  textAnchor={room * barWidth < tagWidth ? "end" : "start"}
                >
                  {step.price}
                </text>
              ) : null}
            </svg>
            <span className="ladder-no">{copy.number}</span>
            <span className="vh">
              {" "}
              {step?.price}, {copy.word}
            </span>
          </li>
        );
      })}
    </ol>
  );
}

/** Ruled paper: a copy that is not for sale. */
function Hatch({ id }: { id: string }) {
  return (
    <pattern id={id} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
      <rect className="hatch" width="3" height="7" />
    </pattern>
  );
}
