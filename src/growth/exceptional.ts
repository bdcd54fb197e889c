/**
 * `growth` in dimension 2 where the group is finite or keeps lines: the limits are known
 * without sampling, and sampling in doubles would get some of them wrong (on two lines a
 * vector's small component is lost to rounding).
 */
import { Rational } from "../exact/rational.js";
import type { Real } from "../kernel/real.js";
import { closedForm, estimatedQuantity, exactQuantity, type Quantity } from "../quantity/quantity.js";
import type { Walk } from "../walk/walk.js";
import type { PlanarGroup } from "./lines.js";
import type { PressureEstimator } from "./pressure.js";

export interface ExceptionalGrowth {
  readonly exponents: readonly Quantity[];
  readonly logNormVariance: Quantity;
  readonly estimator: PressureEstimator;
  readonly warnings: readonly string[];
}

type Matrix = readonly (readonly bigint[])[];

const trace = (m: Matrix) => (m[0]?.[0] as bigint) + (m[1]?.[1] as bigint);

function times(a: Matrix, b: Matrix): bigint[][] {
  return a.map((row) => [0, 1].map((k) => row.reduce((s, x, j) => s + x * (b[j]?.[k] as bigint), 0n)));
}

function power(m: Matrix, n: number): Matrix {
  let out: Matrix = [
    [1n, 0n],
    [0n, 1n],
  ];
  for (let k = 0; k < n; k++) out = times(out, m);
  return out;
}

const abs = (x: bigint) => (x < 0n ? -x : x);

/** Finite groups and rational lines: nothing grows exponentially. */
export function flatGrowth(group: PlanarGroup): ExceptionalGrowth {
  const why =
    group.kind === "finite" ? "the group is finite" : "the moves keep rational lines: growth is at most linear";
  const zero = exactQuantity(0n, why);
  return {
    exponents: [zero, zero],
    logNormVariance: zero,
    estimator: { estimate: async (values) => values.map(() => zero) },
    warnings: [`${why}: the limit theorems' conditions fail`],
  };
}

/** Two conjugate lines. */
export function lineGrowth(walk: Walk, group: PlanarGroup & { kind: "two lines" }, real: Real): ExceptionalGrowth {
  const { actions } = group;
  const exchange = actions.some((a) => a.exchanges);
  const logs = walk.moves.map((m, i) => signedLog(m.matrix, m.determinant, group, i, real));
  const weights = walk.moves.map((m) => m.probability.toNumber());
  const warnings = ["the moves keep two lines: the limit theorems' conditions fail"];
  const estimator = { estimate: async (values: readonly number[]) => values.map((s) => pressureOf(s)) };
  const method = "products on two invariant lines";

  function pressureOf(s: number): Quantity {
    // log of the leading eigenvalue of the moments on the pair of lines.
    const at = (t: number) => logMoment(t, logs, weights, actions, real);
    if (s >= 0)
      return estimatedQuantity(exchange ? at(s) : Math.max(at(s), at(-s)), `${method}, closed form in doubles`);
    // E exp(-|s| |S|): the least of the convex function over [s, -s], by golden sections.
    let [low, high] = [s, -s];
    for (let k = 0; k < 80; k++) {
      const third = (high - low) / 3;
      if (at(low + third) < at(high - third)) high -= third;
      else low += third;
    }
    return estimatedQuantity(at((low + high) / 2), `${method}, least moment in doubles`);
  }

  if (exchange) {
    const zero = exactQuantity(0n, `${method}, exchanged by some move`);
    const mean = (f: (i: number) => number) => weights.reduce((t, p, i) => t + p * f(i), 0);
    const sign = (i: number) => (actions[i]?.exchanges ? -1 : 1);
    const log = (i: number) => logs[i] as number;
    const second = mean((i) => log(i) * log(i));
    const between = (2 * mean((i) => sign(i) * log(i)) * mean(log)) / (1 - mean(sign));
    const spread = Math.max(0, second + between);
    return {
      exponents: [zero, zero],
      logNormVariance: estimatedQuantity((1 - 2 / Math.PI) * spread, `${method}: reflected normal law, in doubles`),
      estimator,
      warnings,
    };
  }

  const ratios = commonRatios(
    walk,
    actions.map((a) => a.sign),
    logs,
  );
  if (ratios === undefined) {
    // Too large powers to prove a common unit: the same limits, in doubles.
    const drift = weights.reduce((t, p, i) => t + p * (logs[i] as number), 0);
    const square = weights.reduce((t, p, i) => t + p * ((logs[i] as number) - drift) ** 2, 0);
    const top = Math.abs(drift);
    const how = `${method}, in doubles`;
    return {
      exponents: [estimatedQuantity(top, how), estimatedQuantity(-top, how)],
      logNormVariance: estimatedQuantity(square, how),
      estimator,
      warnings,
    };
  }
  const { values, unit, log } = ratios;
  const mean = values.reduce((t, k, i) => t.add(k.mul(walk.moves[i]?.probability as Rational)), Rational.ZERO);
  const square = values.reduce((t, k, i) => t.add(k.mul(k).mul(walk.moves[i]?.probability as Rational)), Rational.ZERO);
  const variance = square.sub(mean.mul(mean));
  const size = mean.abs();
  const quantity = (r: Rational, text: string, approx: number): Quantity =>
    r.sign() === 0 ? exactQuantity(0n, method) : closedForm(text, approx, method);
  const factor = (r: Rational) => (r.equals(Rational.ONE) ? "" : `${r} * `);
  const half = mean.sign() === 0;
  return {
    exponents: [
      quantity(size, `${factor(size)}${unit}`, size.toNumber() * log),
      quantity(size, `-${factor(size)}${unit}`, -size.toNumber() * log),
    ],
    logNormVariance: quantity(
      variance,
      `${half ? "(1 - 2/pi) * " : ""}${factor(variance)}${unit}^2`,
      (half ? 1 - 2 / Math.PI : 1) * variance.toNumber() * log * log,
    ),
    estimator,
    warnings,
  };
}

/** log |factor| along the first line (for an exchange: from the first line's vector to the second's). */
function signedLog(
  m: Matrix,
  determinant: number,
  group: PlanarGroup & { kind: "two lines" },
  i: number,
  real: Real,
): number {
  const action = group.actions[i] as { exchanges: boolean; sign: number };
  if (action.sign === 0) return 0;
  if (!action.exchanges) return action.sign * unitLog(abs(trace(m)), determinant, real);
  // |X + Y| |X - Y| = 1: the larger of the two without cancellation.
  const [a, b, c] = group.form as [bigint, bigint, bigint];
  const [r, s] = m[1] as [bigint, bigint];
  const x = Math.abs(Rational.of(2n * a * s - r * b, 2n * a).toNumber());
  const y = Math.abs(Rational.of(r, 2n * a).toNumber()) * Math.sqrt(Number(b * b - 4n * a * c));
  return action.sign * real.log(x + y);
}

/** log of the larger root of x^2 - t x + det, t >= 0. */
function unitLog(t: bigint, determinant: number, real: Real): number {
  const x = Number(t);
  return real.log((x + Math.sqrt(x * x - 4 * determinant)) / 2);
}

function logMoment(
  t: number,
  logs: readonly number[],
  weights: readonly number[],
  actions: readonly { exchanges: boolean }[],
  real: Real,
): number {
  const top = Math.max(...logs.map((l) => Math.abs(t * l)));
  const moment = (exchanges: boolean, sign: number) =>
    logs.reduce(
      (sum, l, i) =>
        actions[i]?.exchanges === exchanges ? sum + (weights[i] as number) * real.exp(sign * t * l - top) : sum,
      0,
    );
  const [a, b, c, d] = [moment(false, 1), moment(true, 1), moment(true, -1), moment(false, -1)];
  if (b === 0) return real.log(a) + top;
  return real.log((a + d + Math.sqrt((a - d) * (a - d) + 4 * b * c)) / 2) + top;
}

/**
 * Each signed log as a rational multiple of one of them: eigenvalues are units of one real
 * quadratic order, so their logarithms are commensurable. Guessed in doubles, proved by
 * comparing powers of the matrices.
 */
function commonRatios(
  walk: Walk,
  signs: readonly number[],
  logs: readonly number[],
): { values: Rational[]; unit: string; log: number } | undefined {
  const sizes = logs.map(Math.abs);
  const base = sizes.reduce((best, l, i) => (l > 0 && (best < 0 || l < (sizes[best] as number)) ? i : best), -1);
  if (base < 0) return { values: logs.map(() => Rational.ZERO), unit: "0", log: 0 };
  const move = walk.moves[base] as Walk["moves"][number];
  const log = sizes[base] as number;
  const values: Rational[] = [];
  for (const [i, l] of sizes.entries()) {
    if (l === 0) {
      values.push(Rational.ZERO);
      continue;
    }
    const fraction = smallFraction(l / log);
    const other = walk.moves[i] as Walk["moves"][number];
    if (fraction === undefined) return undefined;
    const [p, q] = fraction;
    // |eigenvalues| of A_i^q and A_base^p agree exactly if their |traces| and determinants do.
    const [x, y] = [power(other.matrix, q), power(move.matrix, p)];
    const sign = (d: number, n: number) => (d === -1 && n % 2 === 1 ? -1 : 1);
    if (abs(trace(x)) !== abs(trace(y)) || sign(other.determinant, q) !== sign(move.determinant, p)) return undefined;
    values.push(Rational.of((signs[i] as number) * p, q));
  }
  const t = abs(trace(move.matrix));
  return { values, unit: `log((${t} + sqrt(${t * t - 4n * BigInt(move.determinant)}))/2)`, log };
}

/** The fraction p/q, q <= 64 and p <= 4096, within 1e-9 of x. */
function smallFraction(x: number): [number, number] | undefined {
  for (let q = 1; q <= 64; q++) {
    const p = Math.round(x * q);
    if (p <= 4096 && Math.abs(x - p / q) < 1e-9 * x) return [p, q];
  }
  return undefined;
}
