/** Exact integer products of drawn moves, for short runs: curves of exceptional sets, and a check of the doubles. */
import { bitLength } from "../exact/rational.js";
import { cumulativeWeights, drawMoves, drawStartWords } from "../kernel/draws.js";
import { loadKernel } from "../kernel/kernel.js";
import type { Real } from "../kernel/real.js";
import type { Walk } from "../walk/walk.js";

/** log of a positive integer of any size. */
export function logInteger(n: bigint, real: Real): number {
  const shift = Math.max(0, bitLength(n) - 64);
  return real.log(Number(n >> BigInt(shift))) + shift * Math.LN2;
}

/**
 * log of the Frobenius norm of A_n...A_1, exact integers but for the logarithm, laid out
 * [replicate][checkpoint].
 */
export async function exactLogNorms(
  walk: Walk,
  seed: bigint,
  replicates: number,
  checkpoints: readonly number[],
  real: Real,
): Promise<number[][]> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 24 });
  const table = cumulativeWeights(walk.moves.map((m) => m.probability));
  const length = checkpoints.at(-1) as number;
  const d = walk.dimension;
  return Array.from({ length: replicates }, (_, r) => {
    const moves = drawMoves(kernel, table, seed, r, 0, length);
    let product: readonly (readonly bigint[])[] = Array.from({ length: d }, (_, i) =>
      Array.from({ length: d }, (_, j) => (i === j ? 1n : 0n)),
    );
    const out: number[] = [];
    for (const [n, move] of moves.entries()) {
      product = apply(walk.moves[move]?.matrix ?? [], product);
      if (n + 1 === checkpoints[out.length]) out.push(logSquares(product, real) / 2);
    }
    return out;
  });
}

/** log |A_n...A_1 v| for the vectors v that sampleGrowth starts from, exactly, at `length` moves, and after `from`. */
export async function exactVectorGrowth(
  walk: Walk,
  seed: bigint,
  replicates: number,
  from: number,
  length: number,
  real: Real,
): Promise<number[]> {
  const kernel = await loadKernel({ memoryLimit: 2 ** 24 });
  const table = cumulativeWeights(walk.moves.map((m) => m.probability));
  return Array.from({ length: replicates }, (_, r) => {
    const moves = drawMoves(kernel, table, seed, r, 0, from + length);
    // The border's starting entry (w + 1/2) 2^-53 - 1/2, w of 53 bits, times 2^54 and rounded as doubles are.
    let vector: readonly (readonly bigint[])[] = Array.from({ length: walk.dimension }, (_, i) => {
      const word = drawStartWords(kernel, seed, r, i, 1)[0] as bigint;
      return [BigInt(((Number(word >> 11n) + 0.5) / 2 ** 53 - 0.5) * 2 ** 54)];
    });
    let start = 0;
    for (const [n, move] of moves.entries()) {
      if (n === from) start = logSquares(vector, real) / 2;
      vector = apply(walk.moves[move]?.matrix ?? [], vector);
    }
    return logSquares(vector, real) / 2 - start;
  });
}

function apply(a: readonly (readonly bigint[])[], b: readonly (readonly bigint[])[]): bigint[][] {
  const width = (b[0] as readonly bigint[]).length;
  return a.map((row) =>
    Array.from({ length: width }, (_, k) =>
      row.reduce((s, x, j) => (x === 0n ? s : s + x * (b[j]?.[k] as bigint)), 0n),
    ),
  );
}

function logSquares(m: readonly (readonly bigint[])[], real: Real): number {
  return logInteger(
    m.reduce((s, row) => s + row.reduce((t, x) => t + x * x, 0n), 0n),
    real,
  );
}
