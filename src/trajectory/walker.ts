/**
 * Exact walks for ensembles: one preparation, then cheap replicates. For jobs of other
 * questions; no validation beyond what the walk already had.
 */
import { LimitError, OptionsError } from "../errors.js";
import type { ExactNumber } from "../exact/number.js";
import { cumulativeWeights, type PlacedWeights, placeWeights } from "../kernel/draws.js";
import { type Kernel, type KernelTarget, loadKernel } from "../kernel/kernel.js";
import { ResidueRun } from "../kernel/residue.js";
import { WindowRun } from "../kernel/trajectory.js";
import type { Walk } from "../walk/walk.js";
import { toDoubles } from "./block.js";
import { startDigits } from "./digits.js";
import { type RationalWalk, rationalWalk, residueTable, windowTable } from "./table.js";

export interface WalkerOptions {
  readonly seed: bigint;
  /** Moves of every replicate. */
  readonly steps: number;
  /** Bits right in each coordinate of each position; rounded up to whole 64-bit words. Default 64. */
  readonly bits?: number;
  /** Bytes of kernel memory; default 1 GiB. */
  readonly memoryLimit?: number;
  /** Which build of the kernel; for tests. */
  readonly target?: KernelTarget;
}

/** One replicate. The arrays are views that the next run overwrites: copy what must stay. */
export interface ExactPath {
  /** Rows of positions: steps + 1. */
  readonly rows: number;
  /**
   * (steps + 1) x dimension (x words, the most significant first, where more than 64 bits
   * were asked for), row-major: position k, coordinate j as floor(x 2^64) up to one unit,
   * on the circle. Exact floors from a rational start.
   */
  readonly positions: BigUint64Array;
  /** The moves made: entry k leads from position k to position k + 1. */
  readonly choices: Uint16Array;
  /** From a rational start (with rational translations): numerators over `denominator`, exact. */
  readonly numerators?: BigInt64Array;
  readonly denominator?: bigint;
  /**
   * The positions' first 53 bits as doubles in [0, 1), row-major, rounded down; one array,
   * overwritten by the next call.
   */
  toDoubles(): Float64Array;
}

export interface ExactWalker {
  readonly dimension: number;
  readonly steps: number;
  /** `residue`: exact fractions. `window`: enclosed, every bit asked for proved. */
  readonly method: "residue" | "window";
  /**
   * Walks a replicate (unsigned 32-bit): its moves are the draws of (seed, replicate),
   * or `choices` (steps move indices). A uniform start is the replicate's own point.
   * @throws LimitError where the digits of the start would pass the memory limit
   */
  run(replicate: number, choices?: Uint16Array): ExactPath;
}

/** Refuses starts that no point can be drawn from. */
export function refuseDensity(walk: Walk): void {
  if (walk.start.type !== "density") return;
  throw new OptionsError([
    {
      pointer: "/start",
      message:
        "found a density, from which no point can be drawn (it need not be positive); accepted here: a point or uniform",
    },
  ]);
}

/** @throws OptionsError for a density start; LimitError for memory or matrices beyond the kernel's limits */
export async function prepareWalker(walk: Walk, options: WalkerOptions): Promise<ExactWalker> {
  refuseDensity(walk);
  const { steps, bits = 64, memoryLimit, target } = options;
  const kernel = await loadKernel({
    ...(memoryLimit === undefined ? {} : { memoryLimit }),
    ...(target === undefined ? {} : { target }),
  });
  const weights = placeWeights(kernel, cumulativeWeights(walk.moves.map((m) => m.probability)));
  const words = Math.max(1, Math.ceil(bits / 64));
  const rational = words === 1 ? rationalWalk(walk) : undefined;
  const residue = rational === undefined ? undefined : residueTable(walk, rational);
  if (rational !== undefined && residue !== undefined) {
    return residueWalker(walk, options, new ResidueRun(kernel, residue, steps), weights, rational);
  }
  return windowWalker(walk, options, kernel, weights, words);
}

function residueWalker(
  walk: Walk,
  { seed, steps }: WalkerOptions,
  run: ResidueRun,
  weights: PlacedWeights,
  { denominator }: RationalWalk,
): ExactWalker {
  const rows = steps + 1;
  const held = new Float64Array(rows * walk.dimension);
  return {
    dimension: walk.dimension,
    steps,
    method: "residue",
    run(replicate, choices) {
      if (choices === undefined) run.draw(weights, seed, replicate);
      else run.choices.set(choices);
      run.reset();
      run.run();
      const positions = run.positions(rows);
      return {
        rows,
        positions,
        choices: run.choices,
        numerators: run.numerators(rows),
        denominator,
        toDoubles: () => toDoubles(positions, 1, held),
      };
    },
  };
}

/** Digits are evaluated for a run's need and this share more, so that few replicates ask again. */
const AHEAD = 1 / 16;

function windowWalker(
  walk: Walk,
  { seed, steps }: WalkerOptions,
  kernel: Kernel,
  weights: PlacedWeights,
  words: number,
): ExactWalker {
  const { table, constants } = windowTable(walk);
  const run = new WindowRun(kernel, table, steps, words);
  const point: readonly (ExactNumber | undefined)[] =
    walk.start.type === "point" ? walk.start.point : new Array(walk.dimension).fill(undefined);
  const numbers = [...point, ...constants];
  const rows = steps + 1;
  const held = new Float64Array(rows * walk.dimension);
  return {
    dimension: walk.dimension,
    steps,
    method: "window",
    run(replicate, choices) {
      if (choices === undefined) run.draw(weights, seed, replicate);
      else run.choices.set(choices);
      const limbs = run.plan();
      if (!run.holds(limbs)) run.hold(startDigits(numbers, Math.ceil(limbs * (1 + AHEAD))));
      if (walk.start.type === "uniform") run.startUniform(limbs, seed, replicate);
      else run.start(limbs);
      const made = run.advance();
      if (made !== steps) throw new LimitError(`a run of ${steps} moves ended after ${made}`);
      run.emit(steps);
      const positions = run.positions(rows);
      return { rows, positions, choices: run.choices, toDoubles: () => toDoubles(positions, words, held) };
    },
  };
}
