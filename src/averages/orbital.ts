/** The exact part for a rational start: everything about the walk on its finite orbit. */

import { exactQuantity } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import type { ExactBudget } from "./budget.js";
import type { ExactFinding } from "./finding.js";
import { orbitCorrelations, orbitDegeneracy, orbitVariance } from "./on-orbit.js";
import type { FiniteOrbit } from "./orbit.js";
import { orbitValues } from "./orbit-values.js";

const breathe = () => new Promise<void>((resolve) => setTimeout(resolve, 0));
/** Values of all moves together that the correlations of one observable may touch. */
const CORRELATION_WORK = 1e8;

export async function orbitFindings(
  walk: Walk,
  orbit: FiniteOrbit,
  session: Session,
  budget: ExactBudget,
): Promise<ExactFinding[]> {
  const weights = walk.moves.map((m) => m.probability.toNumber());
  const findings: ExactFinding[] = [];
  for (const [i, observable] of walk.observables.entries()) {
    session.progress("the walk on the finite orbit", i, walk.observables.length);
    const values = await orbitValues(orbit, observable);
    const last = Math.max(10, Math.min(budget.last, Math.floor(CORRELATION_WORK / (orbit.size * weights.length))));
    const correlations = orbitCorrelations(orbit, weights, values, last);
    await breathe();
    session.checkStop();
    const { verdict, spread } = orbitDegeneracy(orbit, values);
    const variance =
      spread === undefined
        ? orbitVariance(orbit, weights, values)
        : exactQuantity(0n, "sums of f - mean along paths depend on their ends alone");
    findings.push({
      label: observable.label,
      mean: values.mean,
      variance,
      degenerate: verdict,
      correlations,
      lastTerms: correlations.map((value, step) => ({ step, value })).slice(-5),
      ...(spread === undefined ? {} : { spread }),
      notes: [`Mean, correlations and variance are those of the walk on the start's orbit of ${orbit.size} points.`],
    });
    await breathe();
    session.checkStop();
  }
  return findings;
}
