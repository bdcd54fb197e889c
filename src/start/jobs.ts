/** The job of `start`: exact walks of the start and of a rational point near it, under the same moves. */
import { exactRational } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { defineJob } from "../kernel/jobs.js";
import { prepareWalker } from "../trajectory/walker.js";
import { parseWalk } from "../walk/parse.js";

export interface ExitPayload {
  readonly document: unknown;
  readonly seed: bigint;
  readonly memoryLimit: number;
  readonly denominator: number;
  readonly numerators: readonly number[];
  /** Distance on the torus beyond which the walk has left the orbit. */
  readonly room: number;
  /** Moves of each replicate at most. */
  readonly steps: number;
  /** Replicates first, ..., first + count - 1. */
  readonly first: number;
  readonly count: number;
}

/**
 * For each replicate the first move after which the two walks are further apart than
 * `room`; steps + 1 where that did not happen. Positions are exact to 2^-64.
 */
export async function exitMoves(payload: ExitPayload): Promise<Float64Array<ArrayBuffer>> {
  const { seed, steps, first, count, memoryLimit, denominator, numerators, room } = payload;
  const walk = parseWalk(payload.document as object);
  const point = numerators.map((p) => exactRational(Rational.of(p, denominator)));
  const real = await prepareWalker(walk, { seed, steps, memoryLimit });
  const trap = await prepareWalker({ ...walk, start: { type: "point", point } }, { seed, steps, memoryLimit });
  const d = walk.dimension;
  const limit = (room * 2 ** 64) ** 2;
  const exits = new Float64Array(count);
  for (let r = 0; r < count; r++) {
    // The same seed and replicate draw the same moves.
    const a = real.run(first + r).positions;
    const b = trap.run(first + r).positions;
    let k = 0;
    for (; k <= steps; k++) {
      let sum = 0;
      for (let j = 0; j < d; j++) {
        // Modulo 1: the difference that is nearest to 0.
        const off = Number(BigInt.asIntN(64, a[k * d + j] - b[k * d + j]));
        sum += off * off;
      }
      if (sum > limit) break;
    }
    exits[r] = k;
  }
  return exits;
}

export const exitsJob = defineJob("start.exits", exitMoves);
