/** Replicates of exact walks, reduced to sums of the observables over segments of each path. */
import { type KernelTarget, loadKernel } from "../kernel/kernel.js";
import { Observer } from "../kernel/observe.js";
import { layOut } from "../trajectory/paths.js";
import { prepareWalker } from "../trajectory/walker.js";
import type { Walk } from "../walk/walk.js";
import { observeProgram } from "./program.js";

export interface SegmentsRequest {
  readonly seed: bigint;
  /** Moves of each replicate; its time average is that of the positions 0, ..., steps - 1. */
  readonly steps: number;
  /** Replicates first, ..., first + count - 1. */
  readonly first: number;
  readonly count: number;
  /** Ends of the segments, increasing; the last is `steps`. */
  readonly ends: readonly number[];
  readonly memoryLimit: number;
  /** Which build of the kernel; for tests. */
  readonly target?: KernelTarget;
}

/** Paths up to this length are held whole, one preparation for all; longer ones are consumed block by block. */
export const HELD_MOVES = 30_000;

/**
 * The walk that is sampled. No point can be drawn from a density that need not be positive,
 * and the limits do not depend on one, so replicates then start from Haar measure.
 */
export function sampledWalk(walk: Walk): Walk {
  return walk.start.type === "density" ? { ...walk, start: { type: "uniform" } } : walk;
}

/**
 * Sums over the segments, row-major: replicates x observables x segments.
 * @throws LimitError where the exact walk or the observables pass the memory limit
 */
export async function segmentSums(walk: Walk, request: SegmentsRequest): Promise<Float64Array<ArrayBuffer>> {
  const { seed, steps, first, count, ends, memoryLimit } = request;
  const options = { memoryLimit, ...(request.target === undefined ? {} : { target: request.target }) };
  const program = observeProgram(walk);
  const stride = walk.observables.length * ends.length;
  const sums = new Float64Array(count * stride);
  if (steps > HELD_MOVES) {
    // The last position is not part of the average, and need not be reached.
    const path = { seed, steps: steps - 1, digits: 1, memoryLimit };
    // In one kernel, so that the sums are formed where the positions are.
    const kernel = await loadKernel(options);
    const observer = new Observer(kernel, program);
    for (let r = 0; r < count; r++) {
      const out = sums.subarray(r * stride, (r + 1) * stride);
      kernel.scoped(() => {
        for (const block of layOut(sampledWalk(walk), { ...path, replicate: first + r }, kernel).blocks(0)) {
          if (block !== undefined) observer.addToSegments(block.fixed(), block.first, block.rows, ends, out);
        }
      });
    }
    return sums;
  }
  const observer = new Observer(await loadKernel(options), program);
  const walker = await prepareWalker(sampledWalk(walk), { ...options, seed, steps });
  for (let r = 0; r < count; r++) {
    const { positions } = walker.run(first + r);
    observer.segmentSums(positions, ends, sums.subarray(r * stride, (r + 1) * stride));
  }
  return sums;
}
