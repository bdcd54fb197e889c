/**
 * Dimension 3 and more: coordinates in which a box of directions goes into its own inside under
 * every move, searched for in doubles.
 *
 * Long products send all directions near a compact set K, and all linear forms, acted on by
 * transposes, near another, K*. Where the moves are positive on a cone, all forms of K* have one
 * sign on K. Coordinates: the mean of K* as the last one (it vanishes where products' pasts may
 * begin), the others along K's own extent. Boxes around K, from tight to wide, are tried; the
 * one in whose coordinates the widest product of discs goes into itself serves polynomials best.
 */
import type { WeightedMoves } from "../../walk/weights.js";
import { coneIn, coneRows, type PositiveCone } from "./cone.js";
import { imageOfDiscs } from "./ellipse.js";

/** Products whose directions stand for K, and moves before the first counts. */
const DIRECTIONS = 512;
const BURN_IN = 64;
/** Sizes of the box over K's own. */
const WIDTHS = [1.02, 1.1, 1.25, 1.5, 2, 3, 5, 8];
const LARGEST_REACH = 1000;

type Vector = readonly number[];

const dot = (a: Vector, b: Vector) => a.reduce((s, x, k) => s + x * b[k], 0);
const scaled = (a: Vector, by: number) => a.map((x) => x * by);
const minus = (a: Vector, b: Vector) => a.map((x, k) => x - b[k]);
const unit = (a: Vector) => scaled(a, 1 / Math.sqrt(dot(a, a)));

/** Directions after more and more moves in an order that leaves no short word out for long (a congruential sequence). */
function directions(matrices: readonly (readonly Vector[])[]): Vector[] {
  const d = matrices[0].length;
  let v: Vector = Array.from({ length: d }, (_, k) => 1 + 1 / (k + 2));
  let state = 12345;
  const out: Vector[] = [];
  for (let n = 0; n < BURN_IN + DIRECTIONS; n++) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    const move = matrices[Math.floor((state / 2 ** 32) * matrices.length)];
    v = unit(move.map((row) => dot(row, v)));
    if (n >= BURN_IN) out.push(v);
  }
  return out;
}

/** Orthonormal vectors along the extent of `points`: the farthest one, then the farthest from its line, and so on. */
function extent(points: readonly Vector[], count: number): Vector[] | undefined {
  const basis: Vector[] = [];
  let rest = points;
  for (let k = 0; k < count; k++) {
    const far = rest.reduce((a, b) => (dot(b, b) > dot(a, a) ? b : a));
    if (!(dot(far, far) > 1e-24)) return undefined;
    const e = unit(far);
    basis.push(e);
    rest = rest.map((x) => minus(x, scaled(e, dot(e, x))));
  }
  return basis;
}

/** The largest radius of discs that the moves take into themselves; 0 where none above 1. */
function reachOf(cone: PositiveCone): number {
  const moves = cone.moves.map((m) => coneRows(cone, m));
  const inside = (a: number) => moves.every((rows) => imageOfDiscs(rows, a) < a);
  let best = 0;
  for (let a = 1.02; a < LARGEST_REACH; a *= 1.02) if (inside(a)) best = a;
  return best;
}

/** The common cone of a walk in dimension 3 and more, or undefined where none was found. */
export function boxCone(walk: WeightedMoves): PositiveCone | undefined {
  const matrices = walk.moves.map((m) => m.matrix.map((row) => row.map(Number)));
  const transposes = matrices.map((m) => m.map((_, j) => m.map((row) => row[j])));
  const points = directions(matrices);
  const forms = directions(transposes);
  // One sign of all forms on all points, after turning each the same way round.
  const turnedPoints = points.map((v) => scaled(v, Math.sign(dot(forms[0], v))));
  const turnedForms = forms.map((w) => scaled(w, Math.sign(dot(w, turnedPoints[0]))));
  if (turnedForms.some((w) => turnedPoints.some((v) => !(dot(w, v) > 1e-9)))) return undefined;
  const last = unit(turnedForms.reduce((s, w) => s.map((x, k) => x + w[k])));
  const at = turnedPoints.map((v) => scaled(v, 1 / dot(last, v)));
  // Twice: the extent around the mean, then the middle of the box.
  const mean = scaled(
    at.reduce((s, v) => s.map((x, k) => x + v[k])),
    1 / at.length,
  );
  const basis = extent(
    at.map((v) => minus(v, mean)),
    walk.dimension - 1,
  );
  if (basis === undefined) return undefined;
  const sides = basis.map((e) => {
    const places = at.map((v) => dot(e, v));
    const [low, high] = [Math.min(...places), Math.max(...places)];
    return { e, middle: (low + high) / 2, half: (high - low) / 2 };
  });
  let best: PositiveCone | undefined;
  for (const width of WIDTHS) {
    // u_k = (e_k . v / last . v - middle) / (width half), as a quotient of forms.
    const rows = sides.map(({ e, middle, half }) => scaled(minus(e, scaled(last, middle)), 1 / (width * half)));
    const cone = coneIn(walk, [...rows, last], 0);
    if (cone === undefined) continue;
    const reach = reachOf(cone);
    if (reach > (best?.reach ?? 1)) best = { ...cone, reach };
  }
  return best;
}
