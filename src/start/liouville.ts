/**
 * Liouville's inequality with its constant: f(x) = 0 for an integer polynomial f of degree
 * n, p/q not a root of f and |x - p/q| <= 1. Then 1 <= q^n |f(p/q)| <= q^n M |x - p/q| with
 * M = max |f'| on [x - 1, x + 1], hence |x - p/q| >= 1 / (M q^n).
 */
import type { ExactNumber } from "../exact/number.js";
import { polynomialText } from "../exact/polynomial.js";

export interface Liouville {
  readonly degree: number;
  readonly polynomial: string;
  /** M, a whole number. */
  readonly bound: bigint;
}

const absolute = (x: bigint) => (x < 0n ? -x : x);

/** For an algebraic irrational number. @throws RangeError for others */
export function liouville(x: ExactNumber): Liouville {
  const f = x.polynomial;
  if (x.kind !== "algebraic" || f === undefined) throw new RangeError(`liouville: ${x.text} is ${x.kind}`);
  // |t| <= |x| + 1 on the interval, and |x| <= |floor| + 2 covers the error of the fixed-point value.
  const size = absolute(x.toFixed(0)) + 3n;
  let bound = 0n;
  for (let i = f.length - 1; i >= 1; i--) bound = bound * size + BigInt(i) * absolute(f[i]);
  return { degree: f.length - 1, polynomial: polynomialText(f), bound };
}
