/** Extreme eigenvalues of a symmetric tridiagonal matrix by bisection, and vectors by inverse iteration. */

/** Number of eigenvalues below x (Sturm's count by the pivots of T - x). */
function below(diagonal: readonly number[], off: readonly number[], x: number): number {
  let count = 0;
  let pivot = 1;
  for (let i = 0; i < diagonal.length; i++) {
    const b = i === 0 ? 0 : (off[i - 1] as number);
    pivot = (diagonal[i] as number) - x - (b * b) / pivot;
    if (pivot === 0) pivot = -Number.MIN_VALUE * 2 ** 60;
    if (pivot < 0) count++;
  }
  return count;
}

/** The smallest and the largest eigenvalue, to rounding. `off` has one entry less, at least. */
export function extremes(diagonal: readonly number[], off: readonly number[]): { least: number; largest: number } {
  const n = diagonal.length;
  let radius = 0;
  for (let i = 0; i < n; i++) {
    const around = (i > 0 ? Math.abs(off[i - 1] as number) : 0) + (i < n - 1 ? Math.abs(off[i] as number) : 0);
    radius = Math.max(radius, Math.abs(diagonal[i] as number) + around);
  }
  const bisect = (wanted: number) => {
    let [low, high] = [-radius, radius];
    for (let i = 0; i < 60 && low < high; i++) {
      const x = low + (high - low) / 2;
      if (x <= low || x >= high) break;
      if (below(diagonal, off, x) >= wanted) high = x;
      else low = x;
    }
    return low + (high - low) / 2;
  };
  return { least: bisect(1), largest: bisect(n) };
}

/** A unit eigenvector for the eigenvalue near `value`: two rounds of inverse iteration, with pivoting. */
export function eigenvector(diagonal: readonly number[], off: readonly number[], value: number): Float64Array {
  const n = diagonal.length;
  let x = new Float64Array(n).fill(1);
  for (let round = 0; round < 3; round++) {
    // Rows of the upper triangle: pivot, next, next but one.
    const u = new Float64Array(n);
    const v = new Float64Array(n);
    const w = new Float64Array(n);
    const right = x.slice();
    let p = (diagonal[0] as number) - value;
    let r = n > 1 ? (off[0] as number) : 0;
    for (let i = 0; i < n - 1; i++) {
      const b = off[i] as number;
      const d = (diagonal[i + 1] as number) - value;
      const c = i + 2 < n ? (off[i + 1] as number) : 0;
      if (Math.abs(b) > Math.abs(p)) {
        const f = p / b;
        [u[i], v[i], w[i]] = [b, d, c];
        [right[i], right[i + 1]] = [right[i + 1] as number, (right[i] as number) - f * (right[i + 1] as number)];
        p = r - f * d;
        r = -f * c;
      } else {
        if (p === 0) p = 2 ** -60;
        const f = b / p;
        [u[i], v[i], w[i]] = [p, r, 0];
        right[i + 1] = (right[i + 1] as number) - f * (right[i] as number);
        p = d - f * r;
        r = c;
      }
    }
    u[n - 1] = Math.abs(p) < 2 ** -60 ? 2 ** -60 : p;
    for (let i = n - 1; i >= 0; i--) {
      let sum = right[i] as number;
      if (i + 1 < n) sum -= (v[i] as number) * (right[i + 1] as number);
      if (i + 2 < n) sum -= (w[i] as number) * (right[i + 2] as number);
      right[i] = sum / (u[i] as number);
    }
    let largest = 0;
    for (const y of right) largest = Math.max(largest, Math.abs(y));
    let square = 0;
    for (let i = 0; i < n; i++) square += ((right[i] as number) / largest) ** 2;
    const scale = 1 / (largest * Math.sqrt(square));
    x = right.map((y) => y * scale);
  }
  return x;
}
