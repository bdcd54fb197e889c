/**
 * The top exponent of any finite set in dimension 2, enclosed.
 *
 * lambda_1 = integral of sum p_i log(|A_i v| / |v|) nu(dv), nu the stationary law on directions
 * (Furstenberg and Kesten 1960). In pieces (see cylinders.ts) it is a pairing <f> = sum_j of
 * integrals of functions f_j on the cone C against the laws m_j. On the part of C where the
 * word begins with a, written s = 1/t in [0, 1], and on the part where it begins with b, t in
 * [0, 1], runs of one letter give
 *   <f> = <T f>,   (T f)_B(t) = sum_l (P_a^l)' f_A(1/(l + t)),  (T f)_A(s) = sum_l (P_b^l)' f_B(1/(l + s)),
 * l = 1, 2, ...: the transfer operator of continued fractions with matrices as weights. T f
 * is analytic away from [-1, -infinity), whatever f was on [0, 1].
 *
 * Certificate. <1> = 1, so for ANY h and any number L
 *   lambda_1 - L = <T (f - L) + T h - h>,
 * and since the m_j have mass at most 1, |<r>| <= sum_j max(sup |r_A,j|, sup |r_B,j|). h (a
 * polynomial in Chebyshev's basis) and L are found in doubles, by iteration; then r is bounded.
 * r is analytic and at most B on the ellipse with foci 0, 1 and half axes (3 +- 1/3) / 4, so it
 * is within tau = 2 B 3^-(M-1) / (3 - 1) of a polynomial q of degree M - 1 (Trefethen,
 * Approximation Theory and Approximation Practice, 2013, theorem 8.2). sup |q| is at most
 * Lebesgue's constant K times its largest value at the M Chebyshev nodes; at points within
 * 2^-49 of them it differs by 2^-49 2 (M - 1)^2 sup |q| at most (A. A. Markov). There r is
 * evaluated by arithmetic that accounts for every rounding:
 *   sup |r| <= K' (max |r| + tau) + tau,   K' = K / (1 - 2^-48 K (M - 1)^2).
 */
import type { Rational } from "../exact/rational.js";
import { lebesgue } from "../growth/positive/chebyshev.js";
import type { Real } from "../kernel/real.js";
import type { Interval } from "../quantity/interval.js";
import { type Candidate, DEGREE, search } from "./candidate.js";
import { chebyshev, dot, onEllipse, roots, roundingOf } from "./chebyshev.js";
import { type Cylinder, type Directions, directionsOf } from "./cylinders.js";
import { passage } from "./passage.js";
import { other, PARTS, type Part, rowSums, sideOf, total } from "./runs.js";
import { Operator } from "./transfer.js";
import type { Matrix2 } from "./words.js";

/** Largest numbers of states and of pieces. */
const STATES = 160;
const PIECES = 2000;
/** Nodes of the certificate. */
const NODES = 52;

/** The ellipse of the certificate. On it Re(l + z) >= l - 1/3, so 1/(l + z) lies within |x| + |x - 1| <= 5/2, r = 2. */
const R = 3;
/** A parameter at least that of the points 1/(l + z): half the sum of distances to the foci, times 2, is 5/2 = (r + 1/r) / 2. */
const R_IMAGE = 4.8;

/** Bounds of r on [0, 1] for every state, and with them of lambda_1. */
function certify(operator: Operator, { value, h }: Candidate, real: Real): Interval | undefined {
  const { n, sides, directions } = operator;
  const nodes = roots(NODES, real);
  const exact = lebesgue(NODES, 1);
  const constant = (exact / (1 - 2 ** -48 * exact * NODES * NODES)) * (1 + 2 ** -40);
  const worst: Record<Part, Float64Array> = { A: new Float64Array(n), B: new Float64Array(n) };
  for (const part of PARTS) {
    const from = h[other(part)];
    const rounding = from.map(roundingOf);
    const own = h[part];
    const ownRounding = own.map(roundingOf);
    const side = sides[part];
    // What the sums over runs leave out, anywhere on [0, 1]: growth is at most `swing` there.
    const largest = Math.max(...from.map((c) => onEllipse(c, 1)));
    const omitted =
      side.rows.reduce((s, { tail }, piece) => s + tail * (swing(directions, piece, real) + Math.abs(value)), 0) +
      n * side.tail * largest;
    const basis = new Float64Array(DEGREE);
    for (const x of nodes) {
      const source = operator.source(part, x, value);
      const image = operator.image(part, x, from, rounding);
      chebyshev(x, DEGREE, basis);
      for (let k = 0; k < n; k++) {
        const parts = [source.value(k), image.value(k), -dot(own[k]!, basis)] as const;
        const sum = parts[0] + parts[1] + parts[2];
        const rounding = (Math.abs(parts[0]) + Math.abs(parts[1]) + Math.abs(parts[2])) * 2 ** -51;
        const bound =
          (Math.abs(sum) + rounding + source.radius(k) + image.radius(k) + ownRounding[k]!) * (1 + 2 ** -40);
        if (!(bound <= Number.MAX_VALUE)) return undefined;
        worst[part][k] = Math.max(worst[part][k]!, bound);
      }
    }
    // On the ellipse: logarithms of quotients are within log(4 x swing's quotient) + pi.
    const spread = side.rows.reduce(
      (s, { powers, tail }, piece) =>
        s +
        (powers.reduce((t, { mid, rad }) => t + total(mid) + total(rad), 0) + tail) *
          (swing(directions, piece, real) + 1.4 + 3.2 + Math.abs(value)),
      0,
    );
    const images = Math.max(...from.map((c) => onEllipse(c, R_IMAGE)));
    const runs = side.powers.reduce((s, { mid, rad }) => s + rowSums(mid, n) + rowSums(rad, n), side.tail);
    for (let k = 0; k < n; k++) {
      const bound = spread + n * runs * images + onEllipse(own[k]!, R);
      const tau = ((2 * bound) / (R - 1)) * R ** (1 - NODES);
      worst[part][k] = (constant * (worst[part][k]! + omitted + tau) + tau) * (1 + 2 ** -40);
    }
  }
  let radius = 0;
  for (let k = 0; k < n; k++) radius += Math.max(worst.A[k]!, worst.B[k]!);
  radius *= 1 + n * 2 ** -50;
  if (!(radius <= Number.MAX_VALUE)) return undefined;
  const low = value - radius;
  const high = value + radius;
  return { low: low - Math.abs(low) * 2 ** -52, high: high + Math.abs(high) * 2 ** -52 };
}

/** The largest |log(|A_i v| / |v|)| on a piece: quotients of linear forms lie between those of their coefficients. */
function swing({ cylinders }: Directions, piece: number, real: Real): number {
  const { base, moved } = cylinders[piece] as Cylinder;
  let quotient = 1;
  for (const { alpha, beta } of moved) {
    for (const q of [alpha / base.alpha, beta / base.beta]) quotient = Math.max(quotient, q, 1 / q);
  }
  return real.log(quotient) * (1 + 2 ** -40) + 2 ** -40;
}

/**
 * An interval that contains the top exponent, natural logs per move; undefined where this
 * route does not lead to one (a recurrent walk, words or runs too long). The group must keep
 * no finite set of lines. Width 1e-12 or so for moves of small entries.
 * @param work products and logarithms that may be spent; about 10^9 take a second or two
 */
export function encloseExponent(
  matrices: readonly Matrix2[],
  probabilities: readonly Rational[],
  real: Real,
  work = Number.POSITIVE_INFINITY,
): Interval | undefined {
  let walk: ReturnType<typeof passage>;
  try {
    walk = passage(matrices, probabilities, { mostStates: STATES });
  } catch (error) {
    if (error instanceof RangeError) return undefined;
    throw error;
  }
  if (walk === undefined) return undefined;
  const directions = directionsOf(walk, matrices, PIECES);
  if (directions === undefined) return undefined;
  const { steps, cylinders, states: n } = directions;
  const toB = sideOf(steps.a, cylinders, n);
  const toA = sideOf(steps.b, cylinders, n);
  if (toA === undefined || toB === undefined) return undefined;
  const runs = toA.powers.length + toB.powers.length;
  const point = cylinders.length * (30 * (matrices.length + 1) + n) + n * (n + DEGREE);
  const sweep = n * (n + DEGREE) * DEGREE;
  if (runs * ((NODES + DEGREE) * point + 60 * sweep) > work) return undefined;
  const shares = probabilities.map((p) => p.toNumber());
  const operator = new Operator(directions, shares, real, { A: toA, B: toB });
  return certify(operator, search(operator, real), real);
}
