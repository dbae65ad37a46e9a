import { setTimeout as delay } from "node:timers/promises";

/**
 * Answers no sooner than so many milliseconds after it was asked, so that how long it took does not tell what was
 * found (whether there is an account with an address). `milliseconds` is well above what the work takes.
 */
export async function evenly<T>(milliseconds: number, work: () => Promise<T>): Promise<T> {
  const [result] = await Promise.all([work(), delay(milliseconds)]);
  return result;
}
