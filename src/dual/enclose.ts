/** Enclosures from a computed double and a proved bound on its error. */
import { Rational } from "../exact/rational.js";
import { decimalDown, decimalUp } from "../quantity/decimal.js";
import { enclosedQuantity, exactQuantity, type Quantity } from "../quantity/quantity.js";
import type { ExactForm, RationalInterval } from "./form.js";

/** A double at most x - e (e >= 0). */
export function minusDown(x: number, e: number): number {
  const y = x - e;
  return e === 0 ? y : y - Math.abs(y) * 2 ** -52 - 2 ** -1070;
}

/** A double at least x + e (e >= 0). */
export function plusUp(x: number, e: number): number {
  return -minusDown(-x, e);
}

/** The number known to be within `error` of `value`. */
export function encloseAround(value: number, error: number, method: string): Quantity {
  return { ...enclosedQuantity(minusDown(value, error), plusUp(value, error), method), value };
}

/** The number that lies in an interval of exact fractions. */
export function encloseRationals({ low, high }: RationalInterval, method: string): Quantity {
  const value = low.add(high).mul(Rational.of(1, 2)).toNumber();
  return { value, standing: "enclosed", low: decimalDown(low), high: decimalUp(high), method };
}

/** A sum of exact numbers: exact where it is rational as written, else enclosed. */
export function formQuantity(form: ExactForm, method: string): Quantity {
  return form.rational === undefined ? encloseRationals(form.enclose(), method) : exactQuantity(form.rational, method);
}
