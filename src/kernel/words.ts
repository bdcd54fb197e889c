/** Means over words in the moves, with proved bounds: the border of assembly/growth/words. */
import type { Kernel } from "./kernel.js";

/** Matrices as doubles, row after row, and the moves' probabilities. */
export interface WordTable {
  readonly dimension: number;
  readonly moves: number;
  readonly entries: Float64Array<ArrayBuffer>;
  readonly shares: Float64Array<ArrayBuffer>;
}

export interface WordMean {
  /** Proved bounds, every rounding included. */
  readonly low: number;
  readonly high: number;
  /** Words looked at, and moves of the longest. */
  readonly words: number;
  readonly longest: number;
}

const UNIT = 2 ** -52;

function run(kernel: Kernel, table: WordTable, depth: number, cut: number | undefined): WordMean {
  const { dimension: d, moves: m } = table;
  return kernel.scoped(() => {
    const at = kernel.alloc(8 * m * d * (d + 1), "the moves");
    const shares = kernel.alloc(8 * m, "the moves' probabilities");
    const work = kernel.alloc(8 * (depth + 1) * d * d, "the words' products");
    const out = kernel.alloc(40, "the result");
    const entries = kernel.f64(at, m * d * (d + 1));
    entries.set(table.entries);
    for (let i = 0; i < m; i++) {
      for (let j = 0; j < d; j++) {
        let sum = 0;
        for (let k = 0; k < d; k++) sum += entries[i * d * d + k * d + j]!;
        entries[m * d * d + i * d + j] = sum;
      }
    }
    kernel.f64(shares, m).set(table.shares);
    if (cut === undefined) kernel.raw.wordNorms(at, shares, d, m, work, depth, out);
    else kernel.raw.wordMeans(at, shares, d, m, work, depth, cut, out);
    const [low, high, words, longest, most] = kernel.f64(out, 5) as unknown as [number, number, number, number, number];
    // Half a unit each for d products and sums a level, twice for a quotient; a unit for the logarithm;
    // half a unit each for the probability and the m products and sums a level of the mean.
    const error = UNIT * ((longest + 2) * (d + 1) + most * (2 + ((longest + 1) * (m + 2)) / 2) + 4);
    return { low: low - error, high: high + error, words, longest };
  });
}

/**
 * Bounds of the mean growth of directions, for matrices whose doubles are at least 0 and right
 * to half a unit: words are cut where their share of the width is at most `cut`, or at `depth` moves.
 */
export function wordMeans(kernel: Kernel, table: WordTable, depth: number, cut: number): WordMean {
  return run(kernel, table, depth, cut);
}

/**
 * Bounds around the mean of log min(Frobenius norm, sqrt(column sum x row sum)) over all words
 * of `depth` moves; the caller sees to it that their entries stay below 2^53, so that they are exact.
 */
export function wordNorms(kernel: Kernel, table: WordTable, depth: number): WordMean {
  return run(kernel, table, depth, undefined);
}
