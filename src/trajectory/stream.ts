/** Positions of one walk in order, as blocks, to be consumed as they come. */
import { OptionsError } from "../errors.js";
import { type CommonOptions, openSession, type Session } from "../session.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { PositionBlock } from "./block.js";
import { readOptions } from "./options.js";
import { openPath, type Path } from "./paths.js";
import { refuseDensity } from "./walker.js";

/** Milliseconds of work between two breaths, in which a stop is noticed and progress shown. */
const BREATH = 50;

function breathe(): Promise<void> {
  return new Promise((resolve) => setTimeout(resolve, 0));
}

/** The blocks of a path that end after position `from`, with breaths. @throws StoppedError between blocks */
export async function* stream(
  path: Path,
  from: number,
  steps: number,
  session: Session,
): AsyncGenerator<PositionBlock, void> {
  let breath = performance.now();
  for (const block of path.blocks(from)) {
    session.checkStop();
    yield block;
    if (performance.now() - breath > BREATH) {
      session.progress("walking", block.first + block.rows, steps + 1);
      await breathe();
      breath = performance.now();
    }
  }
  session.progress("walking", steps + 1, steps + 1);
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
