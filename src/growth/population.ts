/**
 * Lambda(s) by populations, any dimension: particles are directions; each step, each takes a
 * drawn move and the weight |A v|^s, the mean weight estimates one factor of E |A_n...A_1 v|^s,
 * and particles are drawn anew in proportion to their weights (systematic resampling).
 * Independent populations give the spread; the bias is of order 1 / particles and not in it.
 */
import { drawMoves, drawStartWords } from "../kernel/draws.js";
import { loadKernel } from "../kernel/kernel.js";
import { loadReal } from "../kernel/real.js";

export interface PopulationRun {
  readonly s: number;
  readonly seed: bigint;
  readonly populations: number;
  readonly particles: number;
  /** Counted steps; a quarter as many come before them. */
  readonly steps: number;
  readonly dimension: number;
  /** Moves' entries as doubles, row after row. */
  readonly entries: Float64Array<ArrayBuffer>;
  readonly cumulative: BigUint64Array<ArrayBuffer>;
}

/** Replicate numbers from here on belong to populations: the sampled replicates stay below. */
const FIRST_REPLICATE = 0x80000000;

const unit = (w: bigint) => (Number(w >> 11n) + 0.5) / 2 ** 53;

export async function populationPressure(run: PopulationRun): Promise<number[]> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 26 });
  const real = await loadReal();
  const { s, particles: p, dimension: d, entries, steps } = run;
  const warm = Math.floor(steps / 4);
  const answers: number[] = [];
  for (let population = 0; population < run.populations; population++) {
    const replicate = FIRST_REPLICATE + population;
    const now = new Float64Array(p * d);
    const next = new Float64Array(p * d);
    // Generic starting directions, one coordinate after the other.
    for (let i = 0; i < d; i++) {
      const words = drawStartWords(kernel, run.seed, replicate, i, p);
      for (const [q, w] of words.entries()) now[q * d + i] = unit(w) - 0.5;
    }
    for (let q = 0; q < p; q++) normalise(now, q * d, d);
    const offsets = drawStartWords(kernel, run.seed, replicate, d, warm + steps);
    const weights = new Float64Array(p);
    let total = 0;
    for (let step = 0; step < warm + steps; step++) {
      const moves = drawMoves(kernel, run.cumulative, run.seed, replicate, step * p, p);
      let top = Number.NEGATIVE_INFINITY;
      for (let q = 0; q < p; q++) {
        const m = (moves[q] as number) * d * d;
        for (let i = 0; i < d; i++) {
          let x = 0;
          for (let j = 0; j < d; j++) x += (entries[m + i * d + j] as number) * (now[q * d + j] as number);
          next[q * d + i] = x;
        }
        weights[q] = s * real.log(normalise(next, q * d, d));
        top = Math.max(top, weights[q] as number);
      }
      // Weights over the largest one: no power leaves the doubles' range.
      let sum = 0;
      for (let q = 0; q < p; q++) sum += weights[q] = real.exp((weights[q] as number) - top);
      if (step >= warm) total += top + real.log(sum / p);
      // Systematic resampling: one uniform offset, evenly spaced pointers into the running sum.
      const spacing = sum / p;
      let pointer = unit(offsets[step] as bigint) * spacing;
      let running = 0;
      let filled = 0;
      for (let q = 0; q < p && filled < p; q++) {
        running += weights[q] as number;
        while (filled < p && (pointer < running || q === p - 1)) {
          now.set(next.subarray(q * d, q * d + d), filled * d);
          filled++;
          pointer += spacing;
        }
      }
    }
    answers.push(total / steps);
  }
  return answers;
}

/** Divides d numbers at `at` by their length, which is returned. */
function normalise(v: Float64Array, at: number, d: number): number {
  let square = 0;
  for (let i = at; i < at + d; i++) square += (v[i] as number) * (v[i] as number);
  const length = Math.sqrt(square);
  for (let i = at; i < at + d; i++) v[i] = (v[i] as number) / length;
  return length;
}
