/** Walks on points of one denominator: the border of assembly/trajectory/residue. */
import type { Kernel } from "./kernel.js";

/** Moves on points of one denominator: see src/trajectory/table.ts. */
export interface ResidueTable {
  readonly dimension: number;
  /** The common denominator q, below 2^63. */
  readonly denominator: bigint;
  /** One more than the largest row sum of |A| below, at most 2^40; see assembly/trajectory/residue.ts for `narrow`. */
  readonly rows: bigint;
  readonly narrow: boolean;
  /**
   * For each move d x (d + 1): centred residues of A modulo q, then the translation in [0, q),
   * in a narrow table plus q times the sum of the row's negative entries' sizes.
   */
  readonly moves: BigInt64Array;
  /** The start's numerators, in [0, q). */
  readonly start: BigInt64Array;
}

/** Residue walks, one after another in one arena. */
export class ResidueRun {
  private readonly movesAt: number;
  private readonly choicesAt: number;
  private readonly state: number;
  private readonly out: number;
  private readonly numeratorsAt: number;
  private readonly modulus: number;

  /** @param rows moves of one run at most, and one. @throws LimitError */
  constructor(
    private readonly kernel: Kernel,
    private readonly table: ResidueTable,
    readonly steps: number,
  ) {
    const { dimension, moves, denominator, rows, narrow } = table;
    this.movesAt = kernel.alloc(moves.byteLength, "the table of moves");
    this.choicesAt = kernel.alloc(2 * steps, "the choices of moves");
    this.state = kernel.alloc(16 * dimension, "a run's state");
    this.out = kernel.alloc(8 * (steps + 1) * dimension, "the positions");
    this.numeratorsAt = kernel.alloc(8 * (steps + 1) * dimension, "the numerators");
    this.modulus = kernel.alloc(kernel.raw.modulusBytes(), "a modulus");
    kernel.raw.modulusOpen(this.modulus, denominator, narrow ? 2n * rows : 0n);
    kernel.i64(this.movesAt, moves.length).set(moves);
    this.reset();
  }

  /** The choices of the coming run, u16. A view valid until the arena grows. */
  get choices(): Uint16Array<ArrayBuffer> {
    return this.kernel.u16(this.choicesAt, this.steps);
  }

  /** Fills the choices with `count` draws of a replicate from move `first` on. */
  draw(
    weights: { readonly at: number; readonly moves: number },
    seed: bigint,
    replicate: number,
    first = 0,
    count = this.steps,
  ): void {
    this.kernel.raw.drawMoves(this.choicesAt, count, BigInt(first), replicate, seed, weights.at, weights.moves);
  }

  /** Goes back to the start. */
  reset(): void {
    this.kernel.i64(this.state, this.table.dimension).set(this.table.start);
  }

  /**
   * Makes the first `steps` choices from the present point, which they replace.
   * @param positions false: numerators alone are written
   */
  run(steps = this.steps, positions = true): void {
    this.kernel.raw.residueWalk(
      this.table.dimension,
      this.movesAt,
      this.choicesAt,
      steps,
      this.modulus,
      this.state,
      positions ? this.out : 0,
      this.numeratorsAt,
    );
  }

  /** floor(2^64 x) of `rows` positions. */
  positions(rows: number): BigUint64Array<ArrayBuffer> {
    return this.kernel.u64(this.out, rows * this.table.dimension);
  }
  /** Numerators over the common denominator of `rows` positions. */
  numerators(rows: number): BigInt64Array<ArrayBuffer> {
    return this.kernel.i64(this.numeratorsAt, rows * this.table.dimension);
  }
}
