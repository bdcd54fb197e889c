/**
 * The law of x_n through its Fourier coefficients E exp(2 pi i k.x_n), by the dual walk:
 * E e_k(x_n) is the integral of P^n e_k against the law of x_0. No sampling.
 */

import { loadReal } from "../kernel/real.js";
import { type Session, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { commonDenominator } from "../walk/denominator.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { fitDecay, normBound } from "./decay.js";
import { distanceToUniform } from "./distance.js";
import { follow, type LawEnd } from "./follow.js";
import { LAW_BUDGET, type LawOptions, type LawRequest, readOptions } from "./options.js";
import type { LawResult } from "./result.js";

export type { LawOptions } from "./options.js";

const END_REASON: Readonly<Record<LawEnd["end"], string>> = {
  done: "all steps asked for",
  full: "the frequency table would be full; a higher --effort or a higher memory limit allows a larger one",
  coefficients: "the exact integers of the next step may need more than 63 bits",
  overflow: "a frequency of the next step needs more than 63 bits",
  budget: "the products that this effort allows are used up; a higher --effort allows more",
};

const breathe = () => new Promise<void>((resolve) => setTimeout(resolve, 0));

/** The walk's coefficient at the frequency asked for; the session breathes between steps. */
function followIn(session: Session, walk: Walk, request: LawRequest, options: LawOptions): Promise<LawEnd> {
  let since = 0;
  const { frequency, steps } = request;
  return follow(walk, {
    frequency,
    steps,
    denominator: commonDenominator(walk),
    exact: options.exact === true,
    session,
    ...LAW_BUDGET[session.effort],
    memoryLimit: session.memoryLimit,
    pause: async (step, products) => {
      since += products;
      if (since > 500_000) {
        session.progress("law", step, steps);
        await breathe();
        since = 0;
      }
      session.checkStop();
    },
  });
}

/**
 * E exp(2 pi i k.x_n) for n = 0, 1, ..., as far as the budget of the effort allows; each
 * part is enclosed with a proved bound on rounding, or exact where nothing has to be computed.
 * @throws WalkError for a walk that is wrong.
 * @throws OptionsError for a frequency or a number of steps that does not fit.
 * @throws LimitError where the memory limit is too small for any table.
 */
export async function law(input: WalkInput, options: LawOptions & SharedSession): Promise<LawResult> {
  const walk = asWalk(input);
  return withSession(options, async (session) => {
    const request = readOptions(options, walk);
    const { coefficients, end } = await followIn(session, walk, request, options);
    const real = await loadReal();
    const decay = fitDecay(coefficients, real);
    const whole = options.distance !== false;
    const bound = whole ? await normBound(walk, session, real) : undefined;
    const distance =
      whole && walk.start.type !== "uniform" ? await distanceToUniform(walk, request.steps, session) : undefined;
    const reached = { step: coefficients.length - 1, reason: END_REASON[end] };
    return {
      torwend: VERSION,
      walk: walk.title,
      frequency: request.frequency.map(String),
      coefficients,
      ...(decay === undefined ? {} : { decay }),
      ...(bound === undefined ? {} : { normBound: bound }),
      ...(distance === undefined ? {} : { distance }),
      reached,
      ...(end !== "done" && request.asked ? { stoppedAt: reached } : {}),
    };
  });
}
