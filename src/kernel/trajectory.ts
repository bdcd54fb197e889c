/** Walks from fixed-point starts: the border of assembly/trajectory/batches and window. */
import type { Kernel } from "./kernel.js";

/** Moves as the window kernel takes them: see src/trajectory/table.ts. */
export interface WindowTable {
  readonly dimension: number;
  /** Components of the vector: the point's coordinates, then the walk's constants. */
  readonly inputs: number;
  /** For each move the dimension x inputs matrix [A | E], row-major. */
  readonly matrices: BigInt64Array;
  /** Largest row sum of absolute entries of each, rounded up, at most 2^62. */
  readonly norms: Float64Array;
}

/** Digits of the point and of the constants: `limbs` interleaved 32-bit limbs, the top limb last. */
export interface StartDigits {
  readonly limbs: number;
  readonly values: Uint32Array;
}

/**
 * One window run after another in one arena: `choices`, `plan`, `start…`, then `advance`
 * until the moves are made. Every 64-bit word of a position is floor(x 2^64...) up to one
 * unit of the last: see assembly/trajectory/batches.ts for the proof.
 */
export class WindowRun {
  private readonly window: number;
  private readonly choicesAt: number;
  private readonly records: number;
  private readonly out: number;
  private readonly rest: number;
  private master: { readonly at: number; readonly limbs: number } | undefined;
  private state = 0;
  private scratch = 0;
  private room = 0;
  /** Most moves that one `advance` makes. */
  readonly block: number;

  /**
   * @param steps most moves of a run
   * @param words 64-bit words of each coordinate of a position
   * @param rows positions that the output holds; fewer than steps + 1: read it block by block
   * @throws LimitError
   */
  constructor(
    private readonly kernel: Kernel,
    private readonly table: WindowTable,
    readonly steps: number,
    private readonly words: number,
    rows: number = steps + 1,
  ) {
    const { raw } = kernel;
    const { dimension, inputs, matrices, norms } = table;
    const longest = raw.windowLongest();
    this.block = Math.max(longest, Math.min(rows, steps + 1) - 1);
    const moves = kernel.alloc(matrices.byteLength, "the table of moves");
    const normsAt = kernel.alloc(norms.byteLength, "the table of moves");
    this.window = kernel.alloc(raw.windowBytes(), "a run's state");
    const work = kernel.alloc(raw.windowWorkBytes(dimension, inputs, words), "a run's work space");
    this.choicesAt = kernel.alloc(2 * steps, "the choices of moves");
    this.records = kernel.alloc(this.capacity * raw.windowRecordBytes(dimension, inputs), "the plan of batches");
    this.out = kernel.alloc(8 * (this.block + 1) * dimension * words, "the positions");
    this.rest = raw.mark();
    kernel.i64(moves, matrices.length).set(matrices);
    kernel.f64(normsAt, norms.length).set(norms);
    raw.windowOpen(this.window, dimension, inputs, words, moves, normsAt, norms.length, work);
  }

  /**
   * Batches of any run, at most. A batch ends where one more move would pass 2^30 (or, by
   * the bound |A| |M|, 2^62), so two neighbours consume 30 bits of the sum of log2 |A|.
   */
  private get capacity(): number {
    const largest = this.table.norms.reduce((a, b) => Math.max(a, b), 2);
    let bits = 0;
    while (2 ** bits < largest) bits++;
    return Math.min(
      this.steps,
      Math.ceil((this.steps * bits) / 15) + Math.ceil(this.steps / this.kernel.raw.windowLongest()) + 2,
    );
  }

  /** The choices of the coming run, u16, to be filled before `plan`. A view valid until the arena grows. */
  get choices(): Uint16Array<ArrayBuffer> {
    return this.kernel.u16(this.choicesAt, this.steps);
  }

  /** Fills the choices with the draws of a replicate. */
  draw(weights: { readonly at: number; readonly moves: number }, seed: bigint, replicate: number): void {
    this.kernel.raw.drawMoves(this.choicesAt, this.steps, 0n, replicate, seed, weights.at, weights.moves);
  }

  /**
   * Plans a run of the first `steps` choices.
   * @returns the limbs that it needs
   */
  plan(steps = this.steps): number {
    const { raw } = this.kernel;
    const status = raw.windowPlan(this.window, this.choicesAt, steps, this.records, this.capacity);
    if (status !== 0) throw new Error(`windowPlan: more batches than ${this.capacity}, the bound`);
    return raw.windowLimbs(this.window);
  }

  /** Bits that the planned run consumes beside those shown, at most. */
  get consumes(): number {
    return this.kernel.raw.windowConsumes(this.window);
  }
  /** Limbs a component that the rest of the run needs. */
  get limbs(): number {
    return this.kernel.raw.windowLimbs(this.window);
  }

  /** Lays out room for `limbs` limbs, forgetting the digits that are held. @throws LimitError */
  reserve(limbs: number): void {
    const { kernel, table } = this;
    kernel.raw.release(this.rest);
    this.master = undefined;
    this.room = 0;
    const bytes = 4 * limbs * table.inputs;
    kernel.require(2 * bytes + 4 * limbs, "the start's digits");
    const at = kernel.alloc(bytes, "the start's digits");
    this.state = kernel.alloc(bytes, "the start's digits");
    this.scratch = kernel.alloc(4 * limbs + 8, "the start's digits");
    this.room = limbs;
    this.master = { at, limbs: 0 };
  }

  /** Whether the digits held suffice for a run of `limbs` limbs. */
  holds(limbs: number): boolean {
    return this.master !== undefined && this.master.limbs >= limbs;
  }

  /** Holds digits for this and later runs. @throws LimitError */
  hold(digits: StartDigits): void {
    if (digits.limbs > this.room) this.reserve(digits.limbs);
    const at = (this.master as { at: number }).at;
    this.kernel.u32(at, digits.values.length).set(digits.values);
    this.master = { at, limbs: digits.limbs };
  }

  /** Starts the planned run from the digits that are held. */
  start(limbs: number): void {
    const { at, limbs: held } = this.master as { at: number; limbs: number };
    const count = limbs * this.table.inputs;
    const from = at / 4 + (held - limbs) * this.table.inputs;
    this.kernel.u32(0, (this.scratch + 4) / 4).copyWithin(this.state / 4, from, from + count);
    this.kernel.raw.windowStart(this.window, this.state, limbs);
  }

  /** Starts the planned run from the uniform point of a replicate; the constants from what is held. */
  startUniform(limbs: number, seed: bigint, replicate: number): void {
    this.start(limbs);
    const { dimension, inputs } = this.table;
    this.kernel.raw.scatterStart(this.state, limbs, dimension, inputs, replicate, seed, this.scratch);
  }

  /**
   * Makes at most `most` (default: `block`) moves and writes the position before each.
   * @param emit false: positions are not written
   * @returns the number of moves made: 0 only where none are left
   */
  advance(most = this.block, emit = true): number {
    const { raw } = this.kernel;
    const moves = Math.max(raw.windowLongest(), Math.min(most, this.block));
    return raw.windowAdvance(this.window, moves, emit ? this.out : 0);
  }

  /** Writes the present position as row `row` of the output. */
  emit(row: number): void {
    this.kernel.raw.windowEmit(this.window, this.out + 8 * row * this.table.dimension * this.words);
  }

  /** The first `rows` positions written: dimension x words 64-bit words each, the most significant first. */
  positions(rows: number): BigUint64Array<ArrayBuffer> {
    return this.kernel.u64(this.out, rows * this.table.dimension * this.words);
  }
}
