import type { ReactNode } from "react";

export type Fact = { term: string; detail: ReactNode };

export type FactsProps = {
  items: readonly Fact[];
  /** `ruled`: two columns under hairlines. `leaders`: dots lead to the detail at the right. */
  variant?: "ruled" | "leaders";
};

/** Terms and what holds for them. */
export function Facts({ items, variant = "ruled" }: FactsProps) {
  return (
    <dl className={variant === "ruled" ? "facts" : "leaders"}>
      {items.map((item) => (
        <div key={item.term}>
          <dt>{item.term}</dt>
          <dd>{item.detail}</dd>
        </div>
      ))}
    </dl>
  );
}
