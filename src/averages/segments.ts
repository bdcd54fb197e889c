/** Where along a path the sums are taken: batches, the envelope's checkpoints, the running average's. */
import type { Real } from "../kernel/real.js";
import { batchCount, batchEnds } from "../statistics/batches.js";
import { ENVELOPE_FROM } from "../statistics/iterated.js";

const ENVELOPE_POINTS = 64;
const RUNNING_POINTS = 200;

/** Segments of a path of `steps` moves; the lists of places are indices into `ends`. */
export interface Segments {
  readonly steps: number;
  /** Increasing; the last is `steps`. */
  readonly ends: readonly number[];
  /** Ends of the batches. */
  readonly batches: readonly number[];
  /** Evenly spaced n of the second half, n >= 16. */
  readonly envelope: readonly number[];
  /** Some 200 n, geometrically spaced from 1 to `steps`. */
  readonly running: readonly number[];
}

/** @param steps 2 or more */
export function planSegments(steps: number, real: Real): Segments {
  const batches = batchEnds(steps, batchCount(steps));
  const second = steps - Math.floor(steps / 2);
  const envelope = Array.from({ length: ENVELOPE_POINTS + 1 }, (_, i) =>
    Math.floor(steps - second + (second * i) / ENVELOPE_POINTS),
  ).filter((n) => n >= ENVELOPE_FROM);
  const growth = real.log(steps) / (RUNNING_POINTS - 1);
  const running = Array.from({ length: RUNNING_POINTS }, (_, i) =>
    i === RUNNING_POINTS - 1 ? steps : Math.min(steps, Math.round(real.exp(growth * i))),
  );
  const ends = [...new Set([...batches, ...envelope, ...running])].sort((a, b) => a - b);
  const place = new Map(ends.map((n, i) => [n, i]));
  const places = (list: readonly number[]) => [...new Set(list)].map((n) => place.get(n) as number);
  return { steps, ends, batches: places(batches), envelope: places(envelope), running: places(running) };
}
