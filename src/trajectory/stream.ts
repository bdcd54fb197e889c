/** Positions of one walk in order, as blocks, to be consumed as they come. */
import { OptionsError } from "../errors.js";
import { type CommonOptions, openSession, type Session } from "../session.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { PositionBlock } from "./block.js";
import { readOptions } from "./options.js";
import { Pace } from "./pace.js";
import { openPath, type Path } from "./paths.js";
import { refuseDensity } from "./walker.js";

/** Milliseconds of work between two breaths, in which a stop is noticed and progress shown. */
const BREATH = 50;

function breathe(): Promise<void> {
  return new Promise((resolve) => setTimeout(resolve, 0));
}

/** The progress of a walk is told in thousandths of the time that it is expected to take. */
const WHOLE = 1000;

/**
 * The blocks of a path that end after position `from`, with breaths.
 * @param reader whether whoever takes the blocks does more with them than look
 * @throws StoppedError between blocks, and while a long walk multiplies its moves out
 */
export async function* stream(
  path: Path,
  from: number,
  steps: number,
  session: Session,
  reader = true,
): AsyncGenerator<PositionBlock, void> {
  const pace = new Pace();
  const rows = { done: 0, total: steps + 1 - from };
  let breath = performance.now();
  let told = 0;
  for (const block of path.blocks(from)) {
    pace.walked();
    session.checkStop();
    if (block !== undefined) {
      yield block;
      pace.read();
      rows.done = Math.max(0, block.first + block.rows - from);
    }
    if (performance.now() - breath > BREATH) {
      const work = path.work();
      const left = pace.secondsLeft(work, reader ? rows : undefined);
      if (left === undefined) {
        // How fast the reader is has yet to be seen.
        session.progress("preparing the walk", Math.floor((WHOLE * work.done) / work.total), WHOLE, null);
      } else {
        told = Math.max(told, Math.floor((WHOLE * pace.seconds) / (pace.seconds + left)));
        session.progress("walking", told, WHOLE, left);
      }
      await breathe();
      pace.walked();
      breath = performance.now();
    }
  }
  session.progress("walking", WHOLE, WHOLE, 0);
}

export interface PositionsOptions extends CommonOptions {
  /** Moves, a whole number from 0; may be absent where `choices` says them. */
  readonly steps?: number;
  /** Move indices in place of random draws. */
  readonly choices?: ArrayLike<number>;
  /** Decimals that `decimals` will be asked for, 1 to 10000; default 15. */
  readonly digits?: number;
  /** The first position wanted, default 0. Blocks are cut alike whatever it is: the first one may begin before it. */
  readonly from?: number;
}

/**
 * All positions of a walk of `steps` moves, in order: an async iterable of blocks of some
 * hundreds to thousands of positions, each with `first` (the number of its first position),
 * `rows`, `doubles()` (rows x dimension, row-major, the first 53 bits after the binary
 * point), `decimals(row, digits)` and, for rational walks, `fractions(row)`. A block is valid
 * until the next is asked for. The positions are those of `trajectory` with the same options.
 * To go on after a stop, remember `first + rows` of the last block and ask `from` there.
 *
 * @throws WalkError, OptionsError, LimitError as `trajectory` does; StoppedError between blocks
 */
export async function* positions(
  input: WalkInput,
  options: PositionsOptions = {},
): AsyncGenerator<PositionBlock, void> {
  const session = openSession(options);
  try {
    const walk = asWalk(input);
    refuseDensity(walk);
    const { from = 0, ...rest } = options;
    const request = readOptions(walk, rest);
    if (!Number.isSafeInteger(from) || from < 0 || from > request.steps) {
      const message = `found ${from}; accepted: a whole number from 0 to ${request.steps}, the steps`;
      throw new OptionsError([{ pointer: "from", message }]);
    }
    const path = await openPath(walk, { ...request, seed: session.seed, memoryLimit: session.memoryLimit });
    yield* stream(path, from, request.steps, session);
  } finally {
    session.pool.close();
  }
}
