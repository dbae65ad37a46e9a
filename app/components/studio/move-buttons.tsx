import { Form } from "react-router";

export type MoveButtonsProps = {
  /** What is moved: "Hag Down". */
  of: string;
  /** Fields sent with it. */
  fields: Record<string, string>;
  first: boolean;
  last: boolean;
};

/** Two small presses that move one thing a place earlier or later in its list. */
export function MoveButtons({ of, fields, first, last }: MoveButtonsProps) {
  return (
    <Form method="post" preventScrollReset className="moves">
      {Object.entries(fields).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <MoveButton to="earlier" of={of} off={first} />
      <MoveButton to="later" of={of} off={last} />
    </Form>
  );
}

function MoveButton({ to, of, off }: { to: "earlier" | "later"; of: string; off: boolean }) {
  return (
    <button type="submit" name="to" value={to} className="move" disabled={off}>
      <svg width="12" height="12" viewBox="0 0 12 12" aria-hidden="true" focusable="false">
        <path d={to === "earlier" ? "M1 8.5L6 3L11 8.5" : "M1 3.5L6 9L11 3.5"} />
      </svg>
      <span className="vh">
        Move {of} {to}
      </span>
    </button>
  );
}
