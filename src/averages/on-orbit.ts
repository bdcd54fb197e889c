/**
 * The walk on a finite orbit: a doubly stochastic chain on its points. Correlations by
 * applying P, the variance by the Poisson equation, and whether it is 0 by sums along paths.
 */
import { encloseAround } from "../dual/enclose.js";
import { U } from "../kernel/dual-rounding.js";
import { estimatedQuantity, exactQuantity, type Quantity, type Verdict } from "../quantity/quantity.js";
import type { FiniteOrbit } from "./orbit.js";
import type { OrbitValues } from "./orbit-values.js";

type Vector = Float64Array<ArrayBuffer>;

/** (P g)(s) = sum_i p_i g(T_i s). */
function average({ images, size }: FiniteOrbit, weights: readonly number[], g: Vector): Vector {
  const out = new Float64Array(size);
  for (const [i, image] of images.entries()) {
    const p = weights[i]!;
    for (let s = 0; s < size; s++) out[s] = out[s]! + p * g[image[s]!]!;
  }
  return out;
}

/** The adjoint: what P* does. */
function spread({ images, size }: FiniteOrbit, weights: readonly number[], g: Vector): Vector {
  const out = new Float64Array(size);
  for (const [i, image] of images.entries()) {
    const p = weights[i]!;
    for (let s = 0; s < size; s++) out[image[s]!] = out[image[s]!]! + p * g[s]!;
  }
  return out;
}

/** The mean of a b over the orbit, the sum compensated. */
function inner(a: Vector, b: Vector): number {
  let sum = 0;
  let lost = 0;
  for (let s = 0; s < a.length; s++) {
    const x = a[s]! * b[s]!;
    const t = sum + x;
    const z = t - sum;
    lost += sum - (t - z) + (x - z);
    sum = t;
  }
  return (sum + lost) / a.length;
}

const largest = (g: Vector) => g.reduce((m, x) => Math.max(m, Math.abs(x)), 0);

/** <f, P^n f> for n = 0, ..., last, enclosed: each step costs (moves + 2) u of the largest value. */
export function orbitCorrelations(
  orbit: FiniteOrbit,
  weights: readonly number[],
  f: OrbitValues,
  last: number,
): Quantity[] {
  const method = `applying P on the orbit's ${orbit.size} points`;
  if (f.constant) return [exactQuantity(0n, "constant on the orbit")];
  const size = largest(f.centred) + f.error;
  let g = f.centred;
  let error = f.error;
  const out: Quantity[] = [];
  for (let n = 0; n <= last; n++) {
    const bound = (f.error + error) * size + f.error * error + 6 * U * size * size;
    out.push(encloseAround(inner(f.centred, g), bound * (1 + 2 ** -40), method));
    g = average(orbit, weights, g);
    error = (error + (weights.length + 3) * U * (size + error)) * (1 + 2 ** -40);
  }
  return out;
}

/** Values of all moves together that the solver may touch. */
const SOLVER_WORK = 4e8;

/** lim n Var(average): 2 <f, g> - <f, f> with (I - P) g = f, g by conjugate gradients on the normal equations. */
export function orbitVariance(orbit: FiniteOrbit, weights: readonly number[], f: OrbitValues): Quantity {
  if (f.constant) return exactQuantity(0n, "constant on the orbit");
  const apply = (v: Vector) => {
    const pv = average(orbit, weights, v);
    return v.map((x, s) => x - pv[s]!);
  };
  const adjoint = (v: Vector) => {
    const pv = spread(orbit, weights, v);
    return v.map((x, s) => x - pv[s]!);
  };
  const norm = inner(f.centred, f.centred);
  const most = Math.max(20, Math.min(5000, Math.floor(SOLVER_WORK / (4 * orbit.size * weights.length))));
  const g = new Float64Array(orbit.size);
  const r = f.centred.slice();
  let z = adjoint(r);
  const p = z.slice();
  let zz = inner(z, z);
  for (let n = 0; n < most && zz > 1e-30 * norm; n++) {
    const w = apply(p);
    const alpha = zz / inner(w, w);
    for (let s = 0; s < g.length; s++) {
      g[s] = g[s]! + alpha * p[s]!;
      r[s] = r[s]! - alpha * w[s]!;
    }
    z = adjoint(r);
    const next = inner(z, z);
    for (let s = 0; s < p.length; s++) p[s] = z[s]! + (next / zz) * p[s]!;
    zz = next;
  }
  const off = apply(g);
  const rest = f.centred.map((x, s) => x - off[s]!);
  const residual = norm > 0 ? Math.sqrt(inner(rest, rest) / norm) : 0;
  const value = Math.max(0, 2 * inner(f.centred, g) - norm);
  return estimatedQuantity(
    value,
    `Poisson equation on the orbit's ${orbit.size} points, relative residual ${residual.toExponential(1)}`,
  );
}

/**
 * The variance is 0 exactly if the sum of f - mean along a path depends on its ends alone:
 * sums are fixed along a tree of shortest paths, and every other move is compared with them.
 */
export function orbitDegeneracy(orbit: FiniteOrbit, f: OrbitValues): { verdict: Verdict; spread?: number } {
  if (f.constant) {
    const evidence = { points: orbit.size };
    return { verdict: { verdict: "holds", reason: "The observable is constant on the orbit.", evidence }, spread: 0 };
  }
  // Whole numbers below 2^53 where the observable is a box: then every comparison is exact.
  const exact = f.scaled !== undefined && orbit.size < 2 ** 25;
  const step = exact ? (f.scaled as Vector) : f.centred;
  const g = new Float64Array(orbit.size);
  const error = new Float64Array(orbit.size);
  const reached = new Uint8Array(orbit.size);
  reached[0] = 1;
  for (let s = 0; s < orbit.size; s++) {
    const value = g[s]! - step[s]!;
    const doubt = exact ? 0 : (error[s]! + f.error + U * Math.abs(value)) * (1 + 2 ** -40);
    for (const [i, image] of orbit.images.entries()) {
      const t = image[s]!;
      if (reached[t] === 0) {
        reached[t] = 1;
        g[t] = value;
        error[t] = doubt;
      } else if (Math.abs(g[t]! - value) > (error[t]! + doubt) * (1 + 2 ** -40)) {
        const point = Array.from(orbit.points.slice(t * orbit.dimension, (t + 1) * orbit.dimension));
        const evidence = { numerators: point, denominator: orbit.denominator, move: i };
        const reason = "Two paths from the start to one point have different sums of f - mean.";
        return { verdict: { verdict: "fails", reason, evidence } };
      }
    }
  }
  let [low, high] = [0, 0];
  for (const x of g) [low, high] = [Math.min(low, x), Math.max(high, x)];
  const range = exact ? (high - low) / orbit.size : high - low;
  if (exact) {
    const reason = "The sum of f - mean along a path depends on its ends alone, so that sums stay bounded.";
    return { verdict: { verdict: "holds", reason, evidence: { largestSum: range } }, spread: range };
  }
  const reason =
    "Sums of f - mean along all paths agree to the computed precision, which does not prove that they are equal.";
  return { verdict: { verdict: "undecided", reason, evidence: { largestSum: range, precision: largest(error) } } };
}
