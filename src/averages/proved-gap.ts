/** The gap of a walk, proved on the pool; kept with the walk, since `averages` and `law` both ask for it. */
import type { Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { type Gap, gapOf, gapPayload } from "./gap.js";
import { gapJob } from "./modular-jobs.js";

const kept = new WeakMap<Walk, Map<number, Gap | undefined>>();

/**
 * For dimension 2; undefined where nothing below 1 was proved.
 * @param states of the expanded walk that the certificates may have
 * @throws StoppedError
 */
export async function provedGap(walk: Walk, states: number, session: Session): Promise<Gap | undefined> {
  const known = kept.get(walk) ?? new Map<number, Gap | undefined>();
  kept.set(walk, known);
  if (known.has(states)) return known.get(states);
  const stage = "norms by certificates";
  session.progress(stage, 0, 1);
  const [found = {}] = await session.pool.map(gapJob, [gapPayload(walk, states)], { signal: session.signal });
  session.progress(stage, 1, 1);
  session.checkStop();
  const gap = gapOf(walk, found);
  known.set(states, gap);
  return gap;
}
