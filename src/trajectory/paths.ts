/**
 * One walk as a stream of blocks: for irrational points the window kernel where the walk is
 * short and the tree where it is long, for rational ones the residue kernel or BigInt.
 */
import type { ExactNumber } from "../exact/number.js";
import { cumulativeWeights, drawMoves } from "../kernel/draws.js";
import { type Kernel, loadKernel } from "../kernel/kernel.js";
import { ResidueRun } from "../kernel/residue.js";
import { WindowRun, type WindowTable } from "../kernel/trajectory.js";
import { TreeRun } from "../kernel/tree.js";
import type { Walk } from "../walk/walk.js";
import { FractionBlock, type PositionBlock, WordBlock, wordsFor } from "./block.js";
import { binaryFloor, startDigits, uniformFloor } from "./digits.js";
import type { Share } from "./pace.js";
import { type RationalWalk, rationalWalk, residueTable, windowTable } from "./table.js";

export interface PathOptions {
  readonly seed: bigint;
  /** Which replicate's draws (and uniform point), unsigned 32-bit; default 0. */
  readonly replicate?: number;
  readonly steps: number;
  /** In place of draws: `steps` move indices. */
  readonly choices?: Uint16Array;
  /** Decimal digits that positions will be asked for. */
  readonly digits: number;
  readonly memoryLimit: number;
  /** Bits from which the tree is taken; for tests and benches. */
  readonly treeBits?: number;
}

export interface Path {
  readonly method: string;
  readonly exact: boolean;
  readonly choices: Uint16Array;
  /** Bits with which the start is held. */
  readonly bitsHeld?: number;
  /** Bits that the moves consume at most, from the plan. */
  readonly consumes?: number;
  /** How much of its work the path has done. */
  readonly work: () => Share;
  /**
   * Positions in order, up to number `steps`; undefined: no position yet, but a moment to
   * breathe. Between two of these are some ten milliseconds of work (for a tree up to a
   * second: one number's digits, one of its largest products).
   * @param from where the first block ends later: blocks are cut alike whatever it is, and
   * those that end before it are left out
   */
  blocks(from: number): Generator<PositionBlock | undefined, void>;
}

/** Positions of one block at most, and bytes that their words may take. */
const ROWS = 8192;
const BYTES = 2 ** 22;
/** Multiplications of one block, about. */
const WORK = 2e7;

/** Lays a walk out in a kernel of its own. @throws LimitError before anything is run that would not fit */
export async function openPath(walk: Walk, options: PathOptions): Promise<Path> {
  return layOut(walk, options, await loadKernel({ memoryLimit: options.memoryLimit }));
}

/** Lays a walk out in a kernel that stays as it is until the path's last block. @throws LimitError as `openPath` */
export function layOut(walk: Walk, options: PathOptions, kernel: Kernel): Path {
  const rational = rationalWalk(walk);
  const path =
    rational === undefined
      ? realPath(walk, options, kernel)
      : (residuePath(walk, options, kernel, rational) ?? fractionPath(walk, options, kernel, rational));
  let reached = 0;
  return {
    ...path,
    work: path.work ?? (() => ({ done: reached, total: options.steps + 1 })),
    *blocks(from) {
      for (const block of path.blocks(from)) {
        if (block !== undefined) reached = block.first + block.rows;
        yield block !== undefined && reached > from ? block : undefined;
      }
    },
  };
}

/** A path whose work is known by its positions, or better. */
type BarePath = Omit<Path, "work"> & Partial<Pick<Path, "work">>;

/** The draws of the replicate. */
function drawAll(walk: Walk, kernel: Kernel, { seed, replicate = 0, steps }: PathOptions): Uint16Array {
  const weights = cumulativeWeights(walk.moves.map((m) => m.probability));
  return drawMoves(kernel, weights, seed, replicate, 0, steps);
}

/**
 * Bits that a walk consumes from which the tree is quicker than the window, measured by
 * bench/thresholds.ts: some 30 thousand in dimension 2.
 */
const TREE_BITS = 40_000;
/** Moves by which a walk's bits are foretold. */
const SAMPLE = 8192;

/** From an irrational or a uniform point. */
function realPath(walk: Walk, options: PathOptions, kernel: Kernel): BarePath {
  const { table, constants } = windowTable(walk);
  const choices = options.choices ?? drawAll(walk, kernel, options);
  const sample = Math.min(SAMPLE, choices.length);
  const bits = kernel.scoped(() => {
    const run = new WindowRun(kernel, table, sample, 1, 1);
    run.choices.set(choices.subarray(0, sample));
    run.plan();
    return (run.consumes / Math.max(1, sample)) * choices.length;
  });
  const build = bits < (options.treeBits ?? TREE_BITS) ? windowPath : treePath;
  return build(walk, options, kernel, table, constants, choices);
}

/** The start's components: a point's coordinates, or nothing for a uniform one. */
function startPoint(walk: Walk): readonly (ExactNumber | undefined)[] {
  return walk.start.type === "point" ? walk.start.point : new Array<undefined>(walk.dimension).fill(undefined);
}

/**
 * Seconds that a bit of a number's digits takes, as src/kernel/tree-work.ts counts them:
 * measured at ten million bits of square roots, of cubic numbers and pi, of fractions.
 */
function secondsPerBit(x: ExactNumber | undefined): number {
  if (x === undefined || x.rational !== undefined) return 2e-9;
  return x.polynomial?.length === 3 ? 8e-8 : 4e-7;
}

function treePath(
  walk: Walk,
  { seed, replicate = 0, steps, digits }: PathOptions,
  kernel: Kernel,
  table: WindowTable,
  constants: readonly ExactNumber[],
  choices: Uint16Array,
): BarePath {
  const words = wordsFor(digits);
  const d = walk.dimension;
  const run = new TreeRun(kernel, table, choices, words);
  const numbers = [...startPoint(walk), ...constants];
  const bits = 64 * run.limbs;
  const digitsCost = (x: ExactNumber | undefined) => bits * secondsPerBit(x);
  const digitsTotal = numbers.reduce((sum, x) => sum + digitsCost(x), 0);
  let digitsDone = 0;
  return {
    method: "divide and conquer over the moves, bits from the products of the moves drawn",
    exact: false,
    choices,
    bitsHeld: bits,
    consumes: run.consumes,
    work: () => ({ done: digitsDone + run.progress.done, total: digitsTotal + run.progress.total }),
    *blocks(from) {
      const start: bigint[] = [];
      for (const [j, x] of numbers.entries()) {
        yield undefined;
        start.push(
          x === undefined
            ? uniformFloor(kernel, seed, replicate, j, run.limbs)
            : BigInt.asUintN(bits, binaryFloor(x, bits)),
        );
        digitsDone += digitsCost(x);
      }
      for (const { first, rows, positions } of run.walk(start, from)) {
        yield rows === 0 ? undefined : new WordBlock(first, Math.min(rows, steps + 1 - first), d, words, positions);
      }
    },
  };
}

function windowPath(
  walk: Walk,
  options: PathOptions,
  kernel: Kernel,
  table: WindowTable,
  constants: readonly ExactNumber[],
  choices: Uint16Array,
): BarePath {
  const { seed, replicate = 0, steps, digits } = options;
  const words = wordsFor(digits);
  const d = walk.dimension;
  const run = new WindowRun(kernel, table, steps, words, Math.min(ROWS, Math.floor(BYTES / (8 * d * words))));
  run.choices.set(choices);
  const limbs = run.plan();
  run.reserve(limbs);
  run.hold(startDigits([...startPoint(walk), ...constants], limbs));
  if (walk.start.type === "uniform") run.startUniform(limbs, seed, replicate);
  else run.start(limbs);
  return {
    method: "fixed-point window, bits from the products of the moves drawn",
    exact: false,
    choices,
    bitsHeld: 32 * limbs,
    consumes: run.consumes,
    *blocks() {
      for (let first = 0; first < steps; ) {
        // A batch is some 16 moves of small entries: one pass over the limbs.
        const most = Math.floor((16 * WORK) / (run.limbs * table.inputs * d));
        const rows = run.advance(most);
        yield new WordBlock(first, rows, d, words, run.positions(rows));
        first += rows;
      }
      run.emit(0);
      yield new WordBlock(steps, 1, d, words, run.positions(1));
    },
  };
}

function residuePath(walk: Walk, options: PathOptions, kernel: Kernel, rational: RationalWalk): BarePath | undefined {
  const table = residueTable(walk, rational);
  if (table === undefined) return undefined;
  const d = walk.dimension;
  const { steps } = options;
  const choices = options.choices ?? drawAll(walk, kernel, options);
  const run = new ResidueRun(kernel, table, Math.min(steps, ROWS));
  return {
    method: `exact fractions of denominator ${rational.denominator}, in machine words`,
    exact: true,
    choices,
    *blocks() {
      for (let first = 0; first < steps; first += ROWS) {
        const rows = Math.min(ROWS, steps - first);
        run.choices.set(choices.subarray(first, first + rows));
        run.run(rows, false);
        yield new FractionBlock(first, rows, d, run.numerators(rows), rational.denominator, () => run.positions(rows));
      }
      run.run(0, false);
      yield new FractionBlock(steps, 1, d, run.numerators(1), rational.denominator, () => run.positions(1));
    },
  };
}

/** Numerators beyond machine words. */
function fractionPath(walk: Walk, options: PathOptions, kernel: Kernel, rational: RationalWalk): BarePath {
  const { denominator: q, start, translations } = rational;
  const d = walk.dimension;
  const { steps } = options;
  const choices = options.choices ?? drawAll(walk, kernel, options);
  const rowsOfBlock = 1024;
  return {
    method: `exact fractions of a denominator of ${q.toString(2).length} bits, in big integers`,
    exact: true,
    choices,
    *blocks() {
      let x = [...start];
      for (let first = 0; first <= steps; first += rowsOfBlock) {
        const rows = Math.min(rowsOfBlock, steps + 1 - first);
        const numerators: bigint[] = [];
        for (let k = first; k < first + rows; k++) {
          numerators.push(...x);
          if (k === steps) break;
          const move = choices[k] as number;
          const shift = translations[move] as readonly bigint[];
          x = (walk.moves[move] as Walk["moves"][number]).matrix.map((row, i) => {
            const y = row.reduce((s, a, j) => s + a * (x[j] as bigint), shift[i] as bigint) % q;
            return y < 0n ? y + q : y;
          });
        }
        yield new FractionBlock(first, rows, d, numerators, q);
      }
    },
  };
}
