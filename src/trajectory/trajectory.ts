/** Where exactly is the walk? Positions of one walk, every digit proved. */
import { type Session, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import { consumedBits } from "./consumed.js";
import { type PositionSink, readOptions, type TrajectoryOptions } from "./options.js";
import { openPath, type Path } from "./paths.js";
import type { TrajectoryResult } from "./result.js";
import { refuseDensity } from "./walker.js";

/** Milliseconds of work between two breaths, in which a stop is noticed and progress shown. */
const BREATH = 50;

function breathe(): Promise<void> {
  return new Promise((resolve) => setTimeout(resolve, 0));
}

type Position = TrajectoryResult["positions"][number];

/** Runs the walk, hands every block to the sink and keeps the positions asked for. */
async function collect(
  path: Path,
  steps: number,
  at: readonly number[],
  digits: number,
  session: Session,
  sink: PositionSink | undefined,
): Promise<Position[]> {
  const positions: Position[] = [];
  let next = 0;
  let breath = performance.now();
  for (const block of path.blocks()) {
    for (; next < at.length && (at[next] as number) < block.first + block.rows; next++) {
      const step = at[next] as number;
      const row = step - block.first;
      const point = block.decimals(row, digits);
      positions.push({ step, point, ...(block.fractions ? { fractions: block.fractions(row) } : {}) });
    }
    if (sink !== undefined) await sink.write(block);
    else if (next === at.length) break;
    if (performance.now() - breath > BREATH) {
      session.progress("walking", block.first + block.rows, steps + 1);
      await breathe();
      session.checkStop();
      breath = performance.now();
    }
  }
  session.progress("walking", steps + 1, steps + 1);
  return positions;
}

/**
 * Positions of a walk of `steps` moves, each coordinate rounded to the nearest decimal of
 * `digits` places and within 10^-digits of the truth on the circle (what rounds to 1 is
 * written as 0). From an irrational or uniform start the digits are proved: the start is
 * held with the bits that the product of the moves drawn is computed to need. From a
 * rational start, with rational translations, positions are exact fractions too.
 *
 * Moves are the draws of (seed, replicate 0), or `choices`. Time grows with the square of
 * the number of moves (some seconds for a million small moves); a rational walk's with the number.
 *
 * @throws WalkError for a faulty walk, OptionsError for wrong options and for a density start
 * @throws LimitError where the memory would not suffice (before anything is run), or a row of a matrix passes 2^62
 */
export async function trajectory(
  input: WalkInput,
  options: TrajectoryOptions & SharedSession = {},
): Promise<TrajectoryResult> {
  return withSession(options, async (session) => {
    const walk = asWalk(input);
    refuseDensity(walk);
    const request = readOptions(walk, options);
    const { steps, at, digits } = request;
    const path = await openPath(walk, { ...request, seed: session.seed, memoryLimit: session.memoryLimit });
    session.checkStop();
    const consumed = consumedBits(walk, path.choices, path.consumes);
    const sink = await options.out?.({ rows: steps + 1, dimension: walk.dimension, digits });
    let positions: Position[];
    try {
      positions = await collect(path, steps, at, digits, session, sink);
      await sink?.finish();
    } catch (error) {
      await sink?.discard();
      throw error;
    }
    return {
      torwend: VERSION,
      walk: walk.title,
      positions,
      bitsConsumed: consumed.bits,
      bitsConsumedKind: consumed.kind,
      ...(path.bitsHeld === undefined ? {} : { bitsHeld: path.bitsHeld }),
      standing: path.exact ? "exact" : "enclosed",
      digits,
      method: path.method,
      ...(sink === undefined ? {} : { written: { file: sink.file, rows: steps + 1 } }),
    };
  });
}
