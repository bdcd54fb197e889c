/**
 * A number that is reported as a finding, with its standing.
 *
 * - `exact`: the value itself, proved: an integer, or a fraction or closed form as text
 *   (`approx` then gives a double near it).
 * - `enclosed`: proved to lie in [low, high] by arithmetic that accounts for every
 *   rounding; low and high are decimal strings, rounded outward.
 * - `estimated`: statistical or unproved; low and high are a confidence interval at
 *   `level`, absent where none is meaningful.
 *
 * No function of this file strengthens a standing.
 */
import { Rational } from "../exact/rational.js";
import { decimalDown, decimalUp } from "./decimal.js";

export type Standing = "exact" | "enclosed" | "estimated";

export interface Quantity {
  readonly value: number | string;
  readonly standing: Standing;
  readonly low?: string;
  readonly high?: string;
  /** Confidence level of [low, high]; for `estimated` only. */
  readonly level?: number;
  /** A double near an exact value that is given as text. */
  readonly approx?: number;
  /** In a few words, how the number was obtained. */
  readonly method: string;
}

/** A proved value: a safe integer stays a number, any other fraction becomes "p/q". */
export function exactQuantity(value: Rational | bigint, method: string): Quantity {
  const r = value instanceof Rational ? value : Rational.of(value);
  if (r.isInteger() && Number.isSafeInteger(Number(r.num))) return { value: Number(r.num), standing: "exact", method };
  return { value: r.toString(), standing: "exact", approx: r.toNumber(), method };
}

/** A proved value in closed form, such as "log(2)/2"; `approx` is a double near it. */
export function closedForm(text: string, approx: number, method: string): Quantity {
  return { value: text, standing: "exact", approx, method };
}

/**
 * A number proved to lie in [low, high].
 * @throws RangeError where low > high or an end is not finite.
 */
export function enclosedQuantity(low: number, high: number, method: string, digits = 17): Quantity {
  if (!(low <= high) || !Number.isFinite(low) || !Number.isFinite(high)) {
    throw new RangeError(`enclosedQuantity: [${low}, ${high}] is not an interval`);
  }
  return {
    value: low + (high - low) / 2,
    standing: "enclosed",
    low: decimalDown(low, digits),
    high: decimalUp(high, digits),
    method,
  };
}

/** A number proved to lie between two fractions. @throws RangeError where low > high */
export function enclosedBetween(low: Rational, high: Rational, method: string, digits = 17): Quantity {
  if (low.compare(high) > 0) throw new RangeError(`enclosedBetween: [${low}, ${high}] is not an interval`);
  return {
    value: low.add(high).div(Rational.of(2n)).toNumber(),
    standing: "enclosed",
    low: decimalDown(low, digits),
    high: decimalUp(high, digits),
    method,
  };
}

export interface Interval {
  readonly low: number;
  readonly high: number;
}

/** An unproved number; with `interval`, a confidence interval at `level`. */
export function estimatedQuantity(value: number, method: string, interval?: Interval, level = 0.95): Quantity {
  if (interval === undefined) return { value, standing: "estimated", method };
  return {
    value,
    standing: "estimated",
    low: String(interval.low),
    high: String(interval.high),
    level,
    method,
  };
}

/** The double that stands for a quantity in plots and in further estimates. */
export function quantityNumber(q: Quantity): number {
  return typeof q.value === "number" ? q.value : (q.approx ?? Number(q.value));
}

/** A yes-or-no finding of the exact kind. */
export interface Verdict {
  readonly verdict: "holds" | "fails" | "undecided";
  /** One or two sentences for a reader. */
  readonly reason: string;
  /** What the reader can check by hand. */
  readonly evidence: Readonly<Record<string, unknown>>;
}
