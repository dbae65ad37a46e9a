import type { ReactNode } from "react";
import { type LeafCopy, Leaves } from "~/components/ui/leaf";

export type Task = {
  key: string;
  /** "since Mon", "today", "16:00" */
  when: string;
  /** "Sign four sheets" */
  what: string;
  more?: ReactNode;
  /** It should have been done already. */
  late?: boolean;
  /** The copies it is about. */
  copies?: readonly LeafCopy[];
  /** One press. */
  act?: ReactNode;
};

export type TaskListProps = { tasks: readonly Task[] };

/** What needs doing, the late first. */
export function TaskList({ tasks }: TaskListProps) {
  return (
    <ul className="tasks">
      {tasks.map((task) => (
        <li key={task.key} className={task.late ? "late" : undefined}>
          <span className="when">{task.when}</span>
          <div className="what">
            <b>{task.what}</b> {task.late ? <span className="vh">late</span> : null}
            {task.more ? (
              <>
                <br />
                <span>{task.more}</span>
              </>
            ) : null}
            {task.copies ? <Leaves copies={task.copies} size="mini" label={`Copies: ${task.what}`} /> : null}
          </div>
          {task.act ? <div className="act">{task.act}</div> : null}
        </li>
      ))}
    </ul>
  );
}
