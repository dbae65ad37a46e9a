let offset = 0;
let fixed: number | undefined;

/** The present instant. The only place that asks the system's clock. */
export function now(): Date {
  return new Date(fixed ?? Date.now() + offset);
}

/** For tests: hold the clock at an instant, or let it go again with `undefined`. */
export function holdClock(at: Date | undefined): void {
  fixed = at?.getTime();
}

/** For tests: let the clock run ahead by so many milliseconds. */
export function shiftClock(milliseconds: number): void {
  offset = milliseconds;
}
