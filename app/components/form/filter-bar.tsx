import type { ReactNode } from "react";
import { Form } from "react-router";
import { Press } from "~/components/ui/press";

export type FilterBarProps = {
  /** Names the search: "Find orders". */
  label: string;
  /** Fields; each becomes a part of the address. */
  children: ReactNode;
  /** "Show" */
  submit: string;
  /** A link that clears it. */
  clear?: ReactNode;
};

/** Fields in a row that change what a list shows, through the address. */
export function FilterBar({ label, children, submit, clear }: FilterBarProps) {
  return (
    <search aria-label={label}>
      <Form className="filter-bar" method="get">
        {children}
        <Press variant="outlined" small>
          {submit}
        </Press>
        {clear}
      </Form>
    </search>
  );
}
