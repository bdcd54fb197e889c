/**
 * Frequency tables and their evolution by the dual walk: the border of assembly/dual.
 *
 * A table holds a function on the torus, the sum of c_k e_k over frequencies k other than
 * 0, e_k(x) = exp(2 pi i k.x). Memory for all tables of a run is taken at once.
 */
import { LimitError } from "../errors.js";
import type { Kernel } from "./kernel.js";

/**
 * How k and -k share a place: `none` (apart), `even` (same coefficient), `conjugate` (conjugate
 * coefficients; with one double a slot, which is then the imaginary part: odd functions).
 */
export type Fold = "none" | "even" | "conjugate";

export interface DualShape {
  readonly dimension: number;
  /** Doubles a coefficient: 1 where all stay real (or, folded, all imaginary), else 2. */
  readonly width: 1 | 2;
  readonly fold: Fold;
  /** Coefficients are integers, and so are weights; no phases. Their absolute sum must stay below 2^63. */
  readonly exact?: boolean;
  /** Frequencies are residues modulo this, 1 to 2^31 - 1; with the fold `none` only. */
  readonly modulus?: number;
}

/** What one move does to frequencies: e_k goes to weight exp(2 pi i k.translation) e_{matrix k}. */
export interface DualMove {
  readonly matrix: readonly (readonly bigint[])[];
  /** A whole number where the table's coefficients are exact integers, below 2^53 then. */
  readonly weight: number;
  /** d fractions, in units of 2^-128, from 0 to 2^128 - 1. Needs width 2. */
  readonly translation?: readonly bigint[];
}

export interface FrequencyTerm {
  readonly frequency: readonly bigint[];
  readonly re: number;
  readonly im: number;
}

/** A term of a table of exact integers. */
export interface IntegerTerm {
  readonly frequency: readonly bigint[];
  readonly re: bigint;
  readonly im: bigint;
}

/** A table's slots without gaps. */
export interface PackedFrequencies {
  readonly words: BigInt64Array;
  /** Largest |component|. */
  readonly largest: bigint;
}

/** Moves laid out in the arena. */
export interface PlacedMoves {
  readonly at: number;
  readonly count: number;
  /** Largest row sum of |entries|: a step multiplies the largest component by at most this. */
  readonly reach: bigint;
}

/** Where a step ended: all done, the table full, or a 64-bit component about to overflow. */
export type StepEnd = "done" | "full" | "overflow";

const LOAD = 0.8;
/** Slots that are passed in and out at a time: few enough to stay in the processor's cache. */
const BLOCK = 8192;
const INT64 = 1n << 63n;

/** Whether every matrix entry fits in the 63 bits of a component; `place` refuses others. */
export function movesFit(moves: readonly DualMove[]): boolean {
  return moves.every((m) => m.matrix.every((row) => row.every((e) => e > -INT64 && e < INT64)));
}

/** Slots of a table for so many entries. */
function slotsFor(entries: number): number {
  return Math.max(64, Math.ceil(entries / LOAD) + 1);
}

/** Bytes of a slot. */
function strideOf(shape: DualShape): number {
  return 8 * (shape.dimension + shape.width);
}

/** Entries that `tables` tables may hold in `bytes` bytes. */
export function entriesWithin(bytes: number, shape: DualShape, tables: number): number {
  return Math.max(16, Math.floor(((bytes / tables - 4096) / strideOf(shape)) * LOAD));
}

export class DualTables {
  private readonly at: number[] = [];
  private readonly scratch: number;
  private readonly stride: number;
  private readonly fold: number;
  private readonly modulus: bigint;
  private readonly exact: boolean;

  /**
   * Takes memory for `tables` tables of at most `entries` frequencies each.
   * @throws LimitError where the kernel's memory limit would be passed.
   */
  constructor(
    private readonly kernel: Kernel,
    readonly shape: DualShape,
    readonly entries: number,
    tables: number,
  ) {
    const { raw } = kernel;
    this.stride = strideOf(shape);
    this.fold = { none: raw.dualFoldNone(), even: raw.dualFoldEven(), conjugate: raw.dualFoldConjugate() }[shape.fold];
    this.modulus = BigInt(shape.modulus ?? 0);
    this.exact = shape.exact === true;
    const bytes = raw.dualHeaderBytes() + slotsFor(entries) * this.stride;
    kernel.require(tables * bytes, `${tables} frequency tables of ${entries} entries`);
    for (let i = 0; i < tables; i++) this.at.push(kernel.alloc(bytes, "a frequency table"));
    this.scratch = kernel.alloc(256, "frequency scratch");
    for (const table of this.at) raw.dualClear(table, 64, 0, this.stride);
  }

  /** Bytes that a frequency takes at the default load, in one table. */
  get bytesEach(): number {
    return this.stride / LOAD;
  }

  /** @throws LimitError where an entry of a matrix does not fit in 63 bits. */
  place(moves: readonly DualMove[]): PlacedMoves {
    const { dimension: d, modulus } = this.shape;
    const { kernel } = this;
    const bytes = kernel.raw.dualMoveBytes(d);
    const at = kernel.alloc(bytes * moves.length, "the dual moves");
    let reach = 0n;
    for (const [m, move] of moves.entries()) {
      const ints = kernel.i64(at + m * bytes, d * d);
      for (const [r, row] of move.matrix.entries()) {
        let sum = 0n;
        for (const [c, given] of row.entries()) {
          const entry = modulus === undefined ? given : positiveMod(given, BigInt(modulus));
          const size = entry < 0n ? -entry : entry;
          if (size >= INT64) throw new LimitError(`a matrix entry ${entry} is beyond 2^63, the limit for frequencies`);
          ints[r * d + c] = entry;
          sum += size;
        }
        if (sum > reach) reach = sum;
      }
      const tail = at + m * bytes + 8 * d * d;
      if (this.exact) {
        if (move.translation !== undefined) throw new RangeError("place: exact tables take no translations");
        kernel.i64(tail, 1)[0] = BigInt(move.weight);
      } else kernel.f64(tail, 1)[0] = move.weight;
      kernel.u64(tail + 8, 1)[0] = move.translation === undefined ? 0n : 1n;
      this.putFractions(tail + 16, move.translation ?? new Array<bigint>(d).fill(0n));
    }
    return { at, count: moves.length, reach };
  }

  private putFractions(at: number, fractions: readonly bigint[]): void {
    const words = this.kernel.u64(at, 2 * fractions.length);
    for (const [j, f] of fractions.entries()) {
      words[2 * j] = BigInt.asUintN(64, f);
      words[2 * j + 1] = BigInt.asUintN(64, f >> 64n);
    }
  }

  private clear(table: number, wanted: number): void {
    const limit = Math.min(this.entries, Math.max(wanted, 1));
    this.kernel.raw.dualClear(this.at[table] as number, slotsFor(limit), limit, this.stride);
  }

  /**
   * Replaces a table's contents; equal frequencies are added, and so are k and -k as the fold
   * says. With width 1, `re` is the coefficient that is kept.
   * @throws LimitError where there are more terms than entries, or a component is beyond 2^63.
   */
  fill(table: number, terms: readonly (FrequencyTerm | IntegerTerm)[]): void {
    const { dimension: d, width } = this.shape;
    const { kernel } = this;
    this.clear(table, terms.length);
    kernel.scoped(() => {
      const bytes = 8 * (d + 2);
      const at = kernel.alloc(bytes * Math.max(1, terms.length), "the initial frequencies");
      for (const [i, term] of terms.entries()) {
        const key = kernel.i64(at + i * bytes, d);
        for (const [j, k] of term.frequency.entries()) {
          if (k <= -INT64 || k >= INT64) throw new LimitError(`a frequency ${k} is beyond 2^63`);
          key[j] = this.modulus === 0n ? k : positiveMod(k, this.modulus);
        }
        const value = at + i * bytes + 8 * d;
        if (this.exact) kernel.i64(value, 2).set([BigInt(term.re), BigInt(term.im)]);
        else kernel.f64(value, 2).set([Number(term.re), Number(term.im)]);
      }
      const status = kernel.raw.dualAdd(this.at[table] as number, at, terms.length, d, width, this.fold, this.exact);
      if (status !== 0) throw new LimitError(`${terms.length} frequencies do not fit in ${this.entries} entries`);
    });
  }

  /**
   * Writes one step of the dual walk, from table `from` to table `to`; unless `done`, `to` is of no use.
   * @param keep frequencies with a larger |component| are dropped; absent: none
   */
  evolve(from: number, to: number, moves: PlacedMoves, keep?: bigint): StepEnd {
    const most = keep === undefined || keep >= INT64 ? 0n : keep;
    this.clear(to, this.count(from) * moves.count);
    return this.step(this.at[from] as number, this.at[to] as number, moves, most);
  }

  /** Adds the image of the table at one address to that at another. */
  private step(from: number, to: number, moves: PlacedMoves, keep: bigint): StepEnd {
    const { raw } = this.kernel;
    const { dimension, width } = this.shape;
    const checked = this.modulus === 0n && raw.dualLargest(from) * moves.reach >= INT64;
    const status = raw.dualEvolve(
      from,
      to,
      moves.at,
      moves.count,
      dimension,
      width,
      this.fold,
      this.modulus,
      checked,
      keep,
      this.exact,
    );
    if (status === 0) return "done";
    if (status === raw.statusOverflow()) return "overflow";
    if (status === raw.statusFull()) return "full";
    throw new Error(`dualEvolve answered ${status}`);
  }

  /**
   * Whether the next step from `table` would fill the tables by far, were it to grow like the last one
   * (from `before` frequencies): a step that ends `full` costs as much as one that is of use.
   */
  wouldFill(table: number, before: number, moves: PlacedMoves): boolean {
    const count = this.count(table);
    return count * Math.min(moves.count, count / Math.max(1, before)) > 1.2 * this.entries;
  }

  /** The slots taken, one after the other: for `evolvePart` elsewhere. */
  packed(table: number): PackedFrequencies {
    const { dimension: d, width } = this.shape;
    const { kernel } = this;
    const at = this.at[table] as number;
    const slots = kernel.raw.dualSlots(at) >>> 0;
    const words = new BigInt64Array(this.count(table) * (d + width));
    kernel.scoped(() => {
      const buffer = kernel.alloc(this.stride * BLOCK, "frequencies on their way");
      let filled = 0;
      for (let from = 0; from < slots; from += BLOCK) {
        const count = kernel.raw.dualGather(buffer, at, from, Math.min(slots, from + BLOCK), d, width) >>> 0;
        words.set(kernel.i64(buffer, count * (d + width)), filled);
        filled += count * (d + width);
      }
    });
    return { words, largest: this.largest(table) };
  }

  /**
   * One step from frequencies held elsewhere, into the part of a table whose hashes lie in the
   * `part`-th of `parts` ranges. They pass through this memory in blocks.
   */
  evolvePart(source: PackedFrequencies, to: number, moves: PlacedMoves, part: number, parts: number): StepEnd {
    const { kernel } = this;
    const { dimension: d, width } = this.shape;
    this.clear(to, this.entries);
    kernel.raw.dualSetPart(this.at[to] as number, part, parts);
    return kernel.scoped(() => {
      const block = kernel.alloc(kernel.raw.dualHeaderBytes() + this.stride * BLOCK, "frequencies on their way");
      const words = BLOCK * (d + width);
      for (let from = 0; from < source.words.length; from += words) {
        const some = source.words.subarray(from, from + words);
        kernel.raw.dualSetPacked(block, some.length / (d + width), source.largest);
        kernel.i64(block + kernel.raw.dualHeaderBytes(), some.length).set(some);
        const end = this.step(block, this.at[to] as number, moves, 0n);
        if (end !== "done") return end;
      }
      return "done";
    });
  }

  count(table: number): number {
    return this.kernel.raw.dualCount(this.at[table] as number) >>> 0;
  }

  /** Largest |component| of the frequencies in a table. */
  largest(table: number): bigint {
    return this.kernel.raw.dualLargest(this.at[table] as number);
  }

  /**
   * `sum`: over the slots, of the real part of a_k conj(b_k); a fold's second halves are not
   * counted. `absolute`: the products' absolute sum; both as computed (see dual-rounding.ts).
   * `met`: the number of common frequencies; where it is 0 the sum is 0 exactly.
   */
  pair(a: number, b: number): { sum: number; absolute: number; met: number } {
    const [walked, sought] = this.count(a) <= this.count(b) ? [a, b] : [b, a];
    const { dimension, width } = this.shape;
    this.kernel.raw.dualPair(this.scratch, this.at[walked] as number, this.at[sought] as number, dimension, width);
    const [sum, absolute, met] = this.kernel.f64(this.scratch, 3) as unknown as [number, number, number];
    return { sum, absolute, met };
  }

  /** The `sum` of `pair`, exactly, for tables of integers. */
  pairExact(a: number, b: number): bigint {
    const [walked, sought] = this.count(a) <= this.count(b) ? [a, b] : [b, a];
    const { dimension, width } = this.shape;
    this.kernel.raw.dualPairExact(this.scratch, this.at[walked] as number, this.at[sought] as number, dimension, width);
    const [low, high] = this.kernel.u64(this.scratch, 2) as unknown as [bigint, bigint];
    return BigInt.asIntN(128, (high << 64n) | low);
  }

  /** The sum of c_k exp(2 pi i k.x) over the slots; `point`: d fractions in units of 2^-128. */
  evaluate(table: number, point: readonly bigint[]): { re: number; im: number } {
    const { dimension, width } = this.shape;
    this.putFractions(this.scratch + 64, point);
    const { raw } = this.kernel;
    raw.dualEvaluate(this.scratch, this.at[table] as number, this.scratch + 64, dimension, width);
    const [re, im] = this.kernel.f64(this.scratch, 2) as unknown as [number, number];
    return { re, im };
  }

  /** Largest |real| + |imaginary| among the coefficients. */
  largestCoefficient(table: number): number {
    const { dimension, width } = this.shape;
    return this.kernel.raw.dualLargestCoefficient(this.at[table] as number, dimension, width);
  }

  /** The coefficient kept for a frequency, or for its partner -k under a fold; undefined where there is none. */
  coefficient(table: number, frequency: readonly bigint[]): { re: number; im: number } | undefined {
    const { dimension: d, width } = this.shape;
    this.kernel.i64(this.scratch, d).set(frequency);
    const at = this.kernel.raw.dualFind(this.at[table] as number, this.scratch, d, width, this.fold) >>> 0;
    if (at === 0) return undefined;
    const values = this.kernel.f64(at + 8 * d, width);
    return { re: values[0] as number, im: width === 2 ? (values[1] as number) : 0 };
  }

  /** The integer coefficient kept for a frequency, 0 where there is none; for tables of integers without a fold. */
  integerAt(table: number, frequency: readonly bigint[]): { re: bigint; im: bigint } {
    const { dimension: d, width } = this.shape;
    this.kernel.i64(this.scratch, d).set(frequency);
    const at = this.kernel.raw.dualFind(this.at[table] as number, this.scratch, d, width, this.fold) >>> 0;
    if (at === 0) return { re: 0n, im: 0n };
    const values = this.kernel.i64(at + 8 * d, width);
    return { re: values[0] as bigint, im: width === 2 ? (values[1] as bigint) : 0n };
  }

  /** All entries of a table, in the order of its slots. For small tables: reports and tests. */
  terms(table: number): FrequencyTerm[] {
    const { dimension: d, width } = this.shape;
    const { kernel } = this;
    return kernel.scoped(() => {
      const at = kernel.alloc(this.stride * Math.max(1, this.count(table)), "the listed frequencies");
      const place = this.at[table] as number;
      const count = kernel.raw.dualGather(at, place, 0, kernel.raw.dualSlots(place), d, width);
      return Array.from({ length: count }, (_, i) => {
        const values = kernel.f64(at + i * this.stride + 8 * d, width);
        const frequency = [...kernel.i64(at + i * this.stride, d)];
        return { frequency, re: values[0] as number, im: width === 2 ? (values[1] as number) : 0 };
      });
    });
  }

  /** exp(2 pi i k.b) as the kernel makes it; for tests. */
  phase(frequency: readonly bigint[], fractions: readonly bigint[]): { re: number; im: number } {
    this.kernel.i64(this.scratch + 192, this.shape.dimension).set(frequency);
    this.putFractions(this.scratch + 64, fractions);
    this.kernel.raw.dualPhase(this.scratch, this.scratch + 192, this.scratch + 64, this.shape.dimension);
    const [re, im] = this.kernel.f64(this.scratch, 2) as unknown as [number, number];
    return { re, im };
  }
}

function positiveMod(a: bigint, q: bigint): bigint {
  const r = a % q;
  return r < 0n ? r + q : r;
}
