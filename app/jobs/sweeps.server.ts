import { sweepSessions } from "~/domain/people/sessions.server";
import { resendWaiting } from "~/emails/send.server";

/** Something looked after again and again, so that nothing rests on a job that was never made or was lost. */
export type Sweep = {
  name: string;
  everySeconds: number;
  /** Runs in one worker at a time; must be safe to be cut off anywhere. */
  run(): Promise<void>;
};

export const SWEEPS: readonly Sweep[] = [
  { name: "owed-emails", everySeconds: 60, run: async () => void (await resendWaiting()) },
  { name: "old-sessions", everySeconds: 3_600, run: async () => void (await sweepSessions()) },
];
