import type { ComponentProps, MouseEvent } from "react";
import { Link, type LinkProps } from "react-router";

type PressLook = {
  /** `filled` once a view; `outlined` for the rest; `word` for small side acts. */
  variant?: "filled" | "outlined" | "word";
  small?: boolean;
  wide?: boolean;
};

export type PressProps = PressLook &
  ComponentProps<"button"> & {
    /** The act is under way: the press stays focusable, takes no further press and its label ends in "…". */
    busy?: boolean;
    /** The label while busy; the ordinary one with "…" when left out. */
    busyLabel?: string;
  };

export type PressLinkProps = PressLook & Omit<LinkProps, "className">;

function classes({ variant = "filled", small, wide }: PressLook): string {
  if (variant === "word") return "plain";
  return ["press", variant === "outlined" && "press-line", small && "press-small", wide && "press-wide"]
    .filter(Boolean)
    .join(" ");
}

/** A button whose label says what happens. */
export function Press({
  variant,
  small,
  wide,
  busy = false,
  busyLabel,
  children,
  onClick,
  type = "submit",
  ...rest
}: PressProps) {
  function press(event: MouseEvent<HTMLButtonElement>) {
    if (busy) event.preventDefault();
    else onClick?.(event);
  }
  return (
    <button
      {...rest}
      type={type}
      className={classes({ variant, small, wide })}
      aria-busy={busy || undefined}
      aria-disabled={busy || undefined}
      onClick={press}
    >
      {busy ? (busyLabel ?? <span>{children}…</span>) : children}
    </button>
  );
}

/** A link that looks like a press: it leads somewhere, it changes nothing. */
export function PressLink({ variant = "outlined", small, wide, ...rest }: PressLinkProps) {
  return <Link {...rest} className={classes({ variant, small, wide })} />;
}
