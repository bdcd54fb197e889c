/** Growth of vectors and frames under drawn moves: the border of assembly/growth/norms. */
import { LimitError } from "../errors.js";
import { bitLength } from "../exact/rational.js";
import { drawStartWords, placeWeights } from "./draws.js";
import type { Kernel } from "./kernel.js";

type Matrix = readonly (readonly bigint[])[];

/** Bits that a matrix of the table may have: products of words stay exact integers. */
const EXACT_BITS = 52;
/** A table of words should stay in the first-level cache. */
const TABLE_BYTES = 16_384;
/** Binary orders of magnitude that vectors may gain between two rescalings. */
const RANGE_BITS = 900;
/** The same for the condition number between two orthonormalisations: R then keeps some 30 bits. */
const FRAME_BITS = 20;

/** The moves as the kernel takes them: cut once, handed to every job. */
export interface GrowthTable {
  readonly dimension: number;
  readonly moves: number;
  /** Moves in a word. */
  readonly length: number;
  /** Words between two normalisations. */
  readonly every: number;
  /** Matrices one after the other: single moves, then words. Columns first in dimension 2, else rows. */
  readonly entries: Float64Array<ArrayBuffer>;
  readonly cumulative: BigUint64Array<ArrayBuffer>;
}

function multiply(a: Matrix, b: Matrix): bigint[][] {
  return a.map((row) => b.map((_, k) => row.reduce((s, x, j) => s + x * (b[j]?.[k] as bigint), 0n)));
}

/** Bits of the largest row sum of absolute values: the most that one matrix adds to a vector's size. */
function growthBits(matrices: readonly Matrix[]): number {
  const sums = matrices.flatMap((m) => m.map((row) => row.reduce((s, x) => s + (x < 0n ? -x : x), 0n)));
  return Math.max(...sums.map(bitLength));
}

/**
 * The longest words (1, 2, 4 or 8 moves) whose products are exact in doubles and whose table
 * is small. Entries beyond 2^53 are rounded to the nearest double.
 * @throws LimitError where an entry has more than 400 bits: products would leave the doubles' range.
 */
export function growthTable(matrices: readonly Matrix[], cumulative: BigUint64Array<ArrayBuffer>): GrowthTable {
  const d = (matrices[0] as Matrix).length;
  const m = matrices.length;
  const bits = growthBits(matrices);
  if (bits > 400) throw new LimitError(`a matrix has entries of ${bits} bits; growth accepts up to 400`);
  let words: readonly Matrix[] = matrices;
  let length = 1;
  while (length < 8 && m ** (2 * length) * 8 * d * d <= TABLE_BYTES && 2 * length * bits <= EXACT_BITS) {
    const shorter = words;
    // The word's first half acts first, and its index counts fastest.
    words = shorter.flatMap((later) => shorter.map((earlier) => multiply(later, earlier)));
    length *= 2;
  }
  const all = length === 1 ? matrices : [...matrices, ...words];
  const flat = all.flatMap((a) => (d === 2 ? [a[0]?.[0], a[1]?.[0], a[0]?.[1], a[1]?.[1]] : a.flat()));
  const perWord = d === 2 ? length * bits : 2 * length * bits;
  const every = Math.max(1, Math.floor((d === 2 ? RANGE_BITS : FRAME_BITS) / perWord));
  return { dimension: d, moves: m, length, every, entries: Float64Array.from(flat, Number), cumulative };
}

export interface GrowthRun {
  readonly seed: bigint;
  readonly firstReplicate: number;
  /** In dimension 2 a multiple of 4. */
  readonly replicates: number;
  /** Moves before counting begins. */
  readonly warmUp: number;
  /** Increasing numbers of counted moves after which logarithms are taken. */
  readonly checkpoints: readonly number[];
}

/** An entry of a starting frame: uniform in [-1/2, 1/2), so that the frame is generic. */
export function startingFrame(kernel: Kernel, run: GrowthRun, replicate: number, d: number): number[][] {
  return Array.from({ length: d }, (_, i) =>
    Array.from(drawStartWords(kernel, run.seed, replicate, i, d), (w) => (Number(w >> 11n) + 0.5) / 2 ** 53 - 0.5),
  );
}

/**
 * Logarithms of growth since the end of the warm-up, at each checkpoint.
 *
 * In dimension 2: log of the length of a vector that starts in a generic direction, one
 * number for each replicate and checkpoint. In dimension d >= 3: the d sums of log R_jj of
 * the orthonormalised frame. Laid out [replicate][checkpoint][exponent].
 * @throws LimitError where the arena is too small
 */
export function sampleGrowth(kernel: Kernel, table: GrowthTable, run: GrowthRun): Float64Array<ArrayBuffer> {
  const { dimension: d, moves, length, every } = table;
  const planar = d === 2;
  const exponents = planar ? 1 : d;
  const columns = d + (d % 2);
  const stateBytes = planar ? 32 : 16 * d + 16 * d * columns;
  const frames = Array.from({ length: run.replicates }, (_, r) =>
    startingFrame(kernel, run, run.firstReplicate + r, d),
  );
  return kernel.scoped(() => {
    const weights = placeWeights(kernel, table.cumulative);
    const entries = kernel.alloc(table.entries.byteLength, "the table of words");
    const states = kernel.alloc(run.replicates * stateBytes, "the replicates' frames");
    const logs = kernel.alloc(8 * exponents * run.replicates, "the logarithms");
    kernel.f64(entries, table.entries.length).set(table.entries);
    for (const [r, frame] of frames.entries()) {
      const at = states + r * stateBytes;
      kernel.u8(at, stateBytes).fill(0);
      if (planar) {
        kernel.f64(at, 2).set([(frame[0] as number[])[0] as number, (frame[1] as number[])[0] as number]);
      } else {
        for (let j = 0; j < d; j++) kernel.f64(at + 16 * j, 1)[0] = 1;
        for (let i = 0; i < d; i++) kernel.f64(at + 16 * d + 8 * i * columns, d).set(frame[i] as number[]);
      }
    }
    const { raw } = kernel;
    const advance = (first: number, count: number) => {
      const common = [states, run.replicates, run.firstReplicate, run.seed, weights.at, moves, entries] as const;
      if (planar) raw.advanceVectors(...common, length, every, BigInt(first), count);
      else raw.advanceFrames(...common, length, every, BigInt(first), count, d);
      if (planar) raw.vectorLogs(logs, states, run.replicates);
      else raw.frameLogs(logs, states, run.replicates, d);
      return kernel.f64(logs, exponents * run.replicates).slice();
    };
    const points = run.checkpoints;
    const out = new Float64Array(run.replicates * points.length * exponents);
    const start = advance(0, run.warmUp);
    let done = 0;
    for (const [c, moves] of points.entries()) {
      const now = advance(run.warmUp + done, moves - done);
      done = moves;
      for (let r = 0; r < run.replicates; r++) {
        for (let j = 0; j < exponents; j++) {
          out[(r * points.length + c) * exponents + j] =
            (now[r * exponents + j] as number) - (start[r * exponents + j] as number);
        }
      }
    }
    return out;
  });
}
