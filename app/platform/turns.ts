import { AppError } from "./errors";

export type Turns = {
  /** Runs work when its turn comes. Throws AppError `unavailable` when too many wait already. */
  take<T>(work: () => Promise<T>): Promise<T>;
  standing(): { running: number; waiting: number };
};

/**
 * Lets so many pieces of work run at once and so many more wait, first come first served; any beyond that are refused,
 * since whoever sent them would have given up before their turn.
 *
 * @param retryAfter seconds after which a refused one may come again
 */
export function turns(limits: { atOnce: number; mostWaiting: number; retryAfter: number }): Turns {
  let running = 0;
  const waiting: (() => void)[] = [];
  return {
    async take(work) {
      if (running < limits.atOnce) {
        running++;
      } else {
        if (waiting.length >= limits.mostWaiting) {
          throw new AppError("unavailable", "too much is waiting", { retryAfter: limits.retryAfter });
        }
        // Whoever finishes hands its place on, so the count stays as it is.
        await new Promise<void>((resolve) => waiting.push(resolve));
      }
      try {
        return await work();
      } finally {
        const next = waiting.shift();
        if (next === undefined) running--;
        else next();
      }
    },
    standing: () => ({ running, waiting: waiting.length }),
  };
}
