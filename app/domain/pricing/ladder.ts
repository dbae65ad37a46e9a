/**
 * The price ladder of an edition's format: which numbers cost what. The price belongs to the number, so a ladder is a
 * table from numbers to prices, in whole minor units of the studio's selling currency, home tax included.
 */

/** Numbers `fromNumber` to `toNumber`, both included, cost `amount` minor units each. */
export type PriceStep = { readonly fromNumber: number; readonly toNumber: number; readonly amount: number };

export type LadderProblemCode =
  | "no_steps"
  | "not_whole"
  | "backwards"
  | "below_one"
  | "past_limit"
  | "overlap"
  | "gap"
  | "not_positive";

/** What is wrong with a ladder. `step` is the index of the step in the list as given, or null where no step is at fault. */
export type LadderProblem = {
  readonly code: LadderProblemCode;
  readonly step: number | null;
  /** For the studio's screens. */
  readonly sentence: string;
};

function numbers(from: number, to: number): string {
  return from === to ? `Number ${from}` : `Numbers ${from} to ${to}`;
}

/**
 * Everything that keeps a ladder from giving each number of 1 to `limit` exactly one price; an empty list when nothing
 * does. The steps may be given in any order. Throws RangeError when the limit itself is not a whole number of at least 1.
 */
export function checkLadder(steps: readonly PriceStep[], limit: number): LadderProblem[] {
  if (!Number.isSafeInteger(limit) || limit < 1) throw new RangeError(`${limit} is not a limit.`);
  if (steps.length === 0) {
    return [{ code: "no_steps", step: null, sentence: "The ladder has no prices yet." }];
  }
  const problems: LadderProblem[] = [];
  const spans: { from: number; to: number; step: number }[] = [];
  for (const [step, { fromNumber, toNumber, amount }] of steps.entries()) {
    const found = (code: LadderProblemCode, sentence: string) => problems.push({ code, step, sentence });
    if (![fromNumber, toNumber, amount].every(Number.isSafeInteger)) {
      found("not_whole", `Step ${step + 1} needs whole numbers and an exact price.`);
      continue;
    }
    if (amount <= 0) found("not_positive", `${numbers(fromNumber, toNumber)} must cost more than nothing.`);
    if (fromNumber > toNumber) {
      found("backwards", `Step ${step + 1} runs from ${fromNumber} back to ${toNumber}.`);
      continue;
    }
    if (fromNumber < 1) found("below_one", `Step ${step + 1} begins at ${fromNumber}; numbers begin at 1.`);
    if (toNumber > limit) {
      found("past_limit", `Step ${step + 1} goes on to ${toNumber}, past the limit of ${limit}.`);
    }
    spans.push({ from: fromNumber, to: toNumber, step });
  }

  spans.sort((a, b) => a.from - b.from || a.step - b.step);
  let next = 1;
  for (const { from, to, step } of spans) {
    if (from < next && to >= 1 && next > 1) {
      problems.push({
        code: "overlap",
        step,
        sentence: `${numbers(Math.max(from, 1), Math.min(to, next - 1))} would have two prices.`,
      });
    }
    if (from > next && next <= limit) problems.push(gap(next, Math.min(from - 1, limit)));
    next = Math.max(next, to + 1);
  }
  if (next <= limit) problems.push(gap(next, limit));
  return problems;
}

function gap(from: number, to: number): LadderProblem {
  return {
    code: "gap",
    step: null,
    sentence: `${numbers(from, to)} ${from === to ? "has" : "have"} no price.`,
  };
}

/** The price of a number in minor units, or null where the ladder names none. The ladder has passed `checkLadder`. */
export function priceOf(steps: readonly PriceStep[], number: number): number | null {
  return steps.find((step) => step.fromNumber <= number && number <= step.toNumber)?.amount ?? null;
}

/** A row of the ladder as it is shown: a run of numbers at one price, how many they are, and what they bring together. */
export type LadderRow = PriceStep & { readonly count: number; readonly total: number };

/** The ladder in order of number, neighbours of the same price put together. The ladder has passed `checkLadder`. */
export function ladderRows(steps: readonly PriceStep[]): LadderRow[] {
  const rows: LadderRow[] = [];
  for (const step of [...steps].sort((a, b) => a.fromNumber - b.fromNumber)) {
    const last = rows.at(-1);
    const joins = last !== undefined && last.amount === step.amount && last.toNumber + 1 === step.fromNumber;
    if (joins) rows.pop();
    const fromNumber = joins ? last.fromNumber : step.fromNumber;
    const count = step.toNumber - fromNumber + 1;
    rows.push({
      fromNumber,
      toNumber: step.toNumber,
      amount: step.amount,
      count,
      total: count * step.amount,
    });
  }
  return rows;
}

/** What the numbered run brings when every number sells at its own price, in minor units. */
export function sellOutTotal(steps: readonly PriceStep[]): number {
  return ladderRows(steps).reduce((all, row) => all + row.total, 0);
}

/** The ladder cut to a lower limit: steps past it fall away, the step it falls in ends there. */
export function cutLadder(steps: readonly PriceStep[], limit: number): PriceStep[] {
  return steps
    .filter((step) => step.fromNumber <= limit)
    .map((step) => ({ ...step, toNumber: Math.min(step.toNumber, limit) }));
}

/** How a returned number is priced when it is sold again: at its own price, or at the price of the next number. */
export type ReturnPolicy = "own" | "next";

/**
 * The price at which a returned number sells again, by the edition's policy. `nextNumber` is the lowest number never
 * issued, or null when there is none; then the number sells at its own price under either policy.
 */
export function priceOfReturned(
  steps: readonly PriceStep[],
  number: number,
  policy: ReturnPolicy,
  nextNumber: number | null,
): number | null {
  return priceOf(steps, policy === "next" && nextNumber !== null ? nextNumber : number);
}
