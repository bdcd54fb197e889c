/** How many moves the first trap costs, and what that does to averages of the walk's observables. */
import { boxMean } from "../averages/integral.js";
import { trapCosts } from "../averages/start-cost.js";
import { formQuantity } from "../dual/enclose.js";
import { polynomialOf } from "../dual/polynomial.js";
import { quantityNumber } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Observable, Walk } from "../walk/walk.js";
import type { Trap, TrapCost } from "./result.js";

function integral(f: Observable): number {
  return quantityNumber(f.type === "box" ? boxMean(f) : formQuantity(polynomialOf(f.terms).constant, "integral"));
}

/** Undefined where there is no trap, or its orbit has too many points to be listed. */
export async function costOf(walk: Walk, trap: Trap | undefined, session: Session): Promise<TrapCost | undefined> {
  if (trap === undefined) return undefined;
  // What exact walks showed, where they were run: no prediction then.
  const hold = trap.sampledHold?.mean ?? trap.hold;
  const found = await trapCosts(walk, { ...trap, hold }, walk.observables.map(integral), session);
  if (found === undefined) return undefined;
  const { denominator, numerators } = trap;
  return {
    denominator,
    numerators,
    orbitSize: found.orbitSize,
    moves: hold,
    observables: walk.observables.map(({ label }, i) => ({ label, sum: found.sums[i]! })),
  };
}
