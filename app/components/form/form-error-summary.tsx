import { useEffect, useId, useRef } from "react";
import type { SummaryError } from "~/components/form/field-errors";
import { Notice } from "~/components/ui/notice";

export type FormErrorSummaryProps = {
  errors: readonly SummaryError[];
  /** "Two answers need another look" */
  title: string;
};

/**
 * Names every answer that needs another look and leads to it. Put it under the page's head; it takes
 * focus when it comes, by script or, on a page loaded without, by autofocus. Draws nothing without errors.
 */
export function FormErrorSummary({ errors, title }: FormErrorSummaryProps) {
  const id = useId();
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (errors.length > 0) box.current?.focus();
  }, [errors]);
  if (errors.length === 0) return null;
  return (
    <Notice kind="attention" title={title} role="alert" id={id} ref={box} tabIndex={-1} autoFocus>
      <ul>
        {errors.map((error) => (
          <li key={`${error.field} ${error.message}`}>
            <a href={`#${error.id}`}>{error.message}</a>
          </li>
        ))}
      </ul>
    </Notice>
  );
}
