/**
 * Lambda(s) in dimension 2 by the weighted operator on directions,
 *
 *     (L_s h)(v) = sum_i p_i |A_i v|^s h(A_i v / |A_i v|),
 *
 * discretised on evenly spaced directions with linear interpolation, which keeps it
 * positive; its leading eigenvalue by power iteration, stopped when the least and the
 * greatest quotient L h / h agree. Floating point and not proved: the grid's own error is
 * judged by halving the grid.
 */
import type { Real } from "../kernel/real.js";
import type { Walk } from "../walk/walk.js";

/** The operator at one s. */
export interface Leading {
  readonly value: number;
  /** Half the spread of log(L h / h) over directions at the last iteration. */
  readonly spread: number;
}

export class DirectionOperator {
  private readonly index: Int32Array;
  private readonly fraction: Float64Array;
  private readonly logs: Float64Array;
  private readonly weights: Float64Array;
  private readonly moves: number;
  private readonly top: number;

  /** @param size number of directions in half a turn */
  constructor(
    walk: Walk,
    readonly size: number,
    private readonly real: Real,
  ) {
    const m = (this.moves = walk.moves.length);
    this.index = new Int32Array(size * m);
    this.fraction = new Float64Array(size * m);
    this.logs = new Float64Array(size * m);
    this.weights = Float64Array.from(walk.moves, (move) => move.probability.toNumber());
    const entries = walk.moves.map((move) => move.matrix.flat().map(Number));
    for (let q = 0; q < size; q++) {
      const angle = ((q + 0.5) * Math.PI) / size;
      const [x, y] = [real.cos(angle), real.sin(angle)];
      for (const [i, [a = 0, b = 0, c = 0, d = 0]] of entries.entries()) {
        const [u, v] = [a * x + b * y, c * x + d * y];
        // Directions half a turn apart are one; the grid's points sit at half-integers.
        let place = (real.atan2(v, u) / Math.PI) * size - 0.5;
        if (place < 0) place += size;
        if (place < 0) place += size;
        const below = Math.floor(place);
        this.index[q * m + i] = below % size;
        this.fraction[q * m + i] = place - below;
        this.logs[q * m + i] = real.log(Math.max(Math.abs(u), Math.abs(v))) + logHypotRest(u, v, real);
      }
    }
    this.top = this.logs.reduce((t, x) => Math.max(t, Math.abs(x)), 0);
  }

  /** @param sweeps iterations at most */
  leading(s: number, sweeps = 1000): Leading {
    const { size, moves: m, index, fraction, real } = this;
    // exp(s (log |A v|) - |s| top): at most 1.
    const shift = Math.abs(s) * this.top;
    const factors = Float64Array.from(this.logs, (x, k) => (this.weights[k % m] as number) * real.exp(s * x - shift));
    let h = new Float64Array(size).fill(1);
    let image = new Float64Array(size);
    let low = 0;
    let high = 0;
    for (let sweep = 0; sweep < sweeps; sweep++) {
      low = Number.POSITIVE_INFINITY;
      high = 0;
      let most = 0;
      for (let q = 0; q < size; q++) {
        let sum = 0;
        for (let k = q * m; k < (q + 1) * m; k++) {
          const at = index[k] as number;
          const f = fraction[k] as number;
          const next = at + 1 === size ? 0 : at + 1;
          sum += (factors[k] as number) * ((1 - f) * (h[at] as number) + f * (h[next] as number));
        }
        const quotient = sum / (h[q] as number);
        low = Math.min(low, quotient);
        high = Math.max(high, quotient);
        most = Math.max(most, sum);
        image[q] = sum;
      }
      // Averaging with the last h damps periodic parts and leaves the eigenfunction alone.
      const rate = (low + high) / 2;
      for (let q = 0; q < size; q++) image[q] = ((image[q] as number) + rate * (h[q] as number)) / (2 * most);
      [h, image] = [image, h];
      if (high - low < 1e-11 * high) break;
    }
    const [a, b] = [real.log(low), real.log(high)];
    return { value: (a + b) / 2 + shift, spread: (b - a) / 2 };
  }
}

/** log of |(u, v)| over the larger of |u| and |v|: squares stay in range. */
function logHypotRest(u: number, v: number, real: Real): number {
  const big = Math.max(Math.abs(u), Math.abs(v));
  const r = Math.min(Math.abs(u), Math.abs(v)) / big;
  return 0.5 * real.log1p(r * r);
}
