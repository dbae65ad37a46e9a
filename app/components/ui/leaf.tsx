import type { ReactNode } from "react";
import { Link } from "react-router";

/** Where a copy stands. The last three are what the public is shown of the others. */
export type LeafPlacement =
  | "in_hand"
  | "held"
  | "set_aside"
  | "sold"
  | "coming_back"
  | "given"
  | "kept"
  | "consigned"
  | "retired"
  | "free"
  | "gone";

type RunKey = "numbered" | "ap" | "pp" | "hc" | "bat" | "exhibition";

/** The sequence a copy belongs to; either case is taken. */
export type LeafRun = RunKey | Uppercase<RunKey>;

/** One copy as it is drawn: its number, its run, where it stands and the word for it. */
export type LeafCopy = {
  number: number;
  /** `numbered` when left out. */
  run?: LeafRun;
  placement: LeafPlacement;
  /** Always there: seen under the leaf, or spoken when the leaf is small. */
  word: string;
  /** The copy that would be sold next. */
  next?: boolean;
  /** An earlier sheet of this copy was spoiled. */
  reprinted?: boolean;
  /** Makes the leaf a link. */
  href?: string;
};

export type LeafProps = LeafCopy & {
  /** Width of the sheet: shop 68 px, studio 44 px, mini 32 px. Left out, the surroundings decide. */
  size?: "shop" | "studio" | "mini";
};

const runMarks: Record<RunKey, string> = {
  numbered: "",
  ap: "AP",
  pp: "PP",
  hc: "HC",
  bat: "BAT",
  exhibition: "EX",
};

/** The letters written before a copy's number: "AP" for `ap` or `AP`, nothing for the numbered run. */
export function runMark(run: LeafRun = "numbered"): string {
  return runMarks[run.toLowerCase() as RunKey];
}

const sheet = "M6 8H42V53H6Z";

const bare = <path className="lf-sheet" d={sheet} />;
const inked = <path className="lf-inked" d={sheet} />;

const drawings: Record<LeafPlacement, ReactNode> = {
  in_hand: bare,
  free: bare,
  held: (
    <>
      <path className="lf-sheet lf-dash" d="M6 8H30L42 20V53H6Z" />
      <path className="lf-fold" d="M30 8V20H42Z" />
    </>
  ),
  set_aside: (
    <>
      {bare}
      <path className="lf-fold" d="M4 38H44V46.5H4Z" />
      <path className="lf-stroke" d="M30.5 46.5L34 38" />
    </>
  ),
  sold: inked,
  gone: inked,
  coming_back: (
    <>
      <path className="lf-sheet" d="M8 3H40V44H8Z" />
      <path className="lf-fold" d="M3 31L24 42L45 31V57H3Z" />
      <path className="lf-stroke" d="M3 57L18 45.5M45 57L30 45.5" />
    </>
  ),
  kept: (
    <>
      {bare}
      <path className="lf-solid" d="M4 6H16L4 18ZM44 6V18L32 6ZM4 55V43L16 55ZM44 55H32L44 43Z" />
    </>
  ),
  given: (
    <>
      {bare}
      <path
        className="lf-stroke"
        d="M6 45.5H42M24 45.5C18 37.5 12.5 39.5 14 43.5C15 46.5 20.5 46.2 24 45.5C30 37.5 35.5 39.5 34 43.5C33 46.5 27.5 46.2 24 45.5M24 45.5L18.5 51M24 45.5L29.5 51"
      />
    </>
  ),
  consigned: (
    <>
      <path className="lf-stroke" d="M12 11L24 2.5L36 11" />
      <circle className="lf-solid" cx="24" cy="2.8" r="1.9" />
      <path className="lf-frame" d="M7.5 11.5H40.5V52H7.5Z" />
    </>
  ),
  retired: (
    <>
      {bare}
      <path className="lf-stroke" d="M6 8L15.5 20M32.5 41L42 53M42 8L32.5 20M15.5 41L6 53" />
    </>
  ),
};

const spoiledBehind = (
  <path
    className="lf-torn"
    d="M12 12H47L45.4 16.5L47.2 20.5L45.6 25L47.2 29.5L45.5 34L47 38.5L45.6 43L47 47.5L45.8 52L47 57.5L42 56.3L37.5 58.2L33 56.5L28 58.3L23 56.6L18 58.2L12 56.8Z"
  />
);

/** One copy drawn as a small sheet that carries its number; its shape says where the copy stands. */
export function Leaf({ number, run, placement, word, next, reprinted, href, size }: LeafProps) {
  const mark = runMark(run);
  const signs = mark.length + String(number).length;
  const drawn = (
    <>
      <svg className="leaf-sheet" viewBox="0 0 48 60" aria-hidden="true" focusable="false">
        {reprinted ? spoiledBehind : null}
        {drawings[placement]}
      </svg>
      <span className="leaf-no">
        {mark ? <small>{mark}</small> : null}
        {number}
      </span>{" "}
      <span className={size === "mini" ? "vh" : "leaf-word"}>{word}</span>
    </>
  );
  const shared = {
    className: size ? `leaf leaf-${size}` : "leaf",
    "data-placement": placement,
    "data-next": next ? "" : undefined,
    "data-long": signs > 4 ? "very" : signs > 2 ? "" : undefined,
  };
  return href ? (
    <Link {...shared} to={href}>
      {drawn}
    </Link>
  ) : (
    <span {...shared}>{drawn}</span>
  );
}

export type LeavesProps = {
  copies: readonly LeafCopy[];
  size?: LeafProps["size"];
  /** How many stand beside each other when there is room; left out, as many as fit. */
  columns?: 5 | 10;
  /** Names the list for those who hear it; or give `labelledBy`. */
  label?: string;
  labelledBy?: string;
};

/** A list of leaves, in the order given. */
export function Leaves({ copies, size, columns, label, labelledBy }: LeavesProps) {
  return (
    <ol
      className={columns ? `leaves leaves-${columns}` : "leaves"}
      aria-label={label}
      aria-labelledby={labelledBy}
    >
      {copies.map((copy) => (
        <li key={`${runMark(copy.run)}${copy.number}`}>
          <Leaf {...copy} size={size} />
        </li>
      ))}
    </ol>
  );
}

export type LegendEntry = {
  placement: LeafPlacement;
  /** "In hand" */
  name: string;
  /** "a bare sheet: it can be bought" */
  meaning: string;
  /** The number on the example, 1 when left out. */
  number?: number;
  run?: LeafRun;
  next?: boolean;
  reprinted?: boolean;
};

export type LeafLegendProps = { placements: readonly LegendEntry[] };

/** Every mark drawn and named beside its meaning. */
export function LeafLegend({ placements }: LeafLegendProps) {
  return (
    <ul className="legend">
      {placements.map(({ name, meaning, number = 1, ...copy }) => (
        <li key={name}>
          <span aria-hidden="true">
            <Leaf {...copy} number={number} word="" />
          </span>
          <span>
            <b>{name}</b> <span className="quiet">{meaning}</span>
          </span>
        </li>
      ))}
    </ul>
  );
}
