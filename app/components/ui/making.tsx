export type SheetMaking =
  | "to_print"
  | "printed"
  | "signed"
  | "packed"
  | "dispatched"
  | "delivered"
  | "spoiled"
  | "lost"
  | "returned"
  | "destroyed";

export type MakingProps = {
  making: SheetMaking;
  /** "printed, drying" */
  words: string;
};

const done: Record<SheetMaking, number> = {
  to_print: 0,
  printed: 1,
  signed: 2,
  packed: 3,
  dispatched: 4,
  delivered: 5,
  spoiled: 0,
  lost: 0,
  returned: 0,
  destroyed: 0,
};

/** How far a sheet has come: five small sheets, filled as it is printed, signed, packed, sent, delivered. */
export function Making({ making, words }: MakingProps) {
  const ended = making === "spoiled" || making === "destroyed";
  return (
    <span className="making">
      <svg width="45" height="14" viewBox="0 0 45 14" aria-hidden="true" focusable="false">
        {[0, 1, 2, 3, 4].map((at) => (
          <rect
            key={at}
            className={at < done[making] ? "pip pip-on" : making === "lost" ? "pip pip-lost" : "pip"}
            x={at * 9 + 0.5}
            y="1.5"
            width="6"
            height="11"
          />
        ))}
        {ended ? <path className="pip-struck" d="M0 7H43" /> : null}
        {making === "returned" ? <path className="pip-back" d="M43 7H4M9 3L4 7L9 11" /> : null}
      </svg>
      {words}
    </span>
  );
}
