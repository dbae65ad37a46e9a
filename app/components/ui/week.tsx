import { Leaf, type LeafCopy } from "~/components/ui/leaf";

export type WeekDay = {
  /** "Mon", and on the last day "today". */
  label: string;
  /** Said of the day: "Mon 30: 4 sold". */
  spoken: string;
  isToday?: boolean;
  /** The figure under the stack. */
  total: number;
  /** In the order they were sold; `key` keeps apart copies of different editions. */
  copies: readonly (LeafCopy & { key: string })[];
};

export type WeekProps = {
  days: readonly WeekDay[];
  /** "Sold this week, one sheet a copy" */
  label: string;
  /** What stands on a stack too high to draw, from how many more there are: "and 19". */
  more: (count: number) => string;
};

/** A stack is drawn up to this many sheets. */
const highest = 6;

/** A week of sales: one sheet a copy, stacked by day. */
export function Week({ days, label, more }: WeekProps) {
  return (
    <ol className="week" aria-label={label}>
      {days.map((day) => {
        const drawn = day.copies.length > highest ? day.copies.slice(0, highest - 1) : day.copies;
        const rest = day.copies.length - drawn.length;
        return (
          <li key={day.spoken}>
            <span className="vh">{day.spoken}</span>
            <span className="week-stack" aria-hidden="true">
              {drawn.map(({ key, ...copy }) => (
                <Leaf key={key} {...copy} size="mini" />
              ))}
              {rest > 0 ? <Bundle words={more(rest)} /> : null}
            </span>
            <span className={day.isToday ? "week-day week-today" : "week-day"} aria-hidden="true">
              <b>{day.total}</b> {day.label}
            </span>
          </li>
        );
      })}
    </ol>
  );
}

function Bundle({ words }: { words: string }) {
  return (
    <span className="bundle">
      <svg width="27" height="17" viewBox="0 0 27 17" aria-hidden="true" focusable="false">
        <path d="M1 1.5H26M1 5H26M1 8.5H26M1 12H26M1 15.5H26" />
      </svg>
      {words}
    </span>
  );
}
