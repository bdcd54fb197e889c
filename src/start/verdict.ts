/** Does the walk equidistribute from its start? */
import type { ConditionsResult } from "../conditions/result.js";
import type { ExactNumber } from "../exact/number.js";
import type { Verdict } from "../quantity/quantity.js";
import type { Walk } from "../walk/walk.js";
import { isTrapped } from "./displacement.js";
import { liouville } from "./liouville.js";
import type { StartKind } from "./result.js";

export function kindOf({ start }: Walk): StartKind {
  if (start.type !== "point") return start.type;
  const kinds = start.point.map((x) => x.kind);
  return kinds.includes("algebraic") ? "algebraic" : kinds.includes("unproved") ? "unproved" : "rational";
}

const verdict = (v: Verdict["verdict"], reason: string, evidence: Record<string, unknown> = {}): Verdict => ({
  verdict: v,
  reason,
  evidence,
});

function liouvilleEvidence(point: readonly ExactNumber[]): Record<string, unknown>[] {
  return point.flatMap((x, coordinate) => {
    if (x.kind !== "algebraic") return [];
    const { degree, polynomial, bound } = liouville(x);
    return [
      {
        coordinate: `x${coordinate + 1}`,
        number: x.text,
        polynomial,
        degree,
        inequality: `|x - p/q| >= 1 / (${bound} q^${degree}) for every p/q that is not a root of the polynomial`,
      },
    ];
  });
}

/** A start drawn from an absolutely continuous law. */
function continuousVerdict(walk: Walk, conditions: ConditionsResult): Verdict {
  const { equidistribution } = conditions;
  const evidence = { equidistribution: equidistribution.verdict };
  if (walk.start.type === "uniform") {
    return verdict("holds", "Haar measure is invariant under every move, so x_n is uniform for every n.", {
      ...evidence,
      scope: "law of x_n; time averages of single walks tend to the integral where equidistribution holds",
    });
  }
  if (equidistribution.verdict === "holds") {
    return verdict(
      "holds",
      "The density gives no mass to the countably many exceptional points, and the walk equidistributes from every other one.",
      evidence,
    );
  }
  return verdict(
    "undecided",
    `Equidistribution from single points is not proved: ${equidistribution.reason}`,
    evidence,
  );
}

/**
 * A verdict for each kind of start.
 * @param checked for a start of unproved kind: what was looked for without being found
 */
export function startVerdict(walk: Walk, conditions: ConditionsResult, checked: string): Verdict {
  if (walk.start.type !== "point") return continuousVerdict(walk, conditions);
  const { point } = walk.start;
  const { stronglyIrreducible, equidistribution } = conditions;
  const translations = walk.moves.flatMap((move) => move.translation ?? []);
  const kind = kindOf(walk);
  if (kind === "rational" && translations.every((b) => b.rational !== undefined)) {
    return verdict(
      "fails",
      "The start and all translations are rational, so the walk stays on a finite orbit; time averages tend to the mean over that orbit, not to the integral.",
      { start: point.map((x) => x.rational?.toString()) },
    );
  }
  if (equidistribution.evidence.obstruction === "finite group" && translations.length === 0) {
    return verdict("fails", "The moves generate a finite group, so the walk stays on finitely many points.", {
      stronglyIrreducible: stronglyIrreducible.verdict,
    });
  }
  if (stronglyIrreducible.verdict !== "holds") {
    return verdict("undecided", `The theorems at hand need strong irreducibility: ${stronglyIrreducible.reason}`, {
      stronglyIrreducible: stronglyIrreducible.verdict,
      equidistribution: equidistribution.verdict,
    });
  }
  const trapped = isTrapped(walk.moves, point);
  if (trapped === true) {
    return verdict(
      "fails",
      "(A - I) x + b is rational for every move, so the walk stays on finitely many points: a rational translate of the start.",
      { displacements: "rational for every move" },
    );
  }
  if (trapped === undefined) {
    return verdict("undecided", `The start is not proved to have an infinite orbit. ${checked}`.trim(), {
      kinds: point.map((x) => ({ number: x.text, kind: x.kind })),
      checked,
    });
  }
  if (equidistribution.verdict !== "holds") {
    return verdict(
      "undecided",
      `The start has an infinite orbit, but equidistribution is not proved: ${equidistribution.reason}`,
      {
        equidistribution: equidistribution.verdict,
      },
    );
  }
  const evidence = { liouville: liouvilleEvidence(point), theorem: equidistribution.evidence.theorem };
  if (translations.length === 0) {
    const first = point.findIndex((x) => x.kind === "algebraic");
    return verdict(
      "holds",
      `The coordinate x${first + 1} is an algebraic irrational, which rational points approximate badly (Liouville's inequality), and the walk equidistributes from every such start: ${equidistribution.reason}`,
      evidence,
    );
  }
  return verdict(
    "holds",
    `(A - I) x + b is irrational for some move, so the orbit is infinite, and the walk equidistributes from every such start: ${equidistribution.reason}`,
    evidence,
  );
}
