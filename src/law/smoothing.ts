/**
 * Wasserstein-1 distance of a law mu on the torus to the uniform one, from its Fourier
 * coefficients at 0 < |k| <= K (largest component), by the smoothing inequality of Bobkov
 * and Ledoux (A simple Fourier analytic proof of the AKT optimal matching theorem, Ann.
 * Appl. Probab. 2021), here with Fejér's extremal kernel, so that constants are explicit:
 *
 *     W1 <= sqrt(d (1 - c_1) / 8) + 1/(2 pi) (sum over 0 < |k| <= K of (c_k |mu^(k)| / |k|_2)^2)^(1/2),
 *
 * c_k the product of the c_{k_j}, the coefficients of the kernel |sum_j a_j exp(2 pi i j x)|^2
 * over its mean. For ANY a >= 0 that is a probability density F on the circle; F in each
 * coordinate moves mu by at most E|y| <= (E|y|^2)^(1/2), and |y_j|^2 <= sin(pi y_j)^2 / 4 =
 * (1 - cos 2 pi y_j) / 8. A 1-Lipschitz f has sum (2 pi |k|)^2 |f^(k)|^2 <= 1, so that
 * Cauchy-Schwarz bounds the integral of f against mu * F less uniform. With a_j =
 * sin(pi (j + 1) / (K + 2)), 1 - c_1 is least: 1 - cos(pi / (K + 2)) (Fejér 1915).
 *
 * From below: cos(2 pi (k.x - t)) / (2 pi |k|_2) is 1-Lipschitz, so W1 >= |mu^(k)| / (2 pi |k|_2).
 */
import type { Real } from "../kernel/real.js";
import { above, type Interval, minus, over, plus, point, root, times } from "../quantity/interval.js";

const TWO_PI: Interval = { low: 2 * Math.PI, high: above(2 * Math.PI) };

export interface Smoothing {
  /** sqrt(d (1 - c_1) / 8): what the kernel moves. */
  readonly moved: Interval;
  /** c_0 = 1, c_1, ..., c_K. */
  readonly coefficients: readonly Interval[];
}

/** The kernel of degree K >= 1 in d coordinates. The a_j are doubles: whatever they are, the inequality holds. */
export function smoothing(degree: number, dimension: number, real: Real): Smoothing {
  const a = Array.from({ length: degree + 1 }, (_, j) => real.sin((Math.PI * (j + 1)) / (degree + 2)));
  const correlation = (lag: number) =>
    a.slice(lag).reduce<Interval>((s, x, j) => plus(s, times(point(x), point(a[j] as number))), point(0));
  const mean = correlation(0);
  const coefficients = a.map((_, lag) => (lag === 0 ? point(1) : over(correlation(lag), mean)));
  const moved = root(over(times(point(dimension), minus(point(1), coefficients[1] as Interval)), point(8)));
  return { moved, coefficients };
}

/** A coefficient's modulus at k; -k has the same, and is not listed. */
export interface Modulus {
  readonly frequency: readonly number[];
  readonly modulus: Interval;
}

function squaredLength(k: readonly number[]): number {
  return k.reduce((s, x) => s + x * x, 0);
}

/** The inequality's right side with one kernel: K is the kernel's degree. */
function smoothed(moduli: readonly Modulus[], { moved, coefficients }: Smoothing): number {
  let sum = point(0);
  for (const { frequency, modulus } of moduli) {
    if (frequency.some((k) => Math.abs(k) >= coefficients.length)) continue;
    const weight = frequency.reduce<Interval>((w, k) => times(w, coefficients[Math.abs(k)] as Interval), point(1));
    const c = times(weight, modulus);
    // Both k and -k.
    sum = plus(sum, times(point(2), over(times(c, c), point(squaredLength(frequency)))));
  }
  return plus(moved, over(root({ low: Math.max(0, sum.low), high: sum.high }), TWO_PI)).high;
}

/** W1 between bounds, from all coefficients with 0 < |k| <= K up to sign: the best of the kernels of degree up to K. */
export function wasserstein(moduli: readonly Modulus[], kernels: readonly Smoothing[]): Interval {
  const d = moduli[0]?.frequency.length ?? 0;
  const low = moduli.reduce(
    (m, { frequency, modulus }) => Math.max(m, over(modulus, times(TWO_PI, root(point(squaredLength(frequency))))).low),
    0,
  );
  // Every law is at most E|U| <= (d / 12)^(1/2) away, U uniform on [-1/2, 1/2]^d.
  const trivial = root(over(point(d), point(12))).high;
  const high = kernels.reduce((m, kernel) => Math.min(m, smoothed(moduli, kernel)), trivial);
  return { low: Math.max(0, low), high };
}

/** Kernels of every degree up to K. */
export function smoothings(most: number, dimension: number, real: Real): Smoothing[] {
  return Array.from({ length: most }, (_, i) => smoothing(i + 1, dimension, real));
}
