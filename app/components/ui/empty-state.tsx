import type { ReactNode } from "react";

export type EmptyStateProps = {
  /** One sentence that says when something will be here. */
  children: ReactNode;
  /** A press or a link, when there is something to do about it. */
  action?: ReactNode;
};

/** A dashed leaf where there is nothing yet. */
export function EmptyState({ children, action }: EmptyStateProps) {
  return (
    <div className="empty">
      <svg viewBox="0 0 48 60" aria-hidden="true" focusable="false">
        <path d="M6 8H42V53H6Z" />
      </svg>
      <div>
        <p>{children}</p>
        {action}
      </div>
    </div>
  );
}
