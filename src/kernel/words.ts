/** Means over words in the moves, with proved bounds: the border of assembly/growth/words. */
import type { Kernel } from "./kernel.js";

/** Matrices as doubles, row after row, and the moves' probabilities. */
export interface WordTable {
  readonly dimension: number;
  readonly moves: number;
  readonly entries: Float64Array<ArrayBuffer>;
  readonly shares: Float64Array<ArrayBuffer>;
  /** Positive integers, the coefficients of |x|: at most 2^12. */
  readonly form: Float64Array<ArrayBuffer>;
}

export interface WordMean {
  /** Proved bounds, every rounding included. */
  readonly low: number;
  readonly high: number;
  /** Words looked at, and moves of the longest. */
  readonly words: number;
  readonly longest: number;
}

/** The word below which a mean is taken: its product, row after row, its probability, its moves. */
export interface Prefix {
  readonly product: Float64Array<ArrayBuffer>;
  readonly share: number;
  readonly length: number;
}

const UNIT = 2 ** -52;

function run(kernel: Kernel, table: WordTable, depth: number, cut: number | undefined, prefix: Prefix): WordMean {
  const { dimension: d, moves: m } = table;
  return kernel.scoped(() => {
    const at = kernel.alloc(8 * (m * d * (d + 1) + d), "the moves");
    const shares = kernel.alloc(8 * m, "the moves' probabilities");
    const work = kernel.alloc(8 * ((depth + 1) * d * d + m * (d + 1)), "the words' products");
    const out = kernel.alloc(40, "the result");
    const entries = kernel.f64(at, m * d * (d + 1) + d);
    entries.set(table.entries);
    entries.set(table.form, m * d * (d + 1));
    for (let i = 0; i < m; i++) {
      for (let j = 0; j < d; j++) {
        let sum = 0;
        for (let k = 0; k < d; k++) sum += table.form[k]! * entries[i * d * d + k * d + j]!;
        entries[m * d * d + i * d + j] = sum;
      }
    }
    kernel.f64(shares, m).set(table.shares);
    kernel.f64(work, d * d).set(prefix.product);
    if (cut === undefined) kernel.raw.wordNorms(at, shares, d, m, work, depth, out);
    else kernel.raw.wordMeans(at, shares, d, m, work, depth, prefix.share, cut, out);
    const [low, high, words, longest, most] = kernel.f64(out, 5) as unknown as [number, number, number, number, number];
    const moves = longest + prefix.length;
    // In units of 2^-53: a product of n moves n (d + 1), two linear forms d each and their quotient,
    // twice that for q / c, times its size of at most d, and once for the logarithms' arguments; one
    // unit in the last place for a logarithm; m + 2 a level for the mean.
    const parts = (2 * d + 1) * ((moves + 2) * (d + 1) + 2);
    const error = UNIT * (parts / 2 + most * (2 + ((longest + 2) * (m + 2)) / 2) + 4);
    return { low: low - error, high: high + error, words, longest: moves };
  });
}

/** The empty word. */
export function emptyWord(d: number): Prefix {
  return { product: Float64Array.from({ length: d * d }, (_, k) => (k % (d + 1) === 0 ? 1 : 0)), share: 1, length: 0 };
}

/**
 * Bounds of the mean growth of directions, for matrices whose doubles are at least 0 and right
 * to half a unit: words are cut where their share of the width is at most `cut`, or at `depth` moves.
 * Only the part of the mean below `prefix`, over its probability.
 */
export function wordMeans(
  kernel: Kernel,
  table: WordTable,
  depth: number,
  cut: number,
  prefix = emptyWord(table.dimension),
): WordMean {
  return run(kernel, table, depth, cut, prefix);
}

/**
 * Bounds around the mean of log min(Frobenius norm, sqrt(column sum x row sum)) over all words
 * of `depth` moves; the caller sees to it that their entries stay below 2^53, so that they are exact.
 */
export function wordNorms(kernel: Kernel, table: WordTable, depth: number): WordMean {
  return run(kernel, table, depth, undefined, emptyWord(table.dimension));
}
