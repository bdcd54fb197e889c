/**
 * What the start adds to sums along the walk, over all moves: E sum of f(x_n) - mean. Near a
 * rational point the walk stays beside its finite orbit until rounding, so to speak, has
 * grown to the room between the orbit's points; so long the average is the orbit's, and then
 * it is soon the integral's. Estimated from the rational point that holds longest.
 */
import { LimitError } from "../errors.js";
import { exactRational } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { loadReal } from "../kernel/real.js";
import { estimatedQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import { bestApproximations } from "../start/approximations.js";
import { predictedTraps, quickRate } from "../start/holds.js";
import type { Trap } from "../start/result.js";
import { translationDenominator } from "../walk/denominator.js";
import type { Walk } from "../walk/walk.js";
import { finiteOrbit } from "./orbit.js";
import { orbitValues } from "./orbit-values.js";

export interface StartCost {
  readonly trap: { readonly denominator: number; readonly numerators: readonly number[] };
  /** Moves beside the trap's orbit. */
  readonly moves: Quantity;
  /** Those moves times (the orbit's mean less the integral): what the sum of f - mean is off by in the end. */
  readonly sum: Quantity;
}

const DENOMINATORS = 1000;
const POINTS = 20_000;

async function worstTrap(walk: Walk, session: Session): Promise<Trap | undefined> {
  const translations = translationDenominator(walk);
  if (walk.start.type !== "point" || translations === undefined || translations >= 2n ** 53n) return undefined;
  const { records } = bestApproximations(walk.start.point, DENOMINATORS, translations);
  try {
    const rate = await quickRate(walk, session);
    return rate > 1e-9 ? predictedTraps(records, rate, await loadReal())[0] : undefined;
  } catch (error) {
    if (error instanceof LimitError) return undefined;
    throw error;
  }
}

/**
 * What a trap adds to the sums of the observables less their limits `means`, one for each;
 * undefined where its orbit has too many points to be listed.
 */
export async function trapCosts(
  walk: Walk,
  { denominator, numerators, hold }: Trap,
  means: readonly number[],
  session: Session,
): Promise<{ readonly orbitSize: number; readonly sums: readonly Quantity[] } | undefined> {
  const point = numerators.map((p) => exactRational(Rational.of(p, denominator)));
  const orbit = finiteOrbit({ ...walk, start: { type: "point", point } }, POINTS);
  if (orbit === undefined) return undefined;
  const sums: Quantity[] = [];
  for (const [i, observable] of walk.observables.entries()) {
    const { mean } = await orbitValues(orbit, observable);
    const off = quantityNumber(mean) - means[i]!;
    const method = `moves beside the orbit of ${orbit.size} points with denominator ${denominator}, times that orbit's mean less the limit`;
    sums.push(estimatedQuantity(quantityNumber(hold) * off, method));
    session.checkStop();
  }
  return { orbitSize: orbit.size, sums };
}

/** One for each observable; undefined for all where the start is no point, or near none whose orbit can be listed. */
export async function startCosts(
  walk: Walk,
  means: readonly number[],
  session: Session,
): Promise<readonly StartCost[] | undefined> {
  session.progress("what the start costs", 0, 1);
  const trap = await worstTrap(walk, session);
  if (trap === undefined) return undefined;
  const found = await trapCosts(walk, trap, means, session);
  if (found === undefined) return undefined;
  const { denominator, numerators, hold } = trap;
  const costs = found.sums.map((sum) => ({ trap: { denominator, numerators }, moves: hold, sum }));
  session.progress("what the start costs", 1, 1);
  return costs;
}
