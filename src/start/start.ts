/** Is this start safe, or near a rational trap? */

import { finiteOrbit } from "../averages/orbit.js";
import { conditionsOf, groupFinding } from "../conditions/conditions.js";
import { LimitError } from "../errors.js";
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { loadReal } from "../kernel/real.js";
import { enclosedBetween, exactQuantity, type Quantity } from "../quantity/quantity.js";
import { type Effort, type Session, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { commonDenominator, translationDenominator } from "../walk/denominator.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { bestApproximations } from "./approximations.js";
import { costOf } from "./cost.js";
import { predictedTraps, quickRate, sampledTraps } from "./holds.js";
import { readDenominators, type StartOptions } from "./options.js";
import type { StartResult, Trap, TrapCost } from "./result.js";
import { kindOf, startVerdict } from "./verdict.js";

export type { StartOptions } from "./options.js";

/** Points of an orbit that are listed at most. */
const MOST_POINTS: Record<Effort, number> = { quick: 100_000, standard: 300_000, thorough: 1_000_000 };

/** The finite orbit of a rational start: its size by enumeration, or between what was seen and all points. */
function orbitOf(walk: Walk, effort: Effort): { denominator: string; size: Quantity } | undefined {
  const q = commonDenominator(walk);
  if (q === undefined) return undefined;
  const orbit = finiteOrbit(walk, MOST_POINTS[effort]);
  if (orbit !== undefined) {
    return { denominator: q.toString(), size: exactQuantity(BigInt(orbit.size), "enumeration of the orbit") };
  }
  const all = Rational.of(q ** BigInt(walk.dimension));
  // Beyond 25 bits the orbit is not listed at all.
  const seen = q > 2n ** 25n ? 1 : MOST_POINTS[effort] + 1;
  const method = `more than ${seen - 1} points, at most all points with the orbit's denominator`;
  return { denominator: q.toString(), size: enclosedBetween(Rational.of(seen), all, method) };
}

/** Denominators with which a start of unproved kind is compared at least. */
const COMPARED = 1_000_000_000;

interface Search {
  readonly traps: readonly Trap[];
  readonly cost?: TrapCost;
  readonly search: string;
  /** What the scan proves about a start of unproved kind. */
  readonly checked: string;
}

async function searchTraps(
  walk: Walk,
  point: readonly ExactNumber[],
  denominators: number,
  slow: boolean,
  session: Session,
): Promise<Search> {
  const none = (search: string, checked = ""): Search => ({ traps: [], search, checked });
  const translations = translationDenominator(walk);
  if (translations === undefined) {
    return none(
      "not searched: a translation is not rational, so that rational points have no finite orbits to hold the walk",
    );
  }
  if (translations >= 2n ** 53n)
    return none(`not searched: the translations' common denominator ${translations} is beyond 2^53`);
  session.progress("approximations", 0, 1);
  // A start that may be rational is compared with all small fractions, whatever traps are asked for.
  const unproved = kindOf(walk) === "unproved";
  const most = unproved ? Math.max(denominators, COMPARED) : denominators;
  const found = bestApproximations(point, most, translations);
  const { unresolved, searchedTo } = found;
  const records = found.records.filter((r) => r.denominator <= denominators);
  session.progress("approximations", 1, 1);
  session.checkStop();
  const checked =
    unresolved.length === 0
      ? `It differs from every rational point with denominator up to ${searchedTo}.`
      : `It agrees through 4096 bits with a rational point of denominator ${unresolved[0]}.`;
  const scan = `every denominator up to ${Math.min(searchedTo, denominators)}: records of room / distance, by lattice reduction in exact integers`;
  if (slow) {
    return none(
      `${scan}; products grow at most like a power of the number of moves, so that holds follow no exponential rate`,
    );
  }
  const limits: string[] = [];
  const rate = await unlessLimited(quickRate(walk, session), limits);
  if (rate === undefined) return none(`${scan}; holds are not predicted: ${limits[0]}`, checked);
  if (!(rate > 1e-9)) return none(`${scan}; no positive growth rate was found, so holds are not predicted`, checked);
  const predicted = predictedTraps(records, rate, await loadReal());
  const sampled = await unlessLimited(sampledTraps(walk, predicted, session), limits);
  const cost = await costOf(walk, (sampled ?? predicted)[0], session);
  const search = sampled === undefined ? `${scan}; holds were not sampled: ${limits[0]}` : scan;
  return { traps: sampled ?? predicted, ...(cost === undefined ? {} : { cost }), search, checked };
}

/** The result, or undefined where a stated limit was met: its message is added to `limits`. */
async function unlessLimited<T>(work: Promise<T>, limits: string[]): Promise<T | undefined> {
  try {
    return await work;
  } catch (error) {
    if (!(error instanceof LimitError)) throw error;
    limits.push(error.message);
    return undefined;
  }
}

/**
 * The kind of the start, whether the walk equidistributes from it, and the rational points
 * near it whose finite orbits hold the walk: distances on the torus (Euclidean), holds in moves.
 * @throws WalkError, OptionsError, LimitError, StoppedError
 */
export async function start(input: WalkInput, options: StartOptions & SharedSession = {}): Promise<StartResult> {
  const walk = asWalk(input);
  const denominators = readDenominators(options);
  return withSession(options, async (session) => {
    session.progress("conditions", 0, 1);
    const finding = groupFinding(walk);
    const conditions = conditionsOf(walk, finding);
    session.progress("conditions", 1, 1);
    session.checkStop();
    const { traps, cost, search, checked }: Search =
      walk.start.type === "point"
        ? await searchTraps(walk, walk.start.point, denominators, finding.slow, session)
        : { traps: [], search: "not searched: the start is not one point", checked: "" };
    const kind = kindOf(walk);
    const orbit = kind === "rational" ? orbitOf(walk, session.effort) : undefined;
    return {
      torwend: VERSION,
      walk: walk.title,
      kind,
      verdict: startVerdict(walk, conditions, checked),
      traps,
      ...(cost === undefined ? {} : { cost }),
      search,
      ...(orbit === undefined ? {} : { orbit }),
    };
  });
}
