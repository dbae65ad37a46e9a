export type MoneyProps = {
  /** The sum as it is to be printed, with its currency: "£420.00". */
  children: string;
  /** A single large sum, set in the title face. */
  large?: boolean;
};

/** A sum in lining, tabular figures that never breaks across lines. */
export function Money({ children, large }: MoneyProps) {
  return <span className={large ? "money money-large" : "money"}>{children}</span>;
}

export type CopyNumberProps = { children: string };

/** The number of a copy, "12/15", as it is pencilled. */
export function CopyNumber({ children }: CopyNumberProps) {
  return <span className="copy">{children}</span>;
}
