/**
 * One step of the dual walk in parts, by ranges of the hash: every part reads all frequencies
 * of the step before and makes the images whose hash lies in its own range. The number of
 * parts is fixed, and so is the order of all additions, whatever the number of workers.
 */
import { type DualMove, type DualShape, DualTables, type PackedFrequencies, type StepEnd } from "../kernel/dual.js";
import { defineJob } from "../kernel/jobs.js";
import { loadKernel } from "../kernel/kernel.js";

/** Parts of a step. Every image is made once for each, so many would cost more than they share out. */
export const PARTS = 4;

export interface StepPayload {
  readonly shape: DualShape;
  readonly moves: readonly DualMove[];
  /** All frequencies, the parts one after the other; shared memory where there is such. */
  readonly source: PackedFrequencies;
  readonly part: number;
  /** Frequencies that one part may hold. */
  readonly entries: number;
  /** Where the new part is evaluated. */
  readonly point: readonly bigint[];
  readonly memoryLimit: number;
}

export interface StepPart {
  readonly end: StepEnd;
  /** Empty unless done. */
  readonly words: BigInt64Array;
  readonly largest: bigint;
  /** The part's own sum at the point. */
  readonly re: number;
  readonly im: number;
}

export async function stepPart(payload: StepPayload): Promise<StepPart> {
  const { shape, source, part, entries } = payload;
  const kernel = await loadKernel({ memoryLimit: payload.memoryLimit });
  const tables = new DualTables(kernel, shape, entries, 1);
  const moves = tables.place(payload.moves);
  const end = tables.evolvePart(source, 0, moves, part, PARTS);
  if (end !== "done") return { end, words: new BigInt64Array(0), largest: 0n, re: 0, im: 0 };
  return { end, ...tables.packed(0), ...tables.evaluate(0, payload.point) };
}

export const stepJob = defineJob("law.step", stepPart);
