/**
 * The limit of Var(log |A_n...A_1|) / n for moves positive on a common cone, enclosed.
 *
 * With h* the solution of the Poisson equation, the increments
 *     log f_i(u) + h*(A_i u) - h*(u) - lambda
 * are a martingale's, and the variance is the stationary mean of their squares. At hand is a
 * polynomial h whose residual r = psi + P h - h has a small slope. The difference h* - h solves
 * the equation with r less its mean, so its slope is at most
 *     (t_0 + ... + t_{n-1}) / (1 - t_n) times that of r,
 * t_n the largest mean slope of the products of n moves (t_0 = 1): sup |(P^n g)'| <= t_n sup |g'|,
 * |g'| the sum of absolute partial derivatives, which goes with distances by the largest
 * coordinate. With one coordinate a product's slope is 1 / (c u + d)^2, convex in u: the largest
 * mean is at an end. With more it is bounded crudely. So each
 * increment is known up to e = 2 max slope + |lambda - its middle|, and the mean of squares
 * changes by at most 2 e max |increment| + e^2.
 */
import { addBalls, type Ball, multiplyBalls, negateBall } from "../../exact/ball.js";
import { units, valueOnBalls } from "./chebyshev.js";
import { coneRows, corners, type PositiveCone } from "./cone.js";
import { average, type Sample } from "./grid.js";
import type { Observed, StationaryMeans } from "./mean.js";
import { toDouble } from "./solve.js";

/** Products that may be formed to see the interval contract. */
const WORDS = 4096;
const SLACK = 1 + 1e-9;

/** A product of rows, and its probability. */
interface Word {
  readonly rows: readonly (readonly number[])[];
  readonly weight: number;
}

/** At least (t_0 + ... + t_{n-1}) / (1 - t_n) for the first n that makes it finite; undefined where none does. */
function memory(cone: PositiveCone): number | undefined {
  const n = cone.coordinates;
  const box = corners(n).map((u) => u.map(Number));
  const moves = cone.moves.map((m) => coneRows(cone, m));
  const weights = cone.moves.map((m) => Number(m.weight) / Number(cone.total));
  let words: Word[] = [
    {
      rows: Array.from({ length: n + 1 }, (_, i) => Array.from({ length: n + 1 }, (_, j) => (i === j ? 1 : 0))),
      weight: 1,
    },
  ];
  const last = (rows: Word["rows"], u: readonly number[]) => rows[n].reduce((t, x, k) => t + x * u[k], 0);
  let sum = 1;
  while (words.length * moves.length <= WORDS) {
    words = words.flatMap(({ rows, weight }) =>
      moves.map((m, i) => ({
        rows: rows.map((row) => m[0].map((_, k) => row.reduce((t, x, j) => t + x * m[j][k], 0))),
        weight: weight * weights[i],
      })),
    );
    // One coordinate: the slope is 1 / last^2. More: |d image_k / d u_j| <= (|R_kj| + |R_nj|) / last, images in the box.
    const steepest = ({ rows }: Word) =>
      Math.max(
        ...rows
          .slice(0, n)
          .map((row) => row.slice(0, n).reduce((t, x, j) => t + Math.abs(x) + Math.abs(rows[n][j]), 0)),
      );
    const slopes =
      n === 1
        ? box.map((u) => words.reduce((t, w) => t + w.weight / (last(w.rows, u) * last(w.rows, u)), 0))
        : [words.reduce((t, w) => t + (w.weight * steepest(w)) / Math.min(...box.map((u) => last(w.rows, u))), 0)];
    const t = Math.max(...slopes) * SLACK;
    if (t < 0.999) return (sum / (1 - t)) * SLACK;
    sum += t;
  }
  return undefined;
}

/** Undefined where the moves contract too slowly to bound the slope. */
export function encloseVariance(means: StationaryMeans, logFactor: Observed): Ball | undefined {
  const { cone, p } = means;
  const slow = memory(cone);
  if (slow === undefined) return undefined;
  const { mean, h, slope } = means.enclose(logFactor);
  const lambda: Ball = { mid: mean.mid, rad: 0n };
  const increments = ({ at, images, logs }: Sample) => {
    const before = addBalls(valueOnBalls(h, at, p), lambda);
    return images.map((y, i) => addBalls(addBalls(logs[i], valueOnBalls(h, y, p)), negateBall(before)));
  };
  // Three parts, each at most the largest.
  const middle = means.log2(Math.abs(toDouble(mean.mid, p)) + 1);
  const largest = Math.max(logFactor.bound, means.gainBound(h), middle) + 1.6;
  const squares: Observed = {
    value: (sample) =>
      average(
        cone,
        increments(sample).map((x) => multiplyBalls(x, x, p)),
      ),
    bound: 2 * largest,
  };
  const variance = means.enclose(squares).mean;
  // The slope of h* - h, twice for the box's width, and the distance of lambda from its middle.
  const error = 2n * ((slope * BigInt(Math.ceil(slow * 1024))) / 1024n + 1n) + mean.rad;
  // On the box the increments are at most their bound on the ellipse.
  const most = units(largest, p);
  const spread = ((2n * error * most + error * error) >> BigInt(p)) + 1n;
  return { mid: variance.mid, rad: variance.rad + spread };
}
