/**
 * Do the conditions of the limit theorems hold? Exact integer arithmetic only: dimension 2
 * is always decided; from dimension 3 on `undecided` says what was tried.
 */
import { type CommonOptions, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { centralLimitVerdict, equidistributionVerdict, momentVerdict } from "./limits.js";
import { planeVerdicts } from "./plane-verdicts.js";
import type { ConditionsResult } from "./result.js";
import { spaceVerdicts } from "./space.js";

export type ConditionsOptions = CommonOptions;

/** The same without a session: for other questions. */
export function conditionsOf(walk: Walk): ConditionsResult {
  const finding = walk.dimension === 2 ? planeVerdicts(walk.moves) : spaceVerdicts(walk.moves);
  return {
    torwend: VERSION,
    walk: walk.title,
    stronglyIrreducible: finding.stronglyIrreducible,
    proximal: finding.proximal,
    exponentialMoment: momentVerdict(walk),
    equidistribution: equidistributionVerdict(walk, finding),
    centralLimit: centralLimitVerdict(walk, finding),
  };
}

/**
 * Strong irreducibility, proximality, moments, and the limit theorems that follow, each
 * with its reason and evidence.
 * @throws WalkError, OptionsError, StoppedError
 */
export async function conditions(
  input: WalkInput,
  options: ConditionsOptions & SharedSession = {},
): Promise<ConditionsResult> {
  const walk = asWalk(input);
  return withSession(options, async (session) => {
    session.progress("conditions", 0, 1);
    session.checkStop();
    const result = conditionsOf(walk);
    session.progress("conditions", 1, 1);
    return result;
  });
}
