/**
 * Bounds of exponents by exact enumeration of words, any dimension.
 *
 * Moves without negative entries (after a change of signs): lambda_1 is the mean of
 * log(|A x| / |x|) under the stationary law, which is cut into pieces until the bounds on all
 * of them are close. Other moves: log of a norm is subadditive, so (1/n) E log |A_n...A_1| is
 * an upper bound of lambda_1 for every n.
 */
import { bitLength, Rational } from "../exact/rational.js";
import { loadKernel } from "../kernel/kernel.js";
import type { Real } from "../kernel/real.js";
import { type Prefix, type WordMean, type WordTable, wordMeans, wordNorms } from "../kernel/words.js";
import type { Effort } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { nonNegativeMoves } from "./orthant.js";

/** Words whose norms are taken, at most: a matter of a tenth of a second at the standard effort. */
const NORMS: Record<Effort, number> = { quick: 2 ** 16, standard: 2 ** 21, thorough: 2 ** 24 };
/** Words that carry means of directions, about: some seconds at the standard effort. */
const MEANS: Record<Effort, number> = { quick: 2 ** 17, standard: 2 ** 24, thorough: 2 ** 27 };
/** The first look takes a part of them. */
const LOOK = 32;
/** Means narrower than this have reached what rounding leaves. */
const NARROW = 1e-12;
/** Parts into which the last look is cut, at least, where there are as many words of some length up to `PREFIX`. */
const PARTS = 64;
const PREFIX = 8;
/** Moves of a word at most: some are cut often, such as powers of one shear. */
const DEPTH = 4000;
/** Entries below this have exact sums of exact products. */
const EXACT_BITS = 52;

/** Bits of the linear form's coefficients. */
const FORM_BITS = 12;

/**
 * The linear form that the mean move stretches, nearly: the leading eigenvector of its transpose,
 * in small integers. Under it the mean of |A x| / |x| hardly depends on x.
 */
function steadyForm(matrices: readonly (readonly (readonly bigint[])[])[], shares: readonly number[]): number[] {
  const d = (matrices[0] as readonly unknown[]).length;
  let c = new Array<number>(d).fill(1);
  for (let sweep = 0; sweep < 200; sweep++) {
    const next = c.map((x, k) =>
      matrices.reduce((s, a, i) => s + shares[i] * a.reduce((t, row, j) => t + c[j] * Number(row[k]), 0), x),
    );
    const top = Math.max(...next);
    c = next.map((x) => x / top);
  }
  return c.map((x) => Math.max(1, Math.round(x * 2 ** FORM_BITS)));
}

function tableOf(walk: Walk, matrices: readonly (readonly (readonly bigint[])[])[]): WordTable {
  const shares = walk.moves.map((m) => m.probability.toNumber());
  return {
    dimension: walk.dimension,
    moves: matrices.length,
    entries: Float64Array.from(
      matrices.flatMap((a) => a.flat()),
      Number,
    ),
    shares: Float64Array.from(shares),
    form: Float64Array.from(steadyForm(matrices, shares)),
  };
}

export interface WordsJob {
  readonly table: WordTable;
  /** Moves of a word whose norm is wanted; absent: means of directions. */
  readonly norms?: number;
  /** Of the means: thresholds to try one after the other until `words` is passed, and below which word. */
  readonly means?: { readonly cuts: readonly number[]; readonly words: number; readonly prefix?: Prefix };
}

/** The means at the thresholds that were tried. */
export type WordsAnswer = readonly (WordMean & { readonly cut: number })[];

/** The first look at lambda_1 of moves without negative entries; undefined for others. */
export function meansJob(walk: Walk, effort: Effort): WordsJob | undefined {
  const matrices = nonNegativeMoves(walk);
  if (matrices === undefined) return undefined;
  const cuts = Array.from({ length: 22 }, (_, k) => 2 ** (-8 - 3 * k));
  return { table: tableOf(walk, matrices), means: { cuts, words: MEANS[effort] / LOOK } };
}

/**
 * The last look, in parts: the threshold that by the first look's trend takes all words of the
 * effort; empty where the first look was narrow enough. `share`: the part's weight in the mean.
 */
export function finerJobs(
  walk: Walk,
  effort: Effort,
  { table }: WordsJob,
  tried: WordsAnswer,
  real: Real,
): { readonly job: WordsJob; readonly share: Rational }[] {
  const [before, last] = tried.slice(-2);
  const matrices = nonNegativeMoves(walk);
  if (before === undefined || last === undefined || matrices === undefined) return [];
  if (last.high - last.low < NARROW || last.words < 1.1 * before.words) return [];
  const trend = real.log(last.words / before.words) / real.log(before.cut / last.cut);
  const cut = last.cut * real.pow(last.words / MEANS[effort], 1 / trend);
  const d = walk.dimension;
  const unit = Array.from({ length: d }, (_, i) => Array.from({ length: d }, (_, j) => BigInt(i === j ? 1 : 0)));
  let words: { product: bigint[][]; share: Rational; length: number }[] = [
    { product: unit, share: Rational.ONE, length: 0 },
  ];
  while (walk.moves.length > 1 && words.length < PARTS && words[0]!.length < PREFIX) {
    words = words.flatMap((w) =>
      matrices.map((a, i) => ({
        product: w.product.map((row) => row.map((_, k) => row.reduce((s, x, j) => s + x * a[j][k], 0n))),
        share: w.share.mul(walk.moves[i].probability),
        length: w.length + 1,
      })),
    );
  }
  return words.map(({ product, share, length }) => {
    const prefix = { product: Float64Array.from(product.flat(), Number), share: share.toNumber(), length };
    return { job: { table, means: { cuts: [cut], words: 0, prefix } }, share };
  });
}

/** The task for an upper bound of lambda_1: as long words as the effort allows and doubles hold exactly. */
export function normsJob(walk: Walk, effort: Effort): WordsJob | undefined {
  const rows = walk.moves.flatMap((m) => m.matrix.map((row) => row.reduce((s, x) => s + (x < 0n ? -x : x), 0n)));
  const bits = Math.max(1, ...rows.map(bitLength));
  let length = 0;
  for (let words = walk.moves.length; words <= NORMS[effort] && (length + 1) * bits <= EXACT_BITS; length++) {
    words *= walk.moves.length;
  }
  if (length === 0) return undefined;
  return {
    table: tableOf(
      walk,
      walk.moves.map((m) => m.matrix),
    ),
    norms: length,
  };
}

export async function runWords({ table, norms, means }: WordsJob): Promise<WordsAnswer> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 24 });
  if (norms !== undefined) return [{ ...wordNorms(kernel, table, norms), cut: 0 }];
  const tried: (WordMean & { cut: number })[] = [];
  for (const cut of means?.cuts ?? []) {
    const found = wordMeans(kernel, table, DEPTH, cut, means?.prefix);
    tried.push({ ...found, cut });
    // An eighth of the threshold takes up to eight times the words.
    if (8 * found.words > (means?.words ?? 0)) break;
  }
  return tried;
}

/** The narrowest of several means. */
export function narrowest(tried: WordsAnswer): WordMean {
  return tried.reduce((a, b) => (b.high - b.low < a.high - a.low ? b : a));
}
