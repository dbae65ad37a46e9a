import { reconcileOpenOrders, reconcilePaidSessions } from "~/domain/orders/reconcile.server";
import { findLostImaging, keepReleases, takeArrivedScans } from "~/domain/rolls/look-after-scans.server";
import { resendWaiting } from "~/emails/send.server";

/** Something looked after again and again, so that nothing rests on a job that was never made or was lost. */
export type Sweep = {
  name: string;
  everySeconds: number;
  /** Runs in one worker at a time; must be safe to be cut off anywhere. */
  run(): Promise<void>;
};

export const SWEEPS: readonly Sweep[] = [
  { name: "open-orders", everySeconds: 60, run: reconcileOpenOrders },
  { name: "payments-of-today", everySeconds: 60, run: () => reconcilePaidSessions(1) },
  { name: "payments-of-the-month", everySeconds: 3_600, run: () => reconcilePaidSessions(30) },
  { name: "owed-e-mails", everySeconds: 60, run: async () => void (await resendWaiting()) },
  { name: "releases", everySeconds: 15, run: keepReleases },
  { name: "arrived-scans", everySeconds: 30, run: takeArrivedScans },
  { name: "lost-imaging", everySeconds: 60, run: findLostImaging },
];
