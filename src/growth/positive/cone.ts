/**
 * A cone that every move maps into itself, in coordinates in which its directions are the box
 * [-1, 1]^n, n one less than the dimension: the direction of (u, 1) for u in the box. A move
 * with integer rows R acts by u_k -> (R_k . (u, 1)) / (R_n . (u, 1)), and (R_n . (u, 1)) / scale is
 * the factor by which it stretches the last coordinate. That is a linear form positive on the
 * cone, and any such form has the growth of the norm, as all are comparable on products' images.
 *
 * Whoever finds such coordinates does so in doubles; `coneIn` rounds them to integers and proves
 * what they promise: a map of the box with positive last form takes it to the hull of the
 * corners' images, so that the corners are enough.
 */
import { Rational } from "../../exact/rational.js";
import { integerWeights, type WeightedMoves } from "../../walk/weights.js";

export interface ConeMove {
  /** Integers; the last row is positive on the box. Over the cone's scale, the determinant is +-1. */
  readonly rows: readonly (readonly bigint[])[];
  /** Probability over the cone's `total`. */
  readonly weight: bigint;
}

export interface PositiveCone {
  /** Coordinates of a direction: one less than the walk's dimension. */
  readonly coordinates: number;
  readonly moves: readonly ConeMove[];
  readonly scale: bigint;
  readonly total: bigint;
  /** Above 1, in floating point: complex u with |u_k| < reach are drawn into the box, nearly. */
  readonly reach: number;
}

type Matrix = readonly (readonly bigint[])[];

/** Bits of the integer coordinates. */
const COORDINATE_BITS = 50;

const abs = (x: bigint) => (x < 0n ? -x : x);

function product(a: Matrix, b: Matrix): bigint[][] {
  return a.map((row) => (b[0] as readonly bigint[]).map((_, k) => row.reduce((s, x, j) => s + x * b[j][k], 0n)));
}

function determinant(m: Matrix): bigint {
  if (m.length === 1) return m[0][0];
  return m[0].reduce((sum, x, j) => {
    if (x === 0n) return sum;
    return sum + (j % 2 === 0 ? x : -x) * determinant(minor(m, 0, j));
  }, 0n);
}

const minor = (m: Matrix, i: number, j: number) =>
  m.filter((_, r) => r !== i).map((row) => row.filter((_, c) => c !== j));

function adjugate(m: Matrix): bigint[][] {
  return m.map((_, i) => m.map((_, j) => ((i + j) % 2 === 0 ? 1n : -1n) * determinant(minor(m, j, i))));
}

/** The corners of the box, with 1 as last coordinate. */
export function corners(coordinates: number): bigint[][] {
  return Array.from({ length: 2 ** coordinates }, (_, bits) => [
    ...Array.from({ length: coordinates }, (_, k) => ((bits >> k) & 1 ? 1n : -1n)),
    1n,
  ]);
}

/** The cone in the coordinates whose linear forms are the rows given, or undefined where it is not invariant. */
export function coneIn(
  walk: WeightedMoves,
  forms: readonly (readonly number[])[],
  reach: number,
): PositiveCone | undefined {
  const size = Math.max(...forms.flat().map(Math.abs));
  if (!Number.isFinite(size) || size === 0) return undefined;
  const u = forms.map((row) => row.map((e) => BigInt(Math.round((e / size) * 2 ** COORDINATE_BITS))));
  const scale = abs(determinant(u));
  if (scale === 0n) return undefined;
  const back = adjugate(u);
  const { weights, total } = integerWeights(walk);
  const n = walk.dimension - 1;
  const box = corners(n);
  const moves: ConeMove[] = [];
  for (const [i, { matrix }] of walk.moves.entries()) {
    // The move in the new coordinates, times the scale, with the sign that makes the last form positive.
    const image = product(product(u, matrix), back);
    const sign = image[n][n] < 0n ? -1n : 1n;
    const rows = image.map((row) => row.map((x) => sign * x));
    for (const corner of box) {
      const at = rows.map((row) => row.reduce((s, x, k) => s + x * corner[k], 0n));
      const last = at[n];
      if (last <= 0n || at.some((x) => abs(x) > last)) return undefined;
    }
    moves.push({ rows, weight: weights[i] });
  }
  return { coordinates: n, moves, scale, total, reach };
}

/** The move's rows over the cone's scale, as doubles. */
export function coneRows(cone: PositiveCone, move: ConeMove): number[][] {
  return move.rows.map((row) => row.map((x) => Rational.of(x, cone.scale).toNumber()));
}
