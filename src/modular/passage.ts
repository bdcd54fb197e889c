/**
 * A walk on PGL_2(Z), letter by letter, and its first passages (see words.ts).
 *
 * The walk g_n = B_1 ... B_n is expanded: a state says which move is being read, how many
 * of its letters are done, whether a swap is pending (it exchanges v and V in what
 * follows) and, where signs are kept, the sign of the matrix against its word. F_x, for a
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
import { addBound, type Dense, multiplyBound, type Side } from "./bounds.js";
import { LeastSolver, type MatrixBounds, type VectorBounds } from "./solve.js";
import { type Letter, type Matrix2, swapped, type Word, wordOf } from "./words.js";

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
  /** Row vector: the states just after the first draw, with their weights. */
  readonly initial: VectorBounds;
  /** Column: 1 at states that have just drawn a move, have that swap and that sign. */
  readonly drawn: (swap: boolean, sign: 1 | -1) => Float64Array;
  /** Solver for visits: x = f + R x. */
  readonly visits: LeastSolver;
}

interface Chain {
  readonly n: number;
  readonly low: Readonly<Record<Letter | "e", Dense>>;
  readonly high: Readonly<Record<Letter | "e", Dense>>;
  /** Columns with the sign turned. */
  readonly turn: (m: Dense) => Dense;
  readonly initial: VectorBounds;
  readonly drawn: Passage["drawn"];
}

const LETTERS: readonly Letter[] = ["u", "v", "V"];

/** The expanded chain of moves with the given words and probabilities. */
function expand(words: readonly Word[], weights: readonly { low: number; high: number }[], signs: boolean): Chain {
  const starts: number[] = [];
  let base = 0;
  for (const w of words) {
    starts.push(base);
    base += Math.max(1, w.letters.length);
  }
  const swaps = words.some((w) => w.swap) ? 2 : 1;
  const n = base * swaps * (signs ? 2 : 1);
  const at = (sign: number, swap: number, move: number, letter: number) =>
    ((signs ? sign : 0) * swaps + swap) * base + starts[move]! + letter;
  const zero = () => ({
    u: new Float64Array(n * n),
    v: new Float64Array(n * n),
    V: new Float64Array(n * n),
    e: new Float64Array(n * n),
  });
  const low = zero();
  const high = zero();
  for (let sign = 0; sign < (signs ? 2 : 1); sign++) {
    for (let swap = 0; swap < swaps; swap++) {
      for (const [i, word] of words.entries()) {
        const length = word.letters.length;
        for (let j = 0; j < Math.max(1, length); j++) {
          const letter = word.letters[j];
          const x = letter === undefined ? "e" : swap ? swapped(letter) : letter;
          const row = at(sign, swap, i, j) * n;
          if (j + 1 < length) {
            low[x][row + at(sign, swap, i, j + 1)] = 1;
            high[x][row + at(sign, swap, i, j + 1)] = 1;
            continue;
          }
          // The swap of u is -u: with s u s = -u, each u read under a pending swap turns the sign.
          const turns = (word.sign < 0 ? 1 : 0) + (swap ? word.letters.filter((l) => l === "u").length : 0);
          const nextSign = (sign + turns) % 2;
          const nextSwap = word.swap ? 1 - swap : swap;
          for (const [i2, w] of weights.entries()) {
            low[x][row + at(nextSign, nextSwap, i2, 0)]! += w.low;
            high[x][row + at(nextSign, nextSwap, i2, 0)]! += w.high;
          }
        }
      }
    }
  }
  const half = n / 2;
  const turn = (m: Dense): Dense => {
    if (!signs) return m;
    const out = new Float64Array(n * n);
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) out[i * n + j] = m[i * n + ((j + half) % n)]!;
    }
    return out;
  };
  const initialLow = new Float64Array(n);
  const initialHigh = new Float64Array(n);
  for (const [i, w] of weights.entries()) {
    initialLow[at(0, 0, i, 0)] = w.low;
    initialHigh[at(0, 0, i, 0)] = w.high;
  }
  const drawn: Passage["drawn"] = (swap, sign) => {
    const out = new Float64Array(n);
    if (swap && swaps === 1) return out;
    for (const [i] of words.entries()) {
      out[at(sign < 0 ? 1 : 0, swap ? 1 : 0, i, 0)] = 1;
    }
    return out;
  };
  return { n, low, high, turn, initial: { low: initialLow, high: initialHigh }, drawn };
}

type Triple = Record<Letter, Dense>;

/** Phi(F), rounded to a side. */
function image(chain: Chain, f: Triple, side: Side): Triple {
  const { n, turn } = chain;
  const t = side === "low" ? chain.low : chain.high;
  const mul = (a: Dense, b: Dense) => multiplyBound(a, b, n, side);
  const throughU = turn(mul(t.u, f.u));
  const detour = addBound(side, mul(t.v, f.V), mul(t.V, f.v));
  return {
    u: addBound(side, t.u, mul(t.e, f.u), mul(detour, f.u)),
    v: addBound(side, t.v, mul(t.e, f.v), mul(throughU, f.v), mul(t.V, f.V)),
    V: addBound(side, t.V, mul(t.e, f.V), mul(throughU, f.V), mul(t.v, f.v)),
  };
}

/** The derivative of Phi at F in direction H, in plain doubles. */
function derivative(chain: Chain, f: Triple, h: Triple): Triple {
  const { n, turn, high: t } = chain;
  const mul = (a: Dense, b: Dense) => multiplyBound(a, b, n, "high");
  const add = (...terms: Dense[]) => addBound("high", ...terms);
  const detour = add(mul(t.v, f.V), mul(t.V, f.v));
  const detourH = add(mul(t.v, h.V), mul(t.V, h.v));
  const throughU = turn(mul(t.u, f.u));
  const throughUH = turn(mul(t.u, h.u));
  return {
    u: add(mul(t.e, h.u), mul(detour, h.u), mul(detourH, f.u)),
    v: add(mul(t.e, h.v), mul(throughU, h.v), mul(throughUH, f.v), mul(t.V, h.V)),
    V: add(mul(t.e, h.V), mul(throughU, h.V), mul(throughUH, f.V), mul(t.v, h.v)),
  };
}

function each(f: Triple, g: Triple, body: (a: number, b: number) => number): Triple {
  const out = {} as Triple;
  for (const x of LETTERS) out[x] = f[x].map((a, i) => body(a, g[x][i]!));
  return out;
}

function largestStep(f: Triple, g: Triple): number {
  let most = 0;
  for (const x of LETTERS) for (let i = 0; i < f[x].length; i++) most = Math.max(most, g[x][i]! - f[x][i]!);
  return most;
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
  const words = matrices.map(wordOf);
  const weights = probabilities.map((p) => {
    const w = p.toNumber() * z;
    // Two roundings at most; weights that are exact doubles stay exact at z = 1.
    const exact = z === 1 && Number.isInteger(w * 2 ** 40) && p.den <= 1n << 40n && (p.den & (p.den - 1n)) === 0n;
    return exact ? { low: w, high: w } : { low: w * (1 - 2 ** -51), high: w * (1 + 2 ** -51) };
  });
  const length = words.reduce((s, w) => s + Math.max(1, w.letters.length), 0);
  if (length * (signs ? 2 : 1) * (words.some((w) => w.swap) ? 2 : 1) > mostStates) return undefined;
  const chain = expand(words, weights, signs);
  const { n } = chain;
  const zeros = (): Triple => ({ u: new Float64Array(n * n), v: new Float64Array(n * n), V: new Float64Array(n * n) });

  let low = zeros();
  let before = Number.POSITIVE_INFINITY;
  for (let k = 0; ; k++) {
    const next = image(chain, low, "low");
    const step = largestStep(low, next);
    low = each(low, next, Math.max);
    if (step < 1e-17 || (step < 1e-14 && step >= before)) break;
    if (k > MOST_ITERATIONS || low.u.some((x) => x > 1e6)) return undefined;
    before = step;
  }

  // H = 1 + Phi'(F) H: in its direction Phi(F + eps H) = F + eps (H - 1) + O(eps^2).
  const ones = zeros();
  for (const x of LETTERS) ones[x].fill(1);
  let h = ones;
  for (let k = 0; ; k++) {
    const d = derivative(chain, low, h);
    const next = each(ones, d, (a, b) => a + b);
    const step = largestStep(h, next);
    h = next;
    const size = Math.max(...LETTERS.map((x) => h[x].reduce((a, b) => Math.max(a, b), 0)));
    if (step < 1e-3 * size) break;
    if (k > MOST_ITERATIONS || size > 1e13) return undefined;
  }
  let high: Triple | undefined;
  for (let slack = 2 ** -50; slack < 2 ** -12 && high === undefined; slack *= 2) {
    const tried = each(low, h, (a, b) => a + slack * b);
    const mapped = image(chain, tried, "high");
    if (LETTERS.every((x) => mapped[x].every((value, i) => value <= tried[x][i]!))) high = tried;
  }
  if (high === undefined) return undefined;

  const proved = high;
  const returns = (f: Triple, side: Side): Dense => {
    const t = side === "low" ? chain.low : chain.high;
    const mul = (a: Dense, b: Dense) => multiplyBound(a, b, n, side);
    return addBound(side, t.e, chain.turn(mul(t.u, f.u)), mul(t.v, f.V), mul(t.V, f.v));
  };
  const bounds = (x: Letter): MatrixBounds => ({ low: low[x], high: proved[x] });
  return {
    states: n,
    signed: signs,
    swaps: words.some((w) => w.swap),
    first: { u: bounds("u"), v: bounds("v"), V: bounds("V") },
    initial: chain.initial,
    drawn: chain.drawn,
    visits: new LeastSolver({ low: returns(low, "low"), high: returns(proved, "high") }),
  };
}
