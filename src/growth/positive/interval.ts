/**
 * Dimension 2: an interval of directions that every move maps into its own inside, found
 * where there is one, whatever the basis ("the moves are positive on a common cone").
 *
 * Each move must be hyperbolic (or plus or minus the identity): it then attracts to one
 * eigendirection and repels from the other. The interval contains every attracting direction
 * and no repelling one, so in the circle of directions the attracting ones stand together.
 * From their hull on, H grows by its images to the least invariant interval, and R, from the
 * hull of the repelling directions, by the inverses' images. Where H and R stay apart, an
 * interval a little wider than H is strictly invariant: between H and R every move contracts
 * the metric of the complement of R. (The inverses need no search of their own: the complement
 * of an interval for the moves is one for the inverses.)
 *
 * The search is done in doubles; what it finds is checked in integers. Coordinates are then
 * chosen such that the interval is [-1, 1] and R as far as possible, |u| >= reach: a move acts
 * by u -> (a u + b) / (c u + d).
 */
import type { Real } from "../../kernel/real.js";
import type { WeightedMoves } from "../../walk/weights.js";
import { coneIn, type PositiveCone } from "./cone.js";

type Entries = readonly [number, number, number, number];

/** Sweeps of images until the hulls have settled; sets that need more contract too slowly for this method. */
const SWEEPS = 4000;
/** By how much of its own length (in the contracted metric) the interval is wider than H at either end, and at least. */
const MARGIN = 0.02;
const LEAST_MARGIN = 1e-5;

interface Eigendirections {
  readonly attracting: number;
  readonly repelling: number;
}

/** Angles in [0, pi) of the eigendirections; undefined where the move is not hyperbolic. */
function eigendirections(
  matrix: readonly (readonly bigint[])[],
  determinant: number,
  real: Real,
): Eigendirections | undefined {
  const trace = matrix[0][0] + matrix[1][1];
  if (determinant === 1 ? trace * trace <= 4n : trace === 0n) return undefined;
  const [a, b, c, d] = matrix.flat().map(Number);
  const t = Number(trace);
  const large = (t + Math.sign(t) * Math.sqrt(t * t - 4 * determinant)) / 2;
  return { attracting: angleOf(a, b, c, d, large, real), repelling: angleOf(a, b, c, d, determinant / large, real) };
}

/** Angle of the kernel of M - x, from its larger row. Only for finding: the result is checked in integers. */
function angleOf(a: number, b: number, c: number, d: number, x: number, real: Real): number {
  const [p, q] = Math.abs(b) + Math.abs(a - x) > Math.abs(c) + Math.abs(d - x) ? [b, x - a] : [x - d, c];
  return turned(real.atan2(q, p));
}

const turned = (angle: number) => angle - Math.PI * Math.floor(angle / Math.PI);

/** The hull of an interval and its images under (a x + b) / (c x + d), grown until it settles. */
function invariantHull(from: readonly [number, number], maps: readonly Entries[]): [number, number] | undefined {
  let [low, high] = from;
  for (let sweep = 0; sweep < SWEEPS; sweep++) {
    let [l, h] = [low, high];
    for (const [a, b, c, d] of maps) {
      const [p, q] = [c * low + d, c * high + d];
      if (!(p * q > 0)) return undefined; // the pole is inside
      const ends = [(a * low + b) / p, (a * high + b) / q];
      l = Math.min(l, ...ends);
      h = Math.max(h, ...ends);
    }
    const settled = Math.max(low - l, h - high) <= 1e-13 * (h - l);
    [low, high] = [l, h];
    if (settled) return [low, high];
  }
  return undefined;
}

/** Rows of a linear map of the plane that takes the interval to |u| <= 1 and R to |u| >= reach, u the rows' quotient. */
function coordinates(walk: WeightedMoves, real: Real): { rows: Entries; reach: number } | undefined {
  const directions: Eigendirections[] = [];
  const maps: Entries[] = [];
  for (const { matrix, determinant } of walk.moves) {
    if (isScalar(matrix)) continue;
    const found = eigendirections(matrix, determinant, real);
    if (found === undefined) return undefined;
    directions.push(found);
    maps.push(matrix.flat().map(Number) as unknown as Entries);
  }
  if (maps.length === 0) return undefined;
  // Angles from the first repelling direction on: the attracting ones stand together in (0, pi).
  const origin = directions[0].repelling;
  const attracting = directions.map((e) => turned(e.attracting - origin));
  const repelling = directions.map((e) => turned(e.repelling - origin));
  const [low, high] = [Math.min(...attracting), Math.max(...attracting)];
  if (repelling.some((r) => r >= low && r <= high)) return undefined;
  const before = Math.max(0, ...repelling.filter((r) => r < low));
  const after = Math.min(Math.PI, ...repelling.filter((r) => r > high));
  // Turn the plane so that the middle of the repelling directions is the point at infinity of x = v1 / v2.
  const middle = origin + (before + after - Math.PI) / 2;
  const [x, y] = [real.cos(middle), real.sin(middle)];
  const turn = maps.map(([a, b, c, d]): Entries => {
    const [p, q, r, s] = [a * x + b * y, -a * y + b * x, c * x + d * y, -c * y + d * x];
    return [p * x + r * y, q * x + s * y, -p * y + r * x, -q * y + s * x];
  });
  const away = (angle: number) => real.sin(angle + origin - middle) / real.cos(angle + origin - middle);
  const place = (angle: number) => 1 / away(angle);
  const hull = invariantHull([place(high), place(low)], turn);
  // Inverses up to a factor, in the coordinate v2 / v1, where the repelling directions are near 0.
  const inverses = turn.map(([a, b, c, d]): Entries => [a, -c, -b, d]);
  const others = invariantHull([Math.min(0, away(after)), Math.max(0, away(before))], inverses);
  if (hull === undefined || others === undefined) return undefined;
  // Linear forms that vanish at R's ends 1/x; their quotient is positive outside R.
  const below = (v: number) => 1 - others[0] * v; // 0 at x = 1 / others[0] < 0, the lower end
  const above = (v: number) => 1 - others[1] * v;
  if (!(below(hull[0]) > 0 && above(hull[1]) > 0 && below(hull[1]) > 0 && above(hull[0]) > 0)) return undefined;
  // The quotient of the forms grows with x where others[0] < others[1].
  if (!(others[0] < others[1])) return undefined;
  const [s0, s1] = [below(hull[0]) / above(hull[0]), below(hull[1]) / above(hull[1])];
  const margin = (1 + LEAST_MARGIN) * real.pow(s1 / s0, MARGIN);
  const [from, to] = [s0 / margin, s1 * margin];
  const kappa = Math.sqrt(to / from);
  const g = 1 / Math.sqrt(to * from);
  const tau = (kappa - 1) / (kappa + 1);
  // u = (g below - above) / (tau (g below + above)), with below = v2 - others[0] v1 and so on, v turned back.
  const form = (p: number, q: number): [number, number] => [p * x - q * y, p * y + q * x];
  const u1 = form(-g * others[0] + others[1], g - 1);
  const u2 = form(tau * (-g * others[0] - others[1]), tau * (g + 1));
  return { rows: [...u1, ...u2], reach: 1 / tau };
}

function isScalar(matrix: readonly (readonly bigint[])[]): boolean {
  const [[a, b], [c, d]] = matrix as readonly [readonly [bigint, bigint], readonly [bigint, bigint]];
  return b === 0n && c === 0n && a === d;
}

/** The common cone of a walk in dimension 2, or undefined where none was found. */
export function planarCone(walk: WeightedMoves, real: Real): PositiveCone | undefined {
  const found = coordinates(walk, real);
  if (found === undefined || !(found.reach > 1)) return undefined;
  const [p, q, r, s] = found.rows;
  return coneIn(
    walk,
    [
      [p, q],
      [r, s],
    ],
    found.reach,
  );
}
