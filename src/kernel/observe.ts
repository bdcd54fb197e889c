/** Observables along a path of 64-bit positions: the border of assembly/averages/observe. */
import type { Kernel } from "./kernel.js";

/** What to evaluate, in numbers. */
export interface ObserveProgram {
  readonly dimension: number;
  /** Distinct frequencies, `dimension` integers each; only their residues mod 2^64 matter. */
  readonly frequencies: readonly (readonly bigint[])[];
  readonly observables: readonly ObservableProgram[];
}

export type ObservableProgram =
  /** Sum of cos * cos(2 pi k.x) + sin * sin(2 pi k.x), k = frequencies[frequency]. */
  | {
      readonly type: "waves";
      readonly waves: readonly { readonly frequency: number; readonly cos: number; readonly sin: number }[];
    }
  /** 1 where low <= X <= low + span for every side, X in units of 2^-64; else 0. No side: 1. */
  | {
      readonly type: "box";
      readonly sides: readonly { readonly coordinate: number; readonly low: bigint; readonly span: bigint }[];
    };

/** Rows evaluated at a time: the block's arrays stay in a core's own cache. */
export const OBSERVE_BLOCK = 1024;

/** A program laid out in a kernel's arena; valid until the arena is released. Positions in the same kernel's memory are not copied. */
export class Observer {
  private readonly positionsAt: number;
  private readonly frequenciesAt: number;
  private readonly wavesAt: number;
  private readonly valuesAt: number;
  private readonly sidesAt: number[];

  /** @throws LimitError where the arena has no room */
  constructor(
    private readonly kernel: Kernel,
    private readonly program: ObserveProgram,
  ) {
    const { dimension, frequencies, observables } = program;
    this.positionsAt = kernel.alloc(8 * dimension * OBSERVE_BLOCK, "a block of positions");
    this.frequenciesAt = kernel.alloc(8 * dimension * Math.max(1, frequencies.length), "the frequencies");
    // One pair of arrays a frequency, since several observables may share it.
    this.wavesAt = kernel.alloc(16 * OBSERVE_BLOCK * Math.max(1, frequencies.length), "cosines and sines of a block");
    this.valuesAt = kernel.alloc(8 * OBSERVE_BLOCK * Math.max(1, observables.length), "observables of a block");
    this.sidesAt = observables.map((f) => (f.type === "box" ? kernel.alloc(24 * f.sides.length, "a box") : 0));
    kernel
      .u64(this.frequenciesAt, dimension * frequencies.length)
      .set(frequencies.flat().map((k) => BigInt.asUintN(64, k)));
    for (const [i, f] of observables.entries()) {
      if (f.type !== "box") continue;
      const words = f.sides.flatMap((s) => [BigInt(s.coordinate), s.low, s.span]);
      kernel.u64(this.sidesAt[i] as number, words.length).set(words);
    }
  }

  private wave(frequency: number): { cos: number; sin: number } {
    const cos = this.wavesAt + 16 * OBSERVE_BLOCK * frequency;
    return { cos, sin: cos + 8 * OBSERVE_BLOCK };
  }

  /** Where rows from, ..., from + rows - 1 lie in the kernel's memory: where they are, or copied to the block. */
  private place(path: BigUint64Array, from: number, rows: number): number {
    const { dimension } = this.program;
    const block = this.kernel.u64(this.positionsAt, dimension * OBSERVE_BLOCK);
    if (path.buffer === block.buffer) return path.byteOffset + 8 * dimension * from;
    block.set(path.subarray(from * dimension, (from + rows) * dimension));
    return this.positionsAt;
  }

  /** Evaluates every observable on rows from, ..., from + rows - 1 (rows <= OBSERVE_BLOCK) into the block. */
  private evaluate(path: BigUint64Array, from: number, rows: number): void {
    const { raw } = this.kernel;
    const { dimension, frequencies, observables } = this.program;
    const at = this.place(path, from, rows);
    const values = this.kernel.f64(this.valuesAt, OBSERVE_BLOCK * observables.length);
    for (let k = 0; k < frequencies.length; k++) {
      const { cos, sin } = this.wave(k);
      raw.observePhases(at, rows, dimension, this.frequenciesAt + 8 * dimension * k, cos, sin);
    }
    for (const [i, f] of observables.entries()) {
      const to = this.valuesAt + 8 * OBSERVE_BLOCK * i;
      if (f.type === "box") {
        raw.observeBox(to, at, rows, dimension, this.sidesAt[i] as number, f.sides.length);
        continue;
      }
      values.fill(0, OBSERVE_BLOCK * i, OBSERVE_BLOCK * i + rows);
      for (const wave of f.waves) {
        const { cos, sin } = this.wave(wave.frequency);
        raw.observeAdd(to, rows, cos, sin, wave.cos, wave.sin);
      }
    }
  }

  /** Values of every observable at each of `rows` positions, row-major: observables x rows. */
  valuesAlong(path: BigUint64Array, rows: number): Float64Array<ArrayBuffer> {
    const out = new Float64Array(this.program.observables.length * rows);
    for (let from = 0; from < rows; from += OBSERVE_BLOCK) {
      const count = Math.min(OBSERVE_BLOCK, rows - from);
      this.evaluate(path, from, count);
      for (let i = 0; i < this.program.observables.length; i++) {
        out.set(this.kernel.f64(this.valuesAt + 8 * OBSERVE_BLOCK * i, count), i * rows + from);
      }
    }
    return out;
  }

  /**
   * Sums of every observable over consecutive segments of the path: segment j holds the rows
   * from ends[j - 1] (0 for the first) to ends[j] - 1. Written row-major, observables x
   * segments. Pieces of at most `OBSERVE_BLOCK` values are added as if in twice the precision,
   * then rounded; a segment adds its pieces in doubles.
   * @param ends increasing, all >= 1
   */
  segmentSums(path: BigUint64Array, ends: readonly number[], out: Float64Array): void {
    out.fill(0);
    this.addToSegments(path, 0, ends.at(-1) ?? 0, ends, out);
  }

  /**
   * Adds a part of a path to its segments' sums: rows first, ..., first + rows - 1 of the
   * whole; those beyond the last end are passed over.
   */
  addToSegments(path: BigUint64Array, first: number, rows: number, ends: readonly number[], out: Float64Array): void {
    const count = this.program.observables.length;
    const last = Math.min(first + rows, ends.at(-1) ?? 0);
    let segment = ends.findIndex((end) => end > first);
    for (let from = first; from < last; from += OBSERVE_BLOCK) {
      const to = Math.min(from + OBSERVE_BLOCK, last);
      this.evaluate(path, from - first, to - from);
      for (let at = from; at < to; ) {
        const end = Math.min(ends[segment] as number, to);
        for (let i = 0; i < count; i++) {
          const place = i * ends.length + segment;
          const start = this.valuesAt + 8 * (OBSERVE_BLOCK * i + at - from);
          out[place] = (out[place] as number) + this.kernel.raw.observeSum(start, end - at);
        }
        at = end;
        if (end === ends[segment]) segment++;
      }
    }
  }
}
