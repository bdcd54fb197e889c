/**
 * The limit of Var(log |A_n...A_1|) / n for moves positive on a common cone, enclosed.
 *
 * With h* the solution of the Poisson equation, the increments
 *     log f_i(u) + h*(A_i u) - h*(u) - lambda
 * are a martingale's, and the variance is the stationary mean of their squares. At hand is a
 * polynomial h whose residual r = psi + P h - h has a small slope. The difference h* - h solves
 * the equation with r less its mean, so its slope is at most
 *     (t_0 + ... + t_{n-1}) / (1 - t_n) times that of r,
 * t_n the largest mean slope of the products of n moves (t_0 = 1): sup |(P^n g)'| <= t_n sup |g'|.
 * Each product's slope is 1 / (c u + d)^2, convex in u: the largest mean is at an end. So each
 * increment is known up to e = 2 max slope + |lambda - its middle|, and the mean of squares
 * changes by at most 2 e max |increment| + e^2.
 */
import { addBalls, type Ball, multiplyBalls, negateBall } from "../../exact/ball.js";
import { units, valueOnBall } from "./chebyshev.js";
import type { PositiveCone } from "./cone.js";
import { coneEntries } from "./cone.js";
import { average, type Sample } from "./grid.js";
import type { Observed, StationaryMeans } from "./mean.js";
import { toDouble } from "./solve.js";

/** Products that may be formed to see the interval contract. */
const WORDS = 4096;
const SLACK = 1 + 1e-9;

/** At least (t_0 + ... + t_{n-1}) / (1 - t_n) for the first n that makes it finite; undefined where none does. */
function memory(cone: PositiveCone): number | undefined {
  const moves = cone.moves.map((m) => coneEntries(cone, m));
  const weights = cone.moves.map((m) => Number(m.weight) / Number(cone.total));
  // Rows (c, d) of the products, all positive on the interval: sums of few terms, rounding below SLACK.
  let rows: { c: number; d: number; weight: number }[] = [{ c: 0, d: 1, weight: 1 }];
  let sum = 1;
  while (rows.length * moves.length <= WORDS) {
    rows = rows.flatMap(({ c, d, weight }) =>
      moves.map(([a, b, p, q], i) => ({ c: c * a + d * p, d: c * b + d * q, weight: weight * weights[i] })),
    );
    const at = (u: number) => rows.reduce((t, r) => t + r.weight / ((r.c * u + r.d) * (r.c * u + r.d)), 0);
    const t = Math.max(at(-1), at(1)) * SLACK;
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
    const before = addBalls(valueOnBall(h, at, p), lambda);
    return images.map((y, i) => addBalls(addBalls(logs[i], valueOnBall(h, y, p)), negateBall(before)));
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
  // The slope of h* - h, twice for the interval's length, and the distance of lambda from its middle.
  const error = 2n * ((slope * BigInt(Math.ceil(slow * 1024))) / 1024n + 1n) + mean.rad;
  // On the interval the increments are at most their bound on the ellipse.
  const most = units(largest, p);
  const spread = ((2n * error * most + error * error) >> BigInt(p)) + 1n;
  return { mid: variance.mid, rad: variance.rad + spread };
}
