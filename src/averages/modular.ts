/** The sums of averages in dimension 2 without enumeration: what goes to src/modular, and what comes back. */
import { ExactForm } from "../dual/form.js";
import type { TrigPolynomial } from "../dual/polynomial.js";
import { Rational } from "../exact/rational.js";
import { PlanarSums, type PlanarTerm } from "../modular/variance.js";
import { above, below, type Interval, plus, point, root, times } from "../quantity/interval.js";
import type { Walk } from "../walk/walk.js";

/** A move without what cannot go to a worker. */
export interface ModularMove {
  readonly matrix: readonly (readonly bigint[])[];
  /** Its probability. */
  readonly num: bigint;
  readonly den: bigint;
}

export function movesOf(walk: Walk): ModularMove[] {
  return walk.moves.map(({ matrix, probability }) => ({ matrix, num: probability.num, den: probability.den }));
}

export interface ModularPayload {
  readonly moves: readonly ModularMove[];
  /** Then `observables` are the F of `dominating`. */
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

/** The coefficients' moduli, as cosines: from above, and within a few units in the last place. */
export function moduliOf(f: TrigPolynomial): TrigPolynomial {
  const harmonics = f.harmonics.map(({ frequency, cos, sin }) => {
    const size = sin.isZero && cos.rational !== undefined ? cos.rational.abs() : upperModulus(around(cos), around(sin));
    return { frequency, cos: ExactForm.ofRational(size), sin: ExactForm.ZERO };
  });
  return { constant: ExactForm.ZERO, harmonics };
}

const upperModulus = (cos: Interval, sin: Interval) =>
  Rational.fromNumber(root(plus(times(cos, cos), times(sin, sin))).high);

/** Everything asked of the observables; the observables share the walk's first passages. */
export function modularSums({ moves, translated, states, at, observables }: ModularPayload): ModularSums[] {
  const list = moves.map(({ matrix, num, den }) => ({ matrix, probability: Rational.of(num, den) }));
  const whole = new PlanarSums(list, 1, states);
  const damped = at.map((z) => (z === 1 ? whole : new PlanarSums(list, z, states)));
  return observables.map((terms) => {
    if (translated) {
      const dominating = whole.twice(terms);
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
  const translated = walk.moves.some((m) => m.translation !== undefined);
  return {
    moves: movesOf(walk),
    translated,
    states,
    at,
    observables: observables.map((f) => planarTerms(translated ? moduliOf(f) : f)),
  };
}
