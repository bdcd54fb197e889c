/** Functions and moves as integers over common denominators, for dual walks without any rounding. */
import { gcdBig, Rational } from "../exact/rational.js";
import type { DualMove, DualShape, IntegerTerm } from "../kernel/dual.js";
import type { Walk } from "../walk/walk.js";
import { integerWeights } from "../walk/weights.js";
import type { TrigPolynomial } from "./polynomial.js";

export interface IntegerTerms {
  readonly terms: readonly IntegerTerm[];
  /** Coefficients are these integers over `scale`. */
  readonly scale: bigint;
  /** Sum of |real| + |imaginary| over all frequencies, k and -k. */
  readonly size: bigint;
}

/** Why the dual walk of this walk cannot be followed in integers; undefined where it can. */
export function notInIntegers(walk: Walk): string | undefined {
  if (walk.moves.some((m) => m.translation?.some((b) => b.rational?.isInteger() !== true))) {
    return "a walk with translations";
  }
  const { total } = integerWeights(walk);
  return total < 1n << 53n ? undefined : `weights with the common denominator ${total}`;
}

/** The moves given, with their weights as numerators over `total`. Needs `notInIntegers(walk)` undefined. */
export function integerMoves(walk: Walk, moves: readonly DualMove[]): { moves: DualMove[]; total: bigint } {
  const { weights, total } = integerWeights(walk);
  return { moves: moves.map(({ matrix }, i) => ({ matrix, weight: Number(weights[i]) })), total };
}

const absolute = (x: bigint) => (x < 0n ? -x : x);

/** The centred polynomial as a folded table's terms, as `tableTerms` does; undefined where a coefficient is not rational. */
export function integerTerms(f: TrigPolynomial, shape: DualShape): IntegerTerms | undefined {
  let scale = 2n;
  for (const { cos, sin } of f.harmonics) {
    const [c, s] = [cos.rational, sin.rational];
    if (c === undefined || s === undefined) return undefined;
    for (const x of [c, s]) scale = (scale / gcdBig(scale, 2n * x.den)) * 2n * x.den;
  }
  const odd = shape.width === 1 && shape.fold === "conjugate";
  const whole = (x: Rational) => x.mul(Rational.of(scale, 2n)).num;
  let size = 0n;
  const terms = f.harmonics.map(({ frequency, cos, sin }) => {
    const re = whole(cos.rational as Rational);
    const im = -whole(sin.rational as Rational);
    size += 2n * (absolute(re) + absolute(im));
    return { frequency, re: odd ? im : re, im };
  });
  return { terms, scale, size };
}
