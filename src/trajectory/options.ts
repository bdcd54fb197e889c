/** The options of `trajectory`, checked. */
import { type Fault, OptionsError } from "../errors.js";
import type { CommonOptions } from "../session.js";
import type { Walk } from "../walk/walk.js";
import type { PositionBlock } from "./block.js";
import { checkChoices } from "./choices.js";
import type { TrajectoryResult } from "./result.js";

/** What a sink is told before the first block. */
export interface PositionShape {
  /** Positions in all: steps + 1. */
  readonly rows: number;
  readonly dimension: number;
  /** Decimals that are proved. */
  readonly digits: number;
  /** All that decides the positions, in words: version, walk, seed, steps, ... */
  readonly identity: Readonly<Record<string, string>>;
}

/** How far a walk has come: rows that are written, and the positions to be reported among them. */
export interface SavedWalk {
  readonly rows: number;
  readonly positions: TrajectoryResult["positions"];
}

/** A consumer of all positions in order, such as a file: see src/output/. */
export interface PositionSink {
  /** What the result calls it. */
  readonly file: string;
  /** What an earlier run has written: the walk goes on after it. `rows` is the end of a block. */
  readonly saved?: SavedWalk;
  write(block: PositionBlock): Promise<void>;
  /** Called between blocks, often: the moment to remember how far the walk has come. */
  save?(walk: () => SavedWalk): Promise<void>;
  /** All positions have been written. */
  finish(): Promise<void>;
  /** The caller stopped the walk: keep what is written. @returns how to go on, in words */
  suspend?(walk: () => SavedWalk): Promise<string>;
  /** The walk failed, or was stopped where `suspend` is not offered: let go of what is held. */
  discard(): Promise<void>;
}

export interface TrajectoryOptions extends CommonOptions {
  /** Moves, a whole number from 0; may be absent where `choices` says them. */
  readonly steps?: number;
  /** Move indices in place of random draws; the first `steps` are made. */
  readonly choices?: ArrayLike<number>;
  /** Steps whose positions are reported; default: all up to 100 steps, else 0, 1, 2, 5, 10, 20, 50, ... and the last. */
  readonly at?: readonly number[];
  /** Decimals of each coordinate, 1 to 10000; default 15. */
  readonly digits?: number;
  /** Opens a consumer of all positions, once the options are found right and the memory suffices. */
  readonly out?: (shape: PositionShape) => Promise<PositionSink>;
}

export interface TrajectoryRequest {
  readonly steps: number;
  readonly choices?: Uint16Array;
  readonly at: readonly number[];
  readonly digits: number;
}

const MOST_STEPS = 2 ** 32 - 1;
const MOST_DIGITS = 10_000;
/** Up to so many steps, all are reported. */
const ALL = 100;

/** 0, 1, 2, 5, 10, 20, 50, ... below `steps`, and `steps`; all where they are few. */
export function defaultSteps(steps: number): number[] {
  if (steps <= ALL) return Array.from({ length: steps + 1 }, (_, k) => k);
  const out = [0];
  for (let ten = 1; ten < steps; ten *= 10) for (const k of [ten, 2 * ten, 5 * ten]) if (k < steps) out.push(k);
  return [...out, steps];
}

function whole(x: unknown, most: number): x is number {
  return Number.isSafeInteger(x) && (x as number) >= 0 && (x as number) <= most;
}

/** @throws OptionsError with every fault */
export function readOptions(walk: Walk, options: TrajectoryOptions): TrajectoryRequest {
  const faults: Fault[] = [];
  const { digits = 15 } = options;
  let choices: Uint16Array | undefined;
  try {
    if (options.choices !== undefined) choices = checkChoices(options.choices, walk.moves.length);
  } catch (error) {
    if (!(error instanceof OptionsError)) throw error;
    faults.push(...error.faults);
  }
  const given = options.steps ?? options.choices?.length;
  const steps = whole(given, MOST_STEPS) ? given : 0;
  if (!whole(given, MOST_STEPS)) {
    const message = `found ${given ?? "nothing"}; accepted: a whole number from 0 to ${MOST_STEPS}`;
    faults.push({ pointer: "--steps", message });
  } else if (options.choices !== undefined && options.choices.length < steps) {
    const message = `found ${options.choices.length} moves; accepted: at least ${steps}, as many as the steps`;
    faults.push({ pointer: "--choices", message });
  }
  if (!whole(digits, MOST_DIGITS) || digits === 0) {
    faults.push({ pointer: "--digits", message: `found ${digits}; accepted: a whole number from 1 to ${MOST_DIGITS}` });
  }
  for (const k of options.at ?? []) {
    if (!whole(k, steps)) {
      faults.push({ pointer: "--at", message: `found ${k}; accepted: whole numbers from 0 to ${steps}, the steps` });
    }
  }
  if (faults.length > 0) throw new OptionsError(faults);
  const at = options.at === undefined ? defaultSteps(steps) : [...new Set(options.at)].sort((a, b) => a - b);
  return { steps, at, digits, ...(choices === undefined ? {} : { choices: choices.subarray(0, steps) }) };
}
