/**
 * Bounds of exponents by exact enumeration of words, any dimension.
 *
 * Moves without negative entries (after a change of signs): lambda_1 is the mean of
 * log(|A x| / |x|) under the stationary law, which is cut into pieces until the bounds on all
 * of them are close. Other moves: log of a norm is subadditive, so (1/n) E log |A_n...A_1| is
 * an upper bound of lambda_1 for every n.
 */
import { bitLength } from "../exact/rational.js";
import { loadKernel } from "../kernel/kernel.js";
import { type WordMean, type WordTable, wordMeans, wordNorms } from "../kernel/words.js";
import type { Effort } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { nonNegativeMoves } from "./orthant.js";

/** Words at most, about: a matter of a second at the standard effort. */
const WORDS: Record<Effort, number> = { quick: 2 ** 16, standard: 2 ** 21, thorough: 2 ** 24 };
/** Moves of a word at most: some are cut often, such as powers of one shear. */
const DEPTH = 400;
/** Entries below this have exact sums of exact products. */
const EXACT_BITS = 52;

function tableOf(walk: Walk, matrices: readonly (readonly (readonly bigint[])[])[]): WordTable {
  return {
    dimension: walk.dimension,
    moves: matrices.length,
    entries: Float64Array.from(
      matrices.flatMap((a) => a.flat()),
      Number,
    ),
    shares: Float64Array.from(walk.moves, (m) => m.probability.toNumber()),
  };
}

export interface WordsJob {
  readonly table: WordTable;
  readonly effort: Effort;
  /** Moves of a word whose norm is wanted; absent: means of directions. */
  readonly norms?: number;
}

/** The task for lambda_1 of moves without negative entries; undefined for others. */
export function meansJob(walk: Walk, effort: Effort): WordsJob | undefined {
  const matrices = nonNegativeMoves(walk);
  return matrices && { table: tableOf(walk, matrices), effort };
}

/** The task for an upper bound of lambda_1: as long words as the effort allows and doubles hold exactly. */
export function normsJob(walk: Walk, effort: Effort): WordsJob | undefined {
  const rows = walk.moves.flatMap((m) => m.matrix.map((row) => row.reduce((s, x) => s + (x < 0n ? -x : x), 0n)));
  const bits = Math.max(1, ...rows.map(bitLength));
  let length = 0;
  for (let words = walk.moves.length; words <= WORDS[effort] && (length + 1) * bits <= EXACT_BITS; length++) {
    words *= walk.moves.length;
  }
  if (length === 0) return undefined;
  return {
    table: tableOf(
      walk,
      walk.moves.map((m) => m.matrix),
    ),
    effort,
    norms: length,
  };
}

export async function runWords({ table, effort, norms }: WordsJob): Promise<WordMean> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 24 });
  if (norms !== undefined) return wordNorms(kernel, table, norms);
  let best: WordMean | undefined;
  for (let cut = 2 ** -8; ; cut /= 8) {
    const found = wordMeans(kernel, table, DEPTH, cut);
    if (best === undefined || found.high - found.low < best.high - best.low) best = found;
    // An eighth of the threshold takes up to eight times the words; below 2^-60 rounding rules.
    if (found.words * 6 > WORDS[effort] || cut < 2 ** -70) return best;
  }
}
