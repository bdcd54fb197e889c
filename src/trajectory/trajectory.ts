/** Where exactly is the walk? Positions of one walk, every digit proved. */
import { StoppedError } from "../errors.js";
import { type Session, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { fnv1a64, walkHash } from "../walk/hash.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { consumedBits } from "./consumed.js";
import { type PositionSink, readOptions, type TrajectoryOptions, type TrajectoryRequest } from "./options.js";
import { openPath, type Path } from "./paths.js";
import type { TrajectoryResult } from "./result.js";
import { stream } from "./stream.js";
import { refuseDensity } from "./walker.js";

type Position = TrajectoryResult["positions"][number];

/** Runs the walk, hands every block to the sink and keeps the positions asked for. */
async function collect(
  path: Path,
  { steps, at, digits }: TrajectoryRequest,
  session: Session,
  sink: PositionSink | undefined,
): Promise<Position[]> {
  const positions: Position[] = [...(sink?.saved?.positions ?? [])];
  let rows = sink?.saved?.rows ?? 0;
  let next = at.findIndex((step) => step >= rows);
  if (next < 0) next = at.length;
  const state = () => ({ rows, positions: [...positions] });
  try {
    for await (const block of stream(path, rows, steps, session, sink !== undefined)) {
      if (block.first !== rows) throw new Error(`the walk went on at move ${block.first}, not ${rows}`);
      for (; next < at.length && (at[next] as number) < block.first + block.rows; next++) {
        const step = at[next] as number;
        const row = step - block.first;
        const point = block.decimals(row, digits);
        positions.push({ step, point, ...(block.fractions ? { fractions: block.fractions(row) } : {}) });
      }
      if (sink === undefined && next === at.length && block.first + block.rows <= steps) break;
      await sink?.write(block);
      rows = block.first + block.rows;
      await sink?.save?.(state);
    }
  } catch (error) {
    if (!(error instanceof StoppedError) || sink?.suspend === undefined || rows === 0) throw error;
    const how = await sink.suspend(state);
    throw new StoppedError(`stopped after move ${rows - 1} of ${steps}, with what is written kept: ${how}`);
  }
  return positions;
}

/** All that decides the bytes of a file of positions. */
function identity(walk: Walk, session: Session, request: TrajectoryRequest): Record<string, string> {
  const { steps, at, digits, choices } = request;
  return {
    "version of torwend": VERSION,
    walk: walkHash(walk),
    seed: String(session.seed),
    "number of steps": String(steps),
    "number of digits": String(digits),
    "list of reported steps": fnv1a64(at.join()),
    ...(choices === undefined ? {} : { "list of choices": fnv1a64(choices.join()) }),
  };
}

/**
 * Positions of a walk of `steps` moves, each coordinate rounded to the nearest decimal of
 * `digits` places and within 10^-digits of the truth on the circle (what rounds to 1 is
 * written as 0). From an irrational or uniform start the digits are proved: the start is
 * held with the bits that the product of the moves drawn is computed to need. From a
 * rational start, with rational translations, positions are exact fractions too.
 *
 * Moves are the draws of (seed, replicate 0), or `choices`. Time grows little faster than the
 * number of moves (some seconds for ten million small moves in dimension 2), memory with it.
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
    const { steps, digits } = request;
    const path = await openPath(walk, { ...request, seed: session.seed, memoryLimit: session.memoryLimit });
    session.checkStop();
    const consumed = consumedBits(walk, path.choices, path.consumes);
    const sink = await options.out?.({
      rows: steps + 1,
      dimension: walk.dimension,
      digits,
      identity: identity(walk, session, request),
    });
    let positions: Position[];
    try {
      positions = await collect(path, request, session, sink);
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
