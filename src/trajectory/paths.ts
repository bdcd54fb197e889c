/**
 * One walk as a stream of blocks: the window kernel for irrational points, the residue
 * kernel or BigInt for rational ones.
 */
import { cumulativeWeights, drawMoves } from "../kernel/draws.js";
import { type Kernel, loadKernel } from "../kernel/kernel.js";
import { ResidueRun } from "../kernel/residue.js";
import { WindowRun } from "../kernel/trajectory.js";
import type { Walk } from "../walk/walk.js";
import { FractionBlock, type PositionBlock, WordBlock, wordsFor } from "./block.js";
import { startDigits } from "./digits.js";
import { type RationalWalk, rationalWalk, residueTable, windowTable } from "./table.js";

export interface PathOptions {
  readonly seed: bigint;
  readonly steps: number;
  /** In place of draws: `steps` move indices. */
  readonly choices?: Uint16Array;
  /** Decimal digits that positions will be asked for. */
  readonly digits: number;
  readonly memoryLimit: number;
}

export interface Path {
  readonly method: string;
  readonly exact: boolean;
  readonly choices: Uint16Array;
  /** Bits with which the start is held. */
  readonly bitsHeld?: number;
  /** Bits that the moves consume at most, from the plan. */
  readonly consumes?: number;
  /** Positions 0, ..., steps in order. A pause is safe between blocks: each is some ten milliseconds of work. */
  blocks(): Generator<PositionBlock, void>;
}

/** Positions of one block at most, and bytes that their words may take. */
const ROWS = 8192;
const BYTES = 2 ** 22;
/** Multiplications of one block, about. */
const WORK = 2e7;

/** Lays a walk out in a kernel of its own. @throws LimitError before anything is run that would not fit */
export async function openPath(walk: Walk, options: PathOptions): Promise<Path> {
  const kernel = await loadKernel({ memoryLimit: options.memoryLimit });
  const rational = rationalWalk(walk);
  if (rational === undefined) return windowPath(walk, options, kernel);
  return residuePath(walk, options, kernel, rational) ?? fractionPath(walk, options, kernel, rational);
}

/** The draws of replicate 0. */
function drawAll(walk: Walk, kernel: Kernel, { seed, steps }: PathOptions): Uint16Array {
  const weights = cumulativeWeights(walk.moves.map((m) => m.probability));
  return drawMoves(kernel, weights, seed, 0, 0, steps);
}

function windowPath(walk: Walk, options: PathOptions, kernel: Kernel): Path {
  const { seed, steps, digits } = options;
  const { table, constants } = windowTable(walk);
  const words = wordsFor(digits);
  const d = walk.dimension;
  const choices = options.choices ?? drawAll(walk, kernel, options);
  const run = new WindowRun(kernel, table, steps, words, Math.min(ROWS, Math.floor(BYTES / (8 * d * words))));
  run.choices.set(choices);
  const limbs = run.plan();
  const point = walk.start.type === "point" ? walk.start.point : new Array<undefined>(d).fill(undefined);
  run.reserve(limbs);
  run.hold(startDigits([...point, ...constants], limbs));
  if (walk.start.type === "uniform") run.startUniform(limbs, seed, 0);
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

function residuePath(walk: Walk, options: PathOptions, kernel: Kernel, rational: RationalWalk): Path | undefined {
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
        yield new FractionBlock(first, rows, d, run.numerators(rows), rational.denominator);
      }
      run.run(0, false);
      yield new FractionBlock(steps, 1, d, run.numerators(1), rational.denominator);
    },
  };
}

/** Numerators beyond machine words. */
function fractionPath(walk: Walk, options: PathOptions, kernel: Kernel, rational: RationalWalk): Path {
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
