/**
 * Sums over n of <f, P^n f> in dimension 2, by Green's function of the dual walk, without
 * enumeration: for f = sum c_k cos(2 pi k.x) + s_k sin(2 pi k.x) (one of k, -k each, no
 * constant) and a walk without translations,
 *   2 sum_{n >= 0} z^n <f, P^n f> = sum_{k, j} c_k c_j G_z(k -> +-j)
 *                                       + s_k s_j (G_z(k -> j) - G_z(k -> -j)),
 * since <cos_j, P^n cos_k> = P(k goes to +-j in n moves) / 2, and sines alike with signs.
 * At z = 1 that less <f, f> is the limit variance <f, f> + 2 sum_{n >= 1} <f, P^n f>.
 */
import type { Rational } from "../exact/rational.js";
import { type Interval, minus, plus, point, times } from "../quantity/interval.js";
import { Green } from "./green.js";
import { type Passage, passage } from "./passage.js";
import type { Matrix2 } from "./words.js";

/** One of k and -k each, the constant left out, no frequency twice. */
export interface PlanarTerm {
  readonly frequency: readonly [bigint, bigint];
  readonly cos: Interval;
  readonly sin: Interval;
}

/** A move's matrix, row after row, and its probability. */
export interface PlanarMove {
  readonly matrix: readonly (readonly bigint[])[];
  readonly probability: Rational;
}

const isZero = (x: Interval) => x.low === 0 && x.high === 0;

/** The transposed move, which the dual walk applies. */
export function transposed(matrix: readonly (readonly bigint[])[]): Matrix2 {
  const [[a, b], [c, d]] = matrix as [[bigint, bigint], [bigint, bigint]];
  return [a, c, b, d];
}

/** Green's functions of one walk, made when first needed: several observables share them. */
export class PlanarSums {
  private readonly known = new Map<boolean, Green | undefined>();

  /**
   * @param moves of dimension 2; translations are not looked at
   * @param mostStates of the expanded walk: beyond them nothing is proved
   */
  constructor(
    private readonly moves: readonly PlanarMove[],
    private readonly z = 1,
    private readonly mostStates = 400,
  ) {}

  private green(signs: boolean): Green | undefined {
    if (!this.known.has(signs)) {
      const first = this.passages(signs);
      this.known.set(signs, first === undefined ? undefined : new Green(first));
    }
    return this.known.get(signs);
  }

  private passages(signs: boolean): Passage | undefined {
    const { moves, z, mostStates } = this;
    try {
      return passage(
        moves.map((m) => transposed(m.matrix)),
        moves.map((m) => m.probability),
        { signs, z, mostStates },
      );
    } catch (error) {
      if (error instanceof RangeError) return undefined; // a word beyond the limit: no Green's function here
      throw error;
    }
  }

  /**
   * An interval that contains 2 sum_{n >= 0} z^n <f, P^n f>, or undefined where none could
   * be proved (a recurrent walk, z beyond the radius of convergence, too many states).
   */
  twice(terms: readonly PlanarTerm[]): Interval | undefined {
    let sum = point(0);
    for (const from of terms) {
      for (const to of terms) {
        const c = times(from.cos, to.cos);
        const s = times(from.sin, to.sin);
        if (!isZero(c)) {
          const visits = this.green(false)?.visits(from.frequency, to.frequency);
          if (visits === undefined) return undefined;
          sum = plus(sum, times(c, visits));
        }
        if (!isZero(s)) {
          const green = this.green(true);
          const there = green?.visits(from.frequency, to.frequency, 1);
          const opposite = green?.visits(from.frequency, to.frequency, -1);
          if (there === undefined || opposite === undefined) return undefined;
          sum = plus(sum, times(s, minus(there, opposite)));
        }
      }
    }
    return sum;
  }

  /** An interval that contains the limit variance of a walk without translations; z is 1. */
  variance(terms: readonly PlanarTerm[]): Interval | undefined {
    const twice = this.twice(terms);
    if (twice === undefined) return undefined;
    const { low, high } = minus(twice, squareNorm(terms));
    return { low: Math.max(0, low), high };
  }
}

/** <f, f>: half the sum of the squared coefficients. */
export function squareNorm(terms: readonly PlanarTerm[]): Interval {
  let sum = point(0);
  for (const { cos, sin } of terms) sum = plus(sum, plus(times(cos, cos), times(sin, sin)));
  return times(sum, point(0.5));
}
