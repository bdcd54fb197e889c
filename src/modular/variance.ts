/**
 * The limit variance of a trigonometric polynomial in dimension 2, by Green's function of
 * the dual walk, without enumeration: for f = sum c_k cos(2 pi k.x) + s_k sin(2 pi k.x)
 * (one of k, -k each, no constant) and a walk without translations,
 *   sigma^2 = <f, f> + 2 sum_{n >= 1} <f, P^n f>
 *           = sum_{k, j} c_k c_j (G(k -> +-j) - [k = j] / 2)
 *                      + s_k s_j (G(k -> j) - G(k -> -j) - [k = j] / 2),
 * since <cos_j, P^n cos_k> = P(k goes to +-j in n moves) / 2, and sines alike with signs.
 */
import type { ExactNumber } from "../exact/number.js";
import { above, below, type Interval, minus, plus, point, times } from "../quantity/interval.js";
import type { Term, Walk } from "../walk/walk.js";
import { Green } from "./green.js";
import { passage } from "./passage.js";
import type { Matrix2 } from "./words.js";

/** A double's width around an exact number. */
function enclose(x: ExactNumber): Interval {
  if (x.rational?.isInteger() && Math.abs(Number(x.rational.num)) < 2 ** 53) return point(Number(x.rational.num));
  // toNumber is within two units in the last place.
  const value = x.toNumber();
  return { low: below(below(below(value))), high: above(above(above(value))) };
}

interface Coefficient {
  readonly frequency: readonly [bigint, bigint];
  readonly cos: Interval;
  readonly sin: Interval;
}

/** One of k and -k each, the constant left out, equal frequencies merged. */
function gather(terms: readonly Term[]): Coefficient[] {
  const merged = new Map<string, Coefficient>();
  for (const term of terms) {
    let [a, b] = term.frequency as [bigint, bigint];
    if (a === 0n && b === 0n) continue;
    let sin = enclose(term.sin);
    if (a < 0n || (a === 0n && b < 0n)) {
      [a, b] = [-a, -b];
      sin = { low: -sin.high, high: -sin.low };
    }
    const key = `${a},${b}`;
    const before = merged.get(key);
    const cos = enclose(term.cos);
    merged.set(key, {
      frequency: [a, b],
      cos: before === undefined ? cos : plus(before.cos, cos),
      sin: before === undefined ? sin : plus(before.sin, sin),
    });
  }
  return [...merged.values()];
}

const isZero = (x: Interval) => x.low === 0 && x.high === 0;

/** The transposed move, which the dual walk applies. */
function transposed(matrix: readonly (readonly bigint[])[]): Matrix2 {
  const [[a, b], [c, d]] = matrix as [[bigint, bigint], [bigint, bigint]];
  return [a, c, b, d];
}

/** Green's functions of one walk, made when first needed: several observables share them. */
export class PlanarVariance {
  private even: Green | undefined | null = null;
  private odd: Green | undefined | null = null;

  /** @param walk dimension 2, no translations */
  constructor(private readonly walk: Walk) {
    if (walk.dimension !== 2 || walk.moves.some((m) => m.translation !== undefined)) {
      throw new RangeError("PlanarVariance: takes a walk of dimension 2 without translations");
    }
  }

  private green(signs: boolean): Green | undefined {
    const known = signs ? this.odd : this.even;
    if (known !== null) return known;
    const moves = this.walk.moves;
    let found: Green | undefined;
    try {
      const first = passage(
        moves.map((m) => transposed(m.matrix)),
        moves.map((m) => m.probability),
        { signs },
      );
      found = first === undefined ? undefined : new Green(first);
    } catch (error) {
      if (!(error instanceof RangeError)) throw error; // a word beyond the limit: no Green's function here
    }
    if (signs) this.odd = found;
    else this.even = found;
    return found;
  }

  /**
   * An interval that contains sigma^2, or undefined where none could be proved (a
   * recurrent or too large walk; then use enumeration).
   */
  enclose(terms: readonly Term[]): Interval | undefined {
    const list = gather(terms);
    let sum = point(0);
    for (const from of list) {
      for (const to of list) {
        const c = times(from.cos, to.cos);
        const s = times(from.sin, to.sin);
        const half = point(from === to ? 0.5 : 0);
        if (!isZero(c)) {
          const visits = this.green(false)?.visits(from.frequency, to.frequency);
          if (visits === undefined) return undefined;
          sum = plus(sum, times(c, minus(visits, half)));
        }
        if (!isZero(s)) {
          const green = this.green(true);
          const there = green?.visits(from.frequency, to.frequency, 1);
          const opposite = green?.visits(from.frequency, to.frequency, -1);
          if (there === undefined || opposite === undefined) return undefined;
          sum = plus(sum, times(s, minus(minus(there, opposite), half)));
        }
      }
    }
    return { low: Math.max(0, sum.low), high: sum.high };
  }
}
