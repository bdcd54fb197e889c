/**
 * The second eigenvalue of a symmetric average by Lanczos' method without
 * reorthogonalisation: copies of eigenvalues appear, but the extremes and their residuals
 * stay right (Paige 1976). Three vectors; the eigenvector comes from a second, equal run.
 */
import type { OrbitOperator } from "../kernel/finite.js";
import { eigenvector, extremes } from "./tridiagonal.js";

export interface Found {
  /** The eigenvalue: real and imaginary part. */
  readonly re: number;
  readonly im: number;
  /** |P f - eigenvalue f| of the function f of length 1 found for it, computed outright. */
  readonly residual: number;
  readonly products: number;
}

/** Vectors that `lanczos` needs. */
export const LANCZOS_VECTORS = 4;
const LOOK = 20;
const X = 3;

/** |P f - value f| / |f| of the vector numbered f; the vector numbered `work` is overwritten. */
export function residualOf(operator: OrbitOperator, f: number, work: number, value: number): number {
  operator.scale(f, 1 / operator.centre(f));
  operator.apply(f, work);
  operator.add(work, -value, f);
  return operator.centre(work);
}

function steps(operator: OrbitOperator, seed: bigint, each: (v: number, alpha: number, length: number) => boolean) {
  operator.clear(2);
  operator.random(0, seed);
  let [before, now, next] = [2, 0, 1];
  let beta = 0;
  while (true) {
    const { alpha, length } = operator.lanczos(before, beta, now, next);
    if (!each(now, alpha, length)) return;
    operator.scale(next, 1 / length);
    beta = length;
    [before, now, next] = [now, next, before];
  }
}

/** @param most products with P in the first run */
export function lanczos(operator: OrbitOperator, seed: bigint, tolerance: number, most: number): Found {
  const diagonal: number[] = [];
  const off: number[] = [];
  let value = 0;
  let combination = new Float64Array(0);
  steps(operator, seed, (_, alpha, length) => {
    diagonal.push(alpha);
    off.push(length);
    const k = diagonal.length;
    const last = k >= most || length < 1e-14;
    if (!last && k % LOOK !== 0) return true;
    const { least, largest } = extremes(diagonal, off);
    value = Math.abs(least) > Math.abs(largest) ? least : largest;
    combination = eigenvector(diagonal, off, value) as Float64Array<ArrayBuffer>;
    return !last && length * Math.abs(combination[k - 1] as number) > tolerance;
  });
  operator.clear(X);
  let k = 0;
  steps(operator, seed, (v) => {
    operator.add(X, combination[k++] as number, v);
    return k < combination.length;
  });
  return { re: value, im: 0, residual: residualOf(operator, X, 0, value), products: diagonal.length };
}
