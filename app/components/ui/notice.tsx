import type { ReactNode, Ref } from "react";

export type NoticeProps = {
  kind: "note" | "attention" | "done";
  /** In plain words: what happened. */
  title: string;
  /** Why, and what to do. */
  children?: ReactNode;
  /** Heading level, 2 when left out. */
  level?: 2 | 3;
  /** `status` is spoken when idle, `alert` at once; nothing for a notice that came with the page. */
  role?: "status" | "alert" | "group";
  id?: string;
  ref?: Ref<HTMLDivElement>;
  tabIndex?: number;
  autoFocus?: boolean;
};

const drawings: Record<NoticeProps["kind"], ReactNode> = {
  note: <path d="M2 2H18L26 10V32H2ZM18 2V10H26M7 17H21M7 22H21M7 27H15" strokeWidth="1.5" />,
  attention: (
    <>
      <path d="M2 2H26V32H2Z" strokeWidth="2" />
      <path className="nt-solid" d="M12.2 8H15.8L15.2 20.5H12.8ZM12.2 23.5H15.8V27H12.2Z" />
    </>
  ),
  done: (
    <>
      <path d="M2 2H26V32H2Z" strokeWidth="1.5" />
      <path d="M7 18L12 23.5L21 10.5" strokeWidth="2.5" />
    </>
  ),
};

/** Something to be known, looked at, or glad of: a drawn sheet, a bar, a heading in plain words. */
export function Notice({ kind, title, children, level = 2, ...rest }: NoticeProps) {
  const Heading = `h${level}` as const;
  return (
    <div className={`notice notice-${kind}`} {...rest}>
      <svg viewBox="0 0 28 34" aria-hidden="true" focusable="false">
        {drawings[kind]}
      </svg>
      <Heading>{title}</Heading>
      {children ? <div className="notice-body">{children}</div> : null}
    </div>
  );
}
