/** The correlations' generating function, sum over n >= 0 of z^n <f, P^n f>, for z in (0, 1]. */
import { above, below, type Interval, point, times } from "../quantity/interval.js";
import { enclosedQuantity, estimatedQuantity, type Quantity } from "../quantity/quantity.js";
import type { CorrelationSums } from "./correlations.js";
import { summed } from "./limit-variance.js";
import type { ModularSums } from "./modular.js";

export interface GeneratingValue {
  readonly z: number;
  readonly value: Quantity;
}

/** z^0, ..., z^last between bounds. */
function powers(z: number, last: number): Interval[] {
  const list = [point(1)];
  for (let n = 1; n <= last; n++) list.push(times(list[n - 1]!, point(z)));
  return list;
}

/** By Green's function where it is at hand, else term by term with |<f, P^n f>| <= <f, f> for what is left. */
export function generatingFunction(
  at: readonly number[],
  sums: CorrelationSums,
  modular: ModularSums | undefined,
): GeneratingValue[] {
  const last = sums.values.length - 1;
  return at.map((z, i) => {
    const twice = modular?.generating[i];
    if (twice !== undefined) {
      const method = "Green's function of the dual walk, each move weighed by z";
      return { z, value: enclosedQuantity(below(twice.low / 2), above(twice.high / 2), method) };
    }
    const weights = powers(z, last + 1);
    const middle = summed(sums, last, (n) => (weights[n]!.low + weights[n]!.high) / 2);
    if (z === 1) {
      const method = `terms up to n = ${last}; those beyond are left out`;
      return { z, value: estimatedQuantity((middle.low + middle.high) / 2, method) };
    }
    const norm = above(sums.values[0]! + sums.errors[0]!);
    // Halves of the powers' widths, and everything beyond `last`: |<f, P^n f>| <= <f, f>.
    const width = weights.reduce((s, w) => above(s + (w.high - w.low)), 0);
    const beyond = above(above(weights[last + 1]!.high / below(1 - z)) * norm);
    const slack = above(beyond + above(width * norm));
    const method = `terms up to n = ${last}; those beyond are at most z^n <f, f>`;
    return { z, value: enclosedQuantity(below(middle.low - slack), above(middle.high + slack), method) };
  });
}
