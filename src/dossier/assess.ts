/** The whole job: every question that applies, one session, one dossier. */
import { averages } from "../averages/averages.js";
import { conditions } from "../conditions/conditions.js";
import { StoppedError } from "../errors.js";
import { growth } from "../growth/growth.js";
import { law } from "../law/law.js";
import { orbits } from "../orbits/orbits.js";
import { SESSION, type Session, type SharedSession, withSession } from "../session.js";
import { start } from "../start/start.js";
import { VERSION } from "../version.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { AssessStopped, attempt } from "./attempt.js";
import { compareWithDoubles } from "./compare.js";
import { lowFrequencies, smallModuli } from "./plan.js";
import { precisionOf } from "./precision.js";
import { questionSession } from "./progress.js";
import { type Answer, type AssessOptions, type Dossier, isAnswered } from "./result.js";

/** Asks once for each of several parameters: the first answer with the others beside it. */
async function askEach<P, T extends object>(
  parameters: readonly P[],
  ask: (parameter: P, part: number) => Promise<T>,
): Promise<Answer<T & { readonly others: readonly Answer<T>[] }>> {
  const answers: Answer<T>[] = [];
  for (const [part, parameter] of parameters.entries()) answers.push(await attempt(() => ask(parameter, part)));
  const main = answers.findIndex((a) => isAnswered(a));
  // With no answer at all, the first one's reason stands for all.
  if (main < 0) return (answers[0] as Answer<never>) ?? { skipped: "nothing to ask" };
  const first = answers[main] as T;
  return { ...first, others: answers.filter((_, i) => i !== main) };
}

async function askLaw(walk: Walk, session: Session): Promise<Dossier["law"]> {
  const frequencies = lowFrequencies(walk.dimension, session.effort);
  return askEach(frequencies, (frequency, part) =>
    law(walk, {
      [SESSION]: questionSession(session, "law", part, frequencies.length),
      frequency,
      distance: part === 0,
    }),
  );
}

async function askOrbits(walk: Walk, session: Session): Promise<Dossier["orbits"]> {
  const { moduli, skipped } = smallModuli(walk, session.effort);
  if (skipped !== undefined) return { skipped };
  return askEach(moduli, (modulus, part) =>
    orbits(walk, { [SESSION]: questionSession(session, "orbits", part, moduli.length), modulus }),
  );
}

/** What a stopped `assess` has in the place of an answer. */
const UNANSWERED = { stopped: "the run was stopped before this question was answered" } as const;

/**
 * Runs every question on the walk. A question that meets its own limit leaves `{stopped}` in
 * its place, one that does not apply `{skipped}`; the others go on. The result is plain JSON
 * and holds no times: the same walk, seed, effort and level give the same bytes.
 * @throws WalkError, OptionsError for wrong input
 * @throws AssessStopped (a StoppedError) once the signal fires: what was finished is in its `dossier`
 */
export async function assess(input: WalkInput, options: AssessOptions & SharedSession = {}): Promise<Dossier> {
  const walk = asWalk(input);
  return withSession(options, async (session) => {
    let dossier: Dossier = {
      torwend: VERSION,
      walk: walk.title,
      seed: session.seed.toString(),
      effort: session.effort,
      level: session.level,
      document: walk.document as object,
      conditions: UNANSWERED,
      growth: UNANSWERED,
      start: UNANSWERED,
      averages: UNANSWERED,
      law: UNANSWERED,
      orbits: UNANSWERED,
      trajectory: UNANSWERED,
      precision: UNANSWERED,
    };
    const alone = <Q extends "conditions" | "growth" | "start" | "averages">(
      name: Q,
      ask: (walk: Walk, options: SharedSession) => Promise<object>,
    ) => attempt(() => ask(walk, { [SESSION]: questionSession(session, name) }));
    const questions: Readonly<Record<string, () => Promise<unknown>>> = {
      conditions: () => alone("conditions", conditions),
      growth: () => alone("growth", growth),
      start: () => alone("start", start),
      averages: () => alone("averages", averages),
      law: () => askLaw(walk, session),
      orbits: () => askOrbits(walk, session),
      trajectory: () => attempt(() => compareWithDoubles(walk, questionSession(session, "trajectory"))),
    };
    const answered: string[] = [];
    try {
      for (const [name, ask] of Object.entries(questions)) {
        session.checkStop();
        dossier = { ...dossier, [name]: await ask() };
        if (name === "growth") dossier = { ...dossier, precision: precisionOf(dossier.growth) };
        answered.push(name);
      }
    } catch (error) {
      if (error instanceof StoppedError) throw new AssessStopped(dossier, answered);
      throw error;
    }
    session.progress("done", 1000, 1000);
    return dossier;
  });
}
