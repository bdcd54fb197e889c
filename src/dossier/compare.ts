/** The exact trajectory of the dossier, with the same moves in double precision beside it. */
import { cumulativeWeights, drawMoves } from "../kernel/draws.js";
import { loadKernel } from "../kernel/kernel.js";
import { SESSION, type Session } from "../session.js";
import { trajectory } from "../trajectory/trajectory.js";
import type { Walk } from "../walk/walk.js";
import { doubleWalk, torusDistance } from "./double.js";
import { TRAJECTORY } from "./plan.js";
import type { DossierTrajectory } from "./result.js";

/**
 * Replicate 0's moves, exact and in doubles.
 * @throws OptionsError where no point can be drawn from the start (a density)
 */
export async function compareWithDoubles(walk: Walk, session: Session): Promise<DossierTrajectory> {
  const { moves, compared, after, digits, apart } = TRAJECTORY;
  const kernel = await loadKernel({ memoryLimit: session.memoryLimit });
  const weights = cumulativeWeights(walk.moves.map((m) => m.probability));
  const choices = drawMoves(kernel, weights, session.seed, 0, 0, moves);
  const exact = await trajectory(walk, {
    [SESSION]: session,
    steps: moves,
    choices,
    at: Array.from({ length: moves + 1 }, (_, step) => step),
    digits,
  });
  const start = (exact.positions[0]?.point ?? []).map(Number);
  const doubles = doubleWalk(walk, start, choices);
  const distances = doubles.map((point, n) => torusDistance(exact.positions[n]?.point ?? [], point));
  const partedAt = distances.findIndex((d) => d > apart);
  const kept = 1 + Math.min(moves, partedAt < 0 ? compared : partedAt + after);
  return {
    moves,
    positions: exact.positions.map(({ step, point }) => ({ step, point })),
    digits: exact.digits,
    standing: exact.standing,
    bitsConsumed: exact.bitsConsumed,
    method: exact.method,
    doubles: doubles.slice(0, kept),
    distances: distances.slice(0, kept),
    ...(partedAt < 0 ? {} : { partedAt }),
    apart,
  };
}
