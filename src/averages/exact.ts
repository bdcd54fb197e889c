/** What is known of time averages without sampling: under Haar measure, or on a rational start's finite orbit. */

import { decidePlane } from "../conditions/plane.js";
import { above } from "../quantity/interval.js";
import { estimatedQuantity, quantityNumber } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import { commonDenominator } from "../walk/denominator.js";
import type { Walk } from "../walk/walk.js";
import { EXACT_BUDGET, type ExactBudget } from "./budget.js";
import type { ExactFinding } from "./finding.js";
import type { Gap } from "./gap.js";
import { haarFindings } from "./haar.js";
import { finiteOrbit } from "./orbit.js";
import { orbitFindings } from "./orbital.js";
import { provedGap } from "./proved-gap.js";

export interface ExactAverages {
  readonly findings: readonly ExactFinding[];
  readonly orbit?: { readonly denominator: number; readonly size: number };
  readonly gap?: Gap;
  readonly warnings: readonly string[];
}

/** Means of an orbit that was not listed: the integral, and no claim beyond that. */
function asEstimate(finding: ExactFinding): ExactFinding {
  const method = "integral, in place of the mean over a finite orbit too large to list";
  const mean = estimatedQuantity(quantityNumber(finding.mean), method);
  const value = finding.variance === undefined ? undefined : quantityNumber(finding.variance);
  return {
    ...finding,
    mean,
    ...(value === undefined
      ? {}
      : { variance: estimatedQuantity(value, "Haar measure's, in place of the finite orbit's") }),
    degenerate: {
      verdict: "undecided",
      reason: "The start's finite orbit is too large to list.",
      evidence: { underHaarMeasure: finding.degenerate },
    },
    notes: [...finding.notes, "Correlations are those of Haar measure, not of the start's finite orbit."],
  };
}

/** Exact part of `averages`, in the observables' order. @throws StoppedError, LimitError */
export async function exactAverages(
  walk: Walk,
  session: Session,
  budget: ExactBudget = EXACT_BUDGET[session.effort],
  generating: readonly number[] = [],
  integers = false,
): Promise<ExactAverages> {
  const denominator = commonDenominator(walk);
  if (denominator !== undefined) {
    const orbit = finiteOrbit(walk, budget.points);
    if (orbit !== undefined) {
      const { size } = orbit;
      return {
        findings: await orbitFindings(walk, orbit, session, budget),
        orbit: { denominator: Number(denominator), size },
        warnings: [
          `The start is rational: the walk stays on an orbit of ${size} points with denominator ${denominator}, and averages converge to its mean, not to the integral.`,
        ],
      };
    }
    return {
      findings: (await haarFindings(walk, session, budget, generating, 1, integers)).map(asEstimate),
      warnings: [
        `The start is rational with denominator ${denominator}: averages converge to the mean over a finite orbit, which has more points than this effort lists (${budget.points}); integrals are given in its place.`,
      ],
    };
  }
  const warnings: string[] = [];
  if (walk.dimension === 2 && decidePlane(walk.moves).type !== "strongly irreducible") {
    warnings.push(
      "The moves are not strongly irreducible: the numbers are those of Haar measure, which time averages from this start need not follow.",
    );
  }
  if (walk.dimension > 2 && walk.start.type === "point") {
    warnings.push(
      "That averages from this start converge to the integral rests on strong irreducibility and proximality: see `conditions`.",
    );
  }
  if (walk.start.type === "point" && walk.start.point.some((x) => x.kind === "unproved")) {
    warnings.push(
      "A coordinate of the start is not proved irrational: if all are rational, the limit is a finite orbit's mean.",
    );
  }
  const gap = walk.dimension === 2 ? await provedGap(walk, budget.normStates, session) : undefined;
  // The decimal's double is the nearest: one unit more is surely above.
  const contraction = gap === undefined ? 1 : above(Number(gap.norm.high));
  const findings = await haarFindings(walk, session, budget, generating, contraction, integers);
  return { findings, ...(gap === undefined ? {} : { gap }), warnings };
}
