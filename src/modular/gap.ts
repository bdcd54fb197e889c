/**
 * Norms of the averaging operator P on mean-zero functions, dimension 2, from radii of
 * convergence on PGL_2(Z).
 *
 * Without translations P permutes and weighs characters: it is mu acting on l2 of the
 * non-zero integer vectors. Stabilisers there are amenable, so that representation is weakly
 * contained in the regular one; and for nu = mu^~m mu^m, nu^n(stabiliser) >= nu^n(e) shows the
 * converse for norms. Signs change nothing: the even part has the norm of PGL_2(Z), and the
 * odd part is dominated by it. So |P^m|^2 is the inverse of the radius of convergence of
 * sum z^n nu^n(e) (Kesten 1959 for symmetric laws), and P has spectral radius at most
 * |P^m|^(1/m), at least the inverse of that of sum z^n mu^n(e).
 * Also |P^n| >= |mu^n|_2 >= |mu|_2^n, so the spectral radius is at least |mu|_2, the root of
 * the sum of squared probabilities; it is equal to it where the moves generate a free
 * semigroup: the group has rapid decay (Haagerup 1978; Jolissaint 1990 for this one), so the
 * spectral radius is lim |mu^n|_2^(1/n), and then |mu^n|_2 = |mu|_2^n.
 * With translations coefficients get phases of modulus 1: the upper bounds stay, and so does
 * |P e_k| = |mu|_2 for a k whose images are distinct, where the matrices are (for words of n
 * moves, where the semigroup is free).
 */
import { Rational } from "../exact/rational.js";
import { above, below, type Interval, over, point, root } from "../quantity/interval.js";
import { certifyFree } from "./ping-pong.js";
import { type Radius, radius } from "./radius.js";
import { type PlanarMove, transposed } from "./variance.js";
import { inverse2, type Matrix2, multiply2 } from "./words.js";

export interface Certificate {
  /** Of which operator the norm or radius was bounded. */
  readonly of: "P" | "P* P" | "P*^2 P^2" | "P*^4 P^4";
  readonly radius: Radius;
}

export interface GapBounds {
  readonly norm: Interval;
  readonly spectralRadius: Interval;
  readonly symmetric: boolean;
  /** Proved: the moves generate a free semigroup. */
  readonly freeSemigroup: boolean;
  /** A lower bound of |P|, and for a free semigroup of the spectral radius, whatever the translations are. */
  readonly least: number;
  readonly certificates: readonly Certificate[];
}

/** Matrices up to sign with their probabilities. */
type Law = Map<string, { readonly matrix: Matrix2; readonly probability: Rational }>;

function add(law: Law, matrix: Matrix2, probability: Rational): void {
  const lead = matrix.find((x) => x !== 0n) as bigint;
  const m = lead > 0n ? matrix : (matrix.map((x) => -x) as unknown as Matrix2);
  const key = m.join();
  law.set(key, { matrix: m, probability: law.get(key)?.probability.add(probability) ?? probability });
}

function product(a: Law, b: Law): Law {
  const out: Law = new Map();
  for (const x of a.values()) {
    for (const y of b.values()) add(out, multiply2(x.matrix, y.matrix), x.probability.mul(y.probability));
  }
  return out;
}

function reflected(a: Law): Law {
  const out: Law = new Map();
  for (const { matrix, probability } of a.values()) add(out, inverse2(matrix), probability);
  return out;
}

function same(a: Law, b: Law): boolean {
  return a.size === b.size && [...a].every(([key, x]) => b.get(key)?.probability.equals(x.probability));
}

/** |mu|_2 between bounds. */
function twoNorm(law: Law): Interval {
  let sum = Rational.ZERO;
  for (const { probability } of law.values()) sum = sum.add(probability.mul(probability));
  const square = sum.toNumber(); // within two units in the last place
  return root({ low: below(below(below(square))), high: above(above(above(square))) });
}

/**
 * Whether all matrices are non-negative up to sign and take the positive cone to cones whose
 * interiors are disjoint: words with different first letters then differ, and no product
 * is the identity, so that the semigroup is free.
 */
function isFreeSemigroup(law: Law): boolean {
  const list = [...law.values()].map((x) => x.matrix);
  if (list.length < 2 || !list.every((m) => m.every((x) => x >= 0n))) return false;
  const cones = list.map(([a, b, c, d]) => {
    const columns = [
      [a, c],
      [b, d],
    ] as const;
    return a * d - b * c > 0n ? columns : ([columns[1], columns[0]] as const);
  });
  const cross = (u: readonly [bigint, bigint], v: readonly [bigint, bigint]) => u[0] * v[1] - u[1] * v[0];
  return cones.every((x, i) => cones.every((y, j) => i === j || cross(x[1], y[0]) >= 0n || cross(y[1], x[0]) >= 0n));
}

const withInverses = (law: Law): Matrix2[] => [...law.values()].flatMap(({ matrix }) => [matrix, inverse2(matrix)]);

/** Pairs of words beyond which a power is not looked at; and states, where a lower power has given an answer. */
const MOST_PAIRS = 1024;
const FEW_STATES = 48;

/** 1 / radius between bounds; 0 where no radius was found to be too large. */
function inverseOf(r: Radius): Interval {
  const high = over(point(1), point(r.finite)).high;
  const low = r.infinite === Number.POSITIVE_INFINITY ? 0 : over(point(1), point(r.infinite)).low;
  return { low, high: Math.min(1, high) };
}

function bounded(law: Law, mostStates: number): Radius | undefined {
  const list = [...law.values()];
  try {
    return radius(
      list.map((x) => x.matrix),
      list.map((x) => x.probability),
      { mostStates },
    );
  } catch (error) {
    if (error instanceof RangeError) return undefined; // a word beyond the limit
    throw error;
  }
}

/** Undefined where nothing below 1 was proved. */
export function gapBounds(moves: readonly PlanarMove[], mostStates: number): GapBounds | undefined {
  const law: Law = new Map();
  for (const { matrix, probability } of moves) add(law, transposed(matrix), probability);
  const symmetric = same(law, reflected(law));
  const size = twoNorm(law);
  const least = law.size === moves.length ? size.low : 0;
  const certificates: Certificate[] = [];
  const own = bounded(law, mostStates);
  if (own !== undefined) certificates.push({ of: "P", radius: own });
  if (symmetric) {
    if (own === undefined || !own.certified) return undefined;
    const norm = inverseOf(own);
    return { norm, spectralRadius: norm, symmetric, freeSemigroup: false, least, certificates };
  }
  const freeSemigroup = isFreeSemigroup(law) || certifyFree(withInverses(law)) !== undefined;
  let norm: Interval = { low: 0, high: 1 };
  let upper = 1;
  let power = law;
  for (const [m, of] of [
    [1, "P* P"],
    [2, "P*^2 P^2"],
    [4, "P*^4 P^4"],
  ] as const) {
    if (m > 1 && freeSemigroup) break; // the spectral radius is known
    if (m > 1) {
      if (power.size ** 4 > MOST_PAIRS) break;
      power = product(power, power);
    }
    const states = upper < 1 ? Math.min(FEW_STATES, mostStates) : mostStates;
    const found = bounded(product(reflected(power), power), states);
    if (found === undefined) break;
    certificates.push({ of, radius: found });
    const square = inverseOf(found);
    const ofPower = { low: root(square).low, high: Math.min(1, root(square).high) };
    if (m === 1) norm = ofPower;
    let bound = ofPower.high;
    for (let k = m; k > 1; k /= 2) bound = root(point(bound)).high;
    upper = Math.min(upper, bound);
  }
  if (freeSemigroup) upper = Math.min(upper, size.high);
  if (upper >= 1) return undefined;
  const low = Math.max(size.low, own === undefined ? 0 : inverseOf(own).low);
  norm = { low: Math.max(norm.low, size.low), high: norm.high };
  return {
    norm,
    spectralRadius: { low: Math.min(low, upper), high: upper },
    symmetric,
    freeSemigroup,
    least,
    certificates,
  };
}
