/** The sums of averages in dimension 2 without enumeration: what goes to src/modular, and what comes back. */
import type { ExactForm } from "../dual/form.js";
import type { TrigPolynomial } from "../dual/polynomial.js";
import { Rational } from "../exact/rational.js";
import { PlanarSums, type PlanarTerm } from "../modular/variance.js";
import { above, below, type Interval, plus, point, root, times } from "../quantity/interval.js";
import type { Walk } from "../walk/walk.js";

export interface ModularPayload {
  readonly moves: readonly {
    readonly matrix: readonly (readonly bigint[])[];
    readonly num: bigint;
    readonly den: bigint;
  }[];
  readonly translated: boolean;
  readonly states: number;
  /** Each z at which generating functions are asked for, in (0, 1]. */
  readonly at: readonly number[];
  readonly observables: readonly (readonly PlanarTerm[])[];
}

/** Of one observable f; each undefined where nothing was proved. */
export interface ModularSums {
  /** Without translations: the limit variance. */
  readonly variance?: Interval;
  /** With translations: 2 sum over n >= 0 of <F, Q^n F>, F with the coefficients |f_k|, Q the walk without translations. */
  readonly dominating?: Interval;
  /** 2 sum of z^n <f, P^n f> over n >= 0, for each z (without translations only). */
  readonly generating: readonly (Interval | undefined)[];
}

function around(form: ExactForm): Interval {
  const { value, error } = form.toDouble();
  return error === 0 ? point(value) : { low: below(value - error), high: above(value + error) };
}

export function planarTerms(f: TrigPolynomial): PlanarTerm[] {
  return f.harmonics.map(({ frequency, cos, sin }) => ({
    frequency: frequency as readonly [bigint, bigint],
    cos: around(cos),
    sin: around(sin),
  }));
}

/** The coefficients' moduli, as cosines. */
function moduli(terms: readonly PlanarTerm[]): PlanarTerm[] {
  return terms.map(({ frequency, cos, sin }) => {
    const size = isExactZero(sin) ? magnitude(cos) : root(plus(times(cos, cos), times(sin, sin)));
    return { frequency, cos: size, sin: point(0) };
  });
}

const isExactZero = (x: Interval) => x.low === 0 && x.high === 0;
/** The larger end on both sides would do as a bound; this keeps numbers that are exact. */
const magnitude = (x: Interval): Interval =>
  x.low >= 0 ? x : x.high <= 0 ? { low: -x.high, high: -x.low } : { low: 0, high: Math.max(-x.low, x.high) };

/** Everything asked of the observables; the observables share the walk's first passages. */
export function modularSums({ moves, translated, states, at, observables }: ModularPayload): ModularSums[] {
  const list = moves.map(({ matrix, num, den }) => ({ matrix, probability: Rational.of(num, den) }));
  const whole = new PlanarSums(list, 1, states);
  const damped = at.map((z) => (z === 1 ? whole : new PlanarSums(list, z, states)));
  return observables.map((terms) => {
    if (translated) {
      const dominating = whole.twice(moduli(terms));
      return { ...(dominating === undefined ? {} : { dominating }), generating: at.map(() => undefined) };
    }
    const variance = whole.variance(terms);
    return { ...(variance === undefined ? {} : { variance }), generating: damped.map((sums) => sums.twice(terms)) };
  });
}

export function modularPayload(
  walk: Walk,
  observables: readonly TrigPolynomial[],
  states: number,
  at: readonly number[],
): ModularPayload {
  return {
    moves: walk.moves.map(({ matrix, probability }) => ({ matrix, num: probability.num, den: probability.den })),
    translated: walk.moves.some((m) => m.translation !== undefined),
    states,
    at,
    observables: observables.map(planarTerms),
  };
}
