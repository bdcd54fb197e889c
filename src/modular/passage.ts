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
  /** Row vector: 1 at the state before the first draw. */
  readonly initial: VectorBounds;
  /** Column: 1 at the state before a draw with that swap and that sign. */
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

/** A draw of one of the moves that begin alike and go on alike. */
interface Draw {
  readonly letter: Letter | "e";
  /** The letters that are left, and whether the swap follows; "" where the next move is drawn at once. */
  readonly rest: string;
  /** Whether the swap follows at once: moves of at most one letter. */
  readonly swap: boolean;
  readonly turns: boolean;
  probability: Rational;
}

/** The rest of a word after `read` letters, as a state's name. */
function restOf(word: Word, read: number): string {
  const letters = word.letters.slice(read).join("");
  return letters === "" ? "" : `${letters}${word.swap ? "s" : ""}`;
}

function drawsOf(words: readonly Word[], probabilities: readonly Rational[], signs: boolean): Draw[] {
  const draws = new Map<string, Draw>();
  for (const [i, word] of words.entries()) {
    const probability = probabilities[i] as Rational;
    const rest = restOf(word, 1);
    const draw: Omit<Draw, "probability"> = {
      letter: word.letters[0] ?? "e",
      rest,
      swap: rest === "" && word.swap,
      turns: signs && word.sign < 0,
    };
    const key = `${draw.letter} ${rest} ${draw.swap} ${draw.turns}`;
    const before = draws.get(key);
    if (before === undefined) draws.set(key, { ...draw, probability });
    else before.probability = before.probability.add(probability);
  }
  return [...draws.values()];
}

/** The names of the states: "" before a draw, and the rests of words, each once. */
function positionsOf(words: readonly Word[]): string[] {
  const names = words.flatMap((w) => w.letters.map((_, j) => (j === 0 ? "" : restOf(w, j))));
  return [...new Set(["", ...names])];
}

/** z p between doubles; exact where p is a short dyadic fraction and z is 1. */
function weigh(p: Rational, z: number): { low: number; high: number } {
  const w = p.toNumber() * z;
  const exact = z === 1 && p.den <= 1n << 40n && (p.den & (p.den - 1n)) === 0n;
  return exact ? { low: w, high: w } : { low: w * (1 - 2 ** -51), high: w * (1 + 2 ** -51) };
}

/** The expanded chain of moves with the given words and probabilities. */
function expand(words: readonly Word[], draws: readonly Draw[], z: number, signs: boolean): Chain {
  const positions = positionsOf(words);
  const base = positions.length;
  const place = new Map(positions.map((name, i) => [name, i]));
  const swaps = words.some((w) => w.swap) ? 2 : 1;
  const n = base * swaps * (signs ? 2 : 1);
  const at = (sign: number, swap: number, rest: string) =>
    ((signs ? sign % 2 : 0) * swaps + swap) * base + (place.get(rest) as number);
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
      // The swap of u is -u: with s u s = -u, each u read under a pending swap turns the sign.
      const turned = (x: string) => (swap && x === "u" ? 1 : 0);
      const under = (x: Letter | "e") => (x === "e" ? x : swap ? swapped(x) : x);
      for (const { letter, rest, swap: toggles, turns, probability } of draws) {
        const to = at(sign + (turns ? 1 : 0) + turned(letter), toggles ? 1 - swap : swap, rest);
        const cell = at(sign, swap, "") * n + to;
        const w = weigh(probability, z);
        low[under(letter)][cell] = w.low;
        high[under(letter)][cell] = w.high;
      }
      for (const name of positions) {
        if (name === "") continue;
        const letter = name[0] as Letter;
        const rest = name.slice(1);
        const last = rest === "" || rest === "s";
        const to = at(sign + turned(letter), last && rest === "s" ? 1 - swap : swap, last ? "" : rest);
        low[under(letter)][at(sign, swap, name) * n + to] = 1;
        high[under(letter)][at(sign, swap, name) * n + to] = 1;
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
  const initial = new Float64Array(n);
  initial[at(0, 0, "")] = 1;
  const drawn: Passage["drawn"] = (swap, sign) => {
    const out = new Float64Array(n);
    if (!swap || swaps === 2) out[at(sign < 0 ? 1 : 0, swap ? 1 : 0, "")] = 1;
    return out;
  };
  return { n, low, high, turn, initial: { low: initial, high: initial }, drawn };
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
  const size = positionsOf(words).length * (signs ? 2 : 1) * (words.some((w) => w.swap) ? 2 : 1);
  if (size > mostStates) return undefined;
  const chain = expand(words, drawsOf(words, probabilities, signs), z, signs);
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
