/** Observables in the form that the kernel evaluates: distinct frequencies, doubles, 64-bit bounds. */
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import type { ObservableProgram, ObserveProgram } from "../kernel/observe.js";
import type { Observable, Term, Walk } from "../walk/walk.js";

/** A position stands within this distance of its coordinate (unit 2^-64, floor right up to one unit). */
export const RESOLUTION = 2 ** -63;

const FULL = 1n << 64n;

/**
 * floor(x 2^64) for a bound of a box. Positions are floors too, so X >= floor(low) stands for
 * x >= low and X < floor(high) for x < high, also where a fraction lies on the side itself;
 * other points are misjudged only within `RESOLUTION` of a side.
 */
function bound(x: ExactNumber): bigint {
  if (x.rational !== undefined) return Rational.of(x.rational.num << 64n, x.rational.den).floor();
  return x.toFixed(128) >> 64n;
}

function oneNorm(frequency: readonly bigint[]): number {
  return Number(frequency.reduce((s, k) => s + (k < 0n ? -k : k), 0n));
}

function amplitude(term: Term): number {
  return Math.abs(term.cos.toNumber()) + Math.abs(term.sin.toNumber());
}

/** A bound on |f|: the sum of |c| + |s|; 1 for a box. */
export function observableSize(f: Observable): number {
  return f.type === "box" ? 1 : f.terms.reduce((s, t) => s + amplitude(t), 0);
}

/**
 * A bound on |f - integral of f| for a polynomial, the scale that a variance computed with
 * rounding is judged by; 0 for a box, whose variance is 0 only where it is so exactly.
 */
export function observableSwing(f: Observable): number {
  return f.type === "box" ? 0 : f.terms.reduce((s, t) => s + (oneNorm(t.frequency) > 0 ? amplitude(t) : 0), 0);
}

/**
 * Bound on |computed value - f(x)|: positions within 2^-63 (phases within |k|_1 2^-63 turns),
 * the kernel's cosine and sine within 2^-51, coefficients as doubles within 2^-51 of their
 * size, and one rounding for each operation of the sum. 0 for a box, whose values are 0 and 1.
 */
export function evaluationError(f: Observable): number {
  if (f.type === "box") return 0;
  let error = 0;
  for (const term of f.terms) {
    const size = amplitude(term);
    if (oneNorm(term.frequency) > 0)
      error += size * Math.min(2, 6.2831853072 * oneNorm(term.frequency) * RESOLUTION + 2 ** -51);
  }
  return (error + observableSize(f) * (f.terms.length + 4) * 2 ** -51) * (1 + 2 ** -30);
}

/** @param walk its observables, in order, become the program's. */
export function observeProgram(walk: Walk): ObserveProgram {
  const frequencies: bigint[][] = [];
  const known = new Map<string, number>();
  /** The index of k or -k among the distinct frequencies, and the sign that was turned. */
  const place = (term: Term): { index: number; sign: 1 | -1 } => {
    const sign = (term.frequency.find((k) => k !== 0n) ?? 1n) < 0n ? -1 : 1;
    const frequency = term.frequency.map((k) => (sign < 0 ? -k : k));
    const key = frequency.join();
    let index = known.get(key);
    if (index === undefined) {
      index = frequencies.push(frequency) - 1;
      known.set(key, index);
    }
    return { index, sign };
  };
  const observables = walk.observables.map((f): ObservableProgram => {
    if (f.type === "terms") {
      return {
        type: "waves",
        waves: f.terms.map((term) => {
          const { index, sign } = place(term);
          return { frequency: index, cos: term.cos.toNumber(), sin: sign * term.sin.toNumber() };
        }),
      };
    }
    const sides = f.low.map((x, coordinate) => ({
      coordinate,
      low: bound(x),
      high: bound(f.high[coordinate] as ExactNumber),
    }));
    // A side thinner than the resolution holds no position.
    if (sides.some(({ low, high }) => high <= low)) return { type: "waves", waves: [] };
    return {
      type: "box",
      sides: sides
        .filter(({ low, high }) => !(low === 0n && high === FULL))
        .map(({ coordinate, low, high }) => ({ coordinate, low, span: high - low - 1n })),
    };
  });
  return { dimension: walk.dimension, frequencies, observables };
}
