/**
 * A walk on PGL_2(Z), letter by letter, and its first passages (see words.ts).
 *
 * The walk g_n = B_1 ... B_n is expanded: a state says which letters of the drawn move are
 * still to be read (none: the next move is to be drawn), whether a swap is pending (it
 * exchanges v and V in what follows) and, where signs are kept, the sign of the matrix
 * against its word. F_x, for a
 * letter x, has in row i, column j the probability that the walk, started at the identity
 * in state i, ever stands at x and then is in state j the first time. The Cayley graph is
 * a tree of triangles, so these solve
 *   F_u = T_e F_u + T_u + T_v F_V F_u + T_V F_v F_u
 *   F_v = T_e F_v + T_v + T_u F_u J F_v + T_V F_V,   F_V alike with v and V exchanged,
 * of which they are the least non-negative solution (J turns the sign, since u u = -1;
 * T_e: moves equal to the identity). Visits to the identity: N = (I - R)^-1,
 * R = T_e + T_u F_u J + T_v F_V + T_V F_v. Method: first-passage systems of walks on
 * virtually free groups (Lalley, Ann. Probab. 1993; Woess, Random walks on infinite graphs
 * and groups, 2000).
 *
 * Bounds. Iterating from 0 with rounding down stays below the least solution; any G >= 0
 * with Phi(G) <= G, evaluated with rounding up, is above it.
 */
import type { Rational } from "../exact/rational.js";
import { chainOf, LETTERS } from "./chain.js";
import { LeastSolver, type MatrixBounds, type VectorBounds } from "./solve.js";
import { derivative, each, filled, image, isAbove, largestStep, returns, supportOf, type Triple } from "./system.js";
import type { Letter, Matrix2 } from "./words.js";

export interface PassageOptions {
  /** Keep the sign of the matrix, for odd observables: twice the states. */
  readonly signs?: boolean;
  /** Weighs every move by this factor as well (0 < z): generating functions. Default 1. */
  readonly z?: number;
  /** Most states; more are refused by returning undefined. Default 400. */
  readonly mostStates?: number;
}

/** Bounded first-passage matrices and what belongs to them. */
export interface Passage {
  readonly states: number;
  readonly signed: boolean;
  /** Whether some move has determinant -1. */
  readonly swaps: boolean;
  readonly first: Readonly<Record<Letter, MatrixBounds>>;
  /** Row vector: 1 at the state before the first draw. */
  readonly initial: VectorBounds;
  /** Column: 1 at the state before a draw with that swap and that sign. */
  readonly drawn: (swap: boolean, sign: 1 | -1) => Float64Array;
  /** Solver for visits: x = f + R x. */
  readonly visits: LeastSolver;
}

const MOST_ITERATIONS = 20_000;

/**
 * Bounds of the first-passage matrices of the walk with these moves; undefined where no
 * upper bound could be proved (a recurrent walk: the group is finite or nearly cyclic, or
 * z is past the radius of convergence) or where the states are too many.
 */
export function passage(
  matrices: readonly Matrix2[],
  probabilities: readonly Rational[],
  options: PassageOptions = {},
): Passage | undefined {
  const { signs = false, z = 1, mostStates = 400 } = options;
  const chain = chainOf(matrices, probabilities, { signs, z, mostStates });
  if (chain === undefined) return undefined;
  const { n } = chain;
  let low = filled(n, 0);
  let before = Number.POSITIVE_INFINITY;
  for (let k = 0; ; k++) {
    const next = image(chain, low, "low");
    const step = largestStep(low, next);
    low = each(low, next, Math.max);
    if (step < 1e-17 || (step < 1e-14 && step >= before)) break;
    if (k > MOST_ITERATIONS || low.u.some((x) => x > 1e6)) return undefined;
    before = step;
  }

  // H = 1 + Phi'(F) H on the support: in its direction Phi(F + eps H) = F + eps (H - 1) + O(eps^2).
  const ones = supportOf(chain);
  let h = ones;
  for (let k = 0; ; k++) {
    const d = derivative(chain, low, h, "high");
    const next = each(ones, d, (a, b) => (b + 1) * a);
    const step = largestStep(h, next);
    h = next;
    const size = Math.max(...LETTERS.map((x) => h[x].reduce((a, b) => Math.max(a, b), 0)));
    if (step < 1e-3 * size) break;
    if (k > MOST_ITERATIONS || size > 1e13) return undefined;
  }
  let high: Triple | undefined;
  for (let slack = 2 ** -50; slack < 2 ** -12 && high === undefined; slack *= 2) {
    const tried = each(low, h, (a, b) => a + slack * b);
    if (isAbove(chain, tried, ones)) high = tried;
  }
  if (high === undefined) return undefined;

  const proved = high;
  const bounds = (x: Letter): MatrixBounds => ({ low: low[x], high: proved[x] });
  return {
    states: n,
    signed: signs,
    swaps: chain.swaps,
    first: { u: bounds("u"), v: bounds("v"), V: bounds("V") },
    initial: chain.initial,
    drawn: chain.drawn,
    visits: new LeastSolver({ low: returns(chain, low, "low"), high: returns(chain, proved, "high") }),
  };
}
