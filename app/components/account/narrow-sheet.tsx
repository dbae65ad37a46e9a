import type { ReactNode } from "react";
import { Window } from "~/components/ui/window";

/** One narrow sheet with its title: signing in, links from e-mails. */
export function NarrowSheet({ title, children }: { title: string; children: ReactNode }) {
  return (
    <div className="narrow">
      <title>{title}</title>
      <Window labelledBy="sheet-title">
        <div className="flow">
          <h1 id="sheet-title">{title}</h1>
          {children}
        </div>
      </Window>
    </div>
  );
}
