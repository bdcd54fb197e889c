/** Draws of moves and of uniform starts: the border of assembly/random. */
import { LimitError } from "../errors.js";
import { gcdBig, type Rational } from "../exact/rational.js";
import type { Kernel } from "./kernel.js";

/**
 * Cumulative move weights as integers over their common denominator; the last is the total.
 * @throws LimitError where the total needs 63 bits or more: a draw would not be exact.
 */
export function cumulativeWeights(probabilities: readonly Rational[]): BigUint64Array<ArrayBuffer> {
  let common = 1n;
  for (const p of probabilities) common *= p.den / gcdBig(common, p.den);
  if (common >= 1n << 63n) {
    throw new LimitError(`the weights' common denominator ${common} is beyond 2^63, the limit for exact draws`);
  }
  let sum = 0n;
  return BigUint64Array.from(probabilities, (p) => {
    sum += p.num * (common / p.den);
    return sum;
  });
}

/** A weight table laid out in a kernel's arena, for exports that draw moves themselves. */
export interface PlacedWeights {
  readonly at: number;
  readonly moves: number;
}

export function placeWeights(kernel: Kernel, cumulative: BigUint64Array): PlacedWeights {
  const at = kernel.alloc(cumulative.byteLength, "the weight table");
  kernel.u64(at, cumulative.length).set(cumulative);
  return { at, moves: cumulative.length };
}

/**
 * Move indices first, ..., first + count - 1 of a replicate: a function of (seed, replicate, move) alone.
 * @param replicate unsigned 32-bit
 */
export function drawMoves(
  kernel: Kernel,
  cumulative: BigUint64Array,
  seed: bigint,
  replicate: number,
  first: number,
  count: number,
): Uint16Array<ArrayBuffer> {
  return kernel.scoped(() => {
    const weights = placeWeights(kernel, cumulative);
    const out = kernel.alloc(2 * count, "the drawn moves");
    kernel.raw.drawMoves(out, count, BigInt(first), replicate, seed, weights.at, weights.moves);
    return kernel.u16(out, count).slice();
  });
}

/**
 * 64-bit words after the binary point of one coordinate of a uniform start, most significant
 * first; more words extend the same point.
 */
export function drawStartWords(
  kernel: Kernel,
  seed: bigint,
  replicate: number,
  coordinate: number,
  count: number,
): BigUint64Array<ArrayBuffer> {
  return kernel.scoped(() => {
    const out = kernel.alloc(8 * count, "a uniform start");
    kernel.raw.drawStart(out, count, 0n, coordinate, replicate, seed);
    return kernel.u64(out, count).slice();
  });
}
