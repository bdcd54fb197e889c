/**
 * Interval arithmetic on doubles, rounded outward: each operation rounds to nearest, and
 * one unit in the last place further out contains the true result.
 */
export interface Interval {
  readonly low: number;
  readonly high: number;
}

const EPSILON = 2 ** -52;
/** Below this a unit in the last place is no longer relative. */
const SMALLEST = 5e-324;

/** A double below x: at least one unit in the last place. */
export function below(x: number): number {
  return x - (Math.abs(x) * EPSILON + SMALLEST);
}
/** A double above x. */
export function above(x: number): number {
  return x + (Math.abs(x) * EPSILON + SMALLEST);
}

export function point(x: number): Interval {
  return { low: x, high: x };
}

export function plus(a: Interval, b: Interval): Interval {
  return { low: below(a.low + b.low), high: above(a.high + b.high) };
}
export function minus(a: Interval, b: Interval): Interval {
  return { low: below(a.low - b.high), high: above(a.high - b.low) };
}
export function times(a: Interval, b: Interval): Interval {
  const ends = [a.low * b.low, a.low * b.high, a.high * b.low, a.high * b.high];
  return { low: below(Math.min(...ends)), high: above(Math.max(...ends)) };
}
/** @throws RangeError where b contains 0. */
export function over(a: Interval, b: Interval): Interval {
  if (b.low <= 0 && b.high >= 0) throw new RangeError(`over: [${b.low}, ${b.high}] contains 0`);
  const ends = [a.low / b.low, a.low / b.high, a.high / b.low, a.high / b.high];
  return { low: below(Math.min(...ends)), high: above(Math.max(...ends)) };
}
/** Ends below 0 are cut to 0: for numbers known to be at least 0. */
export function root(a: Interval): Interval {
  return { low: Math.max(0, below(Math.sqrt(Math.max(0, a.low)))), high: above(Math.sqrt(Math.max(0, a.high))) };
}
export function hull(a: Interval, b: Interval): Interval {
  return { low: Math.min(a.low, b.low), high: Math.max(a.high, b.high) };
}
