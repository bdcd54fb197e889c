/** What enumeration of words proves of the top exponent. */
import { Rational } from "../exact/rational.js";
import type { Real } from "../kernel/real.js";
import { enclosedBetween, enclosedQuantity, type Quantity } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { wordsJob } from "./jobs.js";
import type { UpperBound } from "./result.js";
import { finerJobs, meansJob, narrowest, normsJob, type WordsJob } from "./words.js";

export interface EnumeratedBounds {
  /** lambda_1, for moves without negative entries after a change of signs. */
  readonly enclosure?: Quantity;
  /** For other moves, where words are short enough to be counted exactly. */
  readonly upperBound?: UpperBound;
}

export async function enumeratedBounds(walk: Walk, session: Session, real: Real): Promise<EnumeratedBounds> {
  const stage = "words of moves";
  session.progress(stage, 0, 1);
  const run = (jobs: readonly WordsJob[]) =>
    session.pool.map(wordsJob, jobs, {
      signal: session.signal,
      onDone: (done) => session.progress(stage, done, jobs.length),
    });
  const look = meansJob(walk, session.effort);
  if (look !== undefined) {
    const [tried] = await run([look]);
    const first = narrowest(tried!);
    let { words, longest } = first;
    let [low, high] = [Rational.fromNumber(first.low), Rational.fromNumber(first.high)];
    const parts = finerJobs(walk, session.effort, look, tried!, real);
    if (parts.length > 0) {
      const means = (await run(parts.map((p) => p.job))).map((m) => m[0]!);
      const sum = (end: "low" | "high") =>
        parts.reduce((s, { share }, i) => s.add(share.mul(Rational.fromNumber(means[i]![end]))), Rational.ZERO);
      [low, high] = [sum("low"), sum("high")];
      words = means.reduce((s, m) => s + m.words, 0);
      longest = Math.max(...means.map((m) => m.longest));
    }
    const method = `non-negative moves: growth on the images of the orthant under ${words} words of up to ${longest} moves`;
    return { enclosure: enclosedBetween(low, high, method) };
  }
  const norms = walk.dimension === 2 ? undefined : normsJob(walk, session.effort);
  if (norms?.norms === undefined) return {};
  const { low, high, words } = narrowest((await run([norms]))[0]!);
  const n = norms.norms;
  // Dividing by n rounds once more: a unit outward.
  const outward = Math.max(Math.abs(low), Math.abs(high)) * 2 ** -50;
  const method = `mean log norm of ${n} moves over n, all ${words} words`;
  return { upperBound: { moves: n, value: enclosedQuantity((low - outward) / n, (high + outward) / n, method) } };
}
