/** Enclosures from a computed double and a proved bound on its error. */
import { enclosedQuantity, type Quantity } from "../quantity/quantity.js";

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
