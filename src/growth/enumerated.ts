/** Dimension 3 and more: what enumeration of words proves of the top exponent. */
import { enclosedQuantity, type Quantity } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { wordsJob } from "./jobs.js";
import type { UpperBound } from "./result.js";
import { meansJob, normsJob, type WordsJob } from "./words.js";

export interface EnumeratedBounds {
  /** lambda_1, for moves without negative entries after a change of signs. */
  readonly enclosure?: Quantity;
  /** For other moves, where words are short enough to be counted exactly. */
  readonly upperBound?: UpperBound;
}

export async function enumeratedBounds(walk: Walk, session: Session): Promise<EnumeratedBounds> {
  session.progress("words of moves", 0, 1);
  const run = async (job: WordsJob) => (await session.pool.map(wordsJob, [job], { signal: session.signal }))[0]!;
  const means = meansJob(walk, session.effort);
  if (means !== undefined) {
    const { low, high, words, longest } = await run(means);
    const method = `non-negative moves: growth on the images of the orthant under ${words} words of up to ${longest} moves`;
    return { enclosure: enclosedQuantity(low, high, method) };
  }
  const norms = normsJob(walk, session.effort);
  if (norms?.norms === undefined) return {};
  const { low, high, words } = await run(norms);
  const n = norms.norms;
  // Dividing by n rounds once more: a unit outward.
  const outward = Math.max(Math.abs(low), Math.abs(high)) * 2 ** -50;
  const method = `mean log norm of ${n} moves over n, all ${words} words`;
  return { upperBound: { moves: n, value: enclosedQuantity((low - outward) / n, (high + outward) / n, method) } };
}
