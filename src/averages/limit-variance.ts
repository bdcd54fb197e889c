/**
 * The limit variance <f, f> + 2 sum over n >= 1 of <f, P^n f> of the walk started from Haar
 * measure, as well as it is known.
 *
 * With translations, |<f, P^n f>| <= <F, Q^n F>: F has the coefficients |f_k|, Q is the walk
 * without translations, since each path of frequencies has the same weight in both and a
 * phase of modulus 1 in the first. So what is left after N terms is at most the sum of all
 * 2 <F, Q^n F>, which Green's function gives, less its first terms, which are enumerated.
 */
import { above, below, type Interval, minus, plus, point } from "../quantity/interval.js";
import { enclosedQuantity, estimatedQuantity, type Quantity } from "../quantity/quantity.js";
import type { Computed } from "./computed.js";
import type { CorrelationSums } from "./correlations.js";
import type { PoissonFit } from "./poisson.js";

export const LAST_SHOWN = 5;

export interface LimitVariance {
  readonly variance: Quantity;
  /** Whether it was summed term by term. */
  readonly terms: boolean;
  readonly poisson?: PoissonFinding;
  readonly notes: readonly string[];
}

/** How well f = g - P g was solved on a set of frequencies: what an unproved variance rests on. */
export interface PoissonFinding {
  /** On which g lives, k and -k counted once. */
  readonly frequencies: number;
  /** |f - (g - P g)| / |f|, and the same for P*: the variance is off by some multiple of their product. */
  readonly residual: Quantity;
  readonly adjointResidual: Quantity;
  /** |g|^2 - |P g|^2, the variance of g - P g. */
  readonly byNorms: Quantity;
  /** Factor by which correlations shrank a move among the last that were computed; absent where they are 0. */
  readonly decay?: Quantity;
}

/** An interval around the sum of weight(n) <f, P^n f> for n from 0 to `last`. */
export function summed({ values, errors }: CorrelationSums, last: number, weight: (n: number) => number): Interval {
  let sum = point(0);
  for (let n = last; n >= 0; n--) {
    const [w, value, error] = [weight(n), values[n]!, errors[n]!];
    sum = plus(sum, { low: below(below(w * value) - w * error), high: above(above(w * value) + above(w * error)) });
  }
  return sum;
}

const GREEN =
  "Green's function of the dual walk: first passages of reduced words in the modular group, bounded on both sides, summed over cosets";

export function limitVariance({ sums, modular, head, poisson }: Computed): LimitVariance {
  if (modular?.variance !== undefined) {
    const { low, high } = modular.variance;
    return { variance: enclosedQuantity(low, high, GREEN), terms: false, notes: [] };
  }
  if (modular?.dominating !== undefined && head !== undefined) {
    const last = Math.min(sums.values.length, head.values.length) - 1;
    const first = summed(sums, last, (n) => (n === 0 ? 1 : 2));
    const tail = Math.max(
      0,
      minus(
        modular.dominating,
        summed(head, last, () => 2),
      ).high,
    );
    const low = Math.max(0, below(first.low - tail));
    const high = above(first.high + tail);
    const method = `<f, f> + 2 sum of <f, P^n f> for n = 1 to ${last}; the terms beyond add at most ${tail.toExponential(2)}: the sum without phases, by Green's function of the dual walk, less its first terms`;
    const middle = Math.min(high, Math.max(low, (first.low + first.high) / 2));
    return { variance: { ...enclosedQuantity(low, high, method), value: middle }, terms: true, notes: [] };
  }
  return poisson === undefined ? partialSum(sums) : byPoisson(poisson, sums);
}

function byPoisson(fit: PoissonFit, sums: CorrelationSums): LimitVariance {
  const { frequencies, norm } = fit;
  const residual = estimatedQuantity(fit.residual / norm, `least squares over ${frequencies} frequencies`);
  const adjointResidual = estimatedQuantity(fit.adjointResidual / norm, "the same for the adjoint");
  const decay = decayOf(sums);
  const share = (fit.residual * fit.adjointResidual) / norm ** 2;
  return {
    variance: estimatedQuantity(
      fit.variance,
      `2 (<f, g> + <h, r>) - <f, f>, g and h the best solutions of f = g - P g + r and f = h - P* h on ${frequencies} frequencies`,
    ),
    terms: false,
    poisson: {
      frequencies,
      residual,
      adjointResidual,
      byNorms: estimatedQuantity(fit.byNorms, "|g|^2 - |P g|^2"),
      ...(decay === undefined ? {} : { decay }),
    },
    notes:
      share > 0.02
        ? [
            `The equation f = g - P g is solved up to ${((100 * fit.residual) / norm).toFixed(0)} % of |f| only: the variance may be far from the limit.`,
          ]
        : [],
  };
}

const FITTED = 4;

/** From the largest of the last few correlations and of as many before them. */
function decayOf({ values }: CorrelationSums): Quantity | undefined {
  if (values.length <= 2 * FITTED) return undefined;
  const largest = (list: readonly number[]) => Math.max(...list.map(Math.abs));
  const [before, last] = [largest(values.slice(-2 * FITTED, -FITTED)), largest(values.slice(-FITTED))];
  if (!(last > 0) || !(before > 0)) return undefined;
  const n = values.length - 1;
  return estimatedQuantity(
    Math.sqrt(Math.sqrt(last / before)),
    `(largest |<f, P^n f>| of n = ${n - FITTED + 1} to ${n} over that of the ${FITTED} before)^(1/${FITTED})`,
  );
}

function partialSum({ values }: CorrelationSums): LimitVariance {
  const last = values.length - 1;
  let sum = 0;
  for (let n = last; n >= 1; n--) sum += values[n]!;
  const value = Math.max(0, values[0]! + 2 * sum);
  const left = values.slice(-LAST_SHOWN);
  const share = (2 * left.reduce((s, x) => s + Math.abs(x), 0)) / values[0]!;
  const notes =
    share > 0.05
      ? [
          `The last ${left.length} correlations computed still add ${(100 * share).toFixed(0)} % of <f, f>: the partial sum may be far from the limit.`,
        ]
      : [];
  const method = `<f, f> + 2 sum of <f, P^n f> for n = 1 to ${last}; the terms beyond are left out`;
  return { variance: estimatedQuantity(value, method), terms: true, notes };
}
