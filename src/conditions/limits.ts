/**
 * What published limit theorems give for a walk, from what is known of its group.
 *
 * Equidistribution:
 * - Bourgain, Furman, Lindenstrauss, Mozes, J. Amer. Math. Soc. 24 (2011): moves in SL_d(Z)
 *   with E |A|^e finite, strongly irreducible and proximal: the law of x_n tends to Haar
 *   measure from every start with an irrational coordinate.
 * - He, Lakrec, Lindenstrauss, Affine random walks on the torus (arXiv 2003.03743): finitely
 *   many moves in SL_d(Z) x T^d, linear part strongly irreducible and proximal: the law of
 *   x_n tends to Haar measure exactly from the starts that are not trapped in a finite orbit.
 * - Determinant -1, every move: x_0, x_2, ... and x_1, x_3, ... are walks of the products of
 *   two moves, to which the above applies; those products generate a subgroup of index at
 *   most 2, which is strongly irreducible and proximal with the whole.
 * - Determinants of both signs: the walk watched when its product has determinant 1 has
 *   moves in SL_d(Z) with an exponential moment (the waiting times have geometric tails),
 *   generating a subgroup of index 2; time averages of the watched walk and of the
 *   excursions between give those of the walk. The law of x_n itself is not covered.
 *
 * Norms: Le Page 1982, Guivarc'h and Raugi 1985 (central limit theorem and law of the
 * iterated logarithm for strongly irreducible proximal sets with an exponential moment).
 * Time averages: from a uniform start by Gordin 1969 and the spectral gap (Furman and
 * Shalom 1999). Published results for single starts that rational points approximate badly
 * (determinant 1, no translations) are mentioned from memory, and nothing rests on them.
 */
import type { Verdict } from "../quantity/quantity.js";
import type { Walk } from "../walk/walk.js";
import { fails, type GroupFinding, holds, undecided } from "./finding.js";

export function momentVerdict(walk: Walk): Verdict {
  const count = walk.moves.length;
  return holds(
    `The moves are finitely many (${count}) invertible matrices, so E |A|^s and E |A^-1|^s are finite for every s.`,
    { moves: count },
  );
}

function obstructed(finding: GroupFinding, translated: boolean): Verdict {
  const { stronglyIrreducible, obstruction } = finding;
  if (obstruction === undefined) {
    return undecided("The theorems at hand need strong irreducibility and proximality, and one of them is undecided.", {
      stronglyIrreducible: stronglyIrreducible.verdict,
      proximal: finding.proximal.verdict,
    });
  }
  const evidence = { obstruction: obstruction.type };
  if (translated) {
    return undecided(
      "The linear part is not strongly irreducible, and whether the translations make up for it is not covered by the theorems at hand.",
      evidence,
    );
  }
  switch (obstruction.type) {
    case "finite group":
      return fails("The group is finite, so from every start the walk stays on finitely many points.", evidence);
    case "rational subspaces":
      return fails(
        "The moves permute finitely many proper rational subspaces, hence closed subtori of lower dimension: from a point with irrational coordinates on one of them the walk never leaves them.",
        evidence,
      );
    case "irrational lines":
      return fails(
        "Powers of the hyperbolic element h have finite index in the group. From the irrational points that lie on both eigenlines of h through integer points, x_n tends to 0 in probability where the group is infinite.",
        {
          ...evidence,
          points: "m - (projection of m to an eigenline of h along the other one), m an integer vector not 0, modulo 1",
        },
      );
    case "real subspace":
      return undecided(
        "The moves keep a proper real subspace that is not known to be rational; the theorems at hand do not cover this.",
        evidence,
      );
  }
}

export function equidistributionVerdict(walk: Walk, finding: GroupFinding): Verdict {
  const translated = walk.moves.some((move) => move.translation !== undefined);
  const { stronglyIrreducible, proximal } = finding;
  if (stronglyIrreducible.verdict !== "holds" || proximal.verdict !== "holds") return obstructed(finding, translated);
  const signs = new Set(walk.moves.map((move) => move.determinant));
  const mixed = signs.size === 2;
  const theorem = translated
    ? "He, Lakrec, Lindenstrauss, Affine random walks on the torus"
    : "Bourgain, Furman, Lindenstrauss, Mozes 2011";
  const from = translated
    ? "from every start whose orbit is not finite"
    : "from every start with at least one irrational coordinate";
  const evidence = {
    theorem,
    hypotheses: ["strongly irreducible", "proximal", "finitely many moves"],
    exceptions: translated ? "points with a finite orbit" : "rational points",
    determinants: [...signs].sort(),
  };
  if (mixed && translated) {
    return undecided(
      `${theorem}, covers finitely many moves of determinant 1; with translations and determinants of both signs the reduction to them needs infinitely many.`,
      evidence,
    );
  }
  if (mixed) {
    return holds(
      `Time averages tend to the integral ${from}: ${theorem}, applied to the walk watched when its product has determinant 1.`,
      {
        ...evidence,
        scope: "time averages; convergence of the law of x_n itself is not claimed for determinants of both signs",
      },
    );
  }
  const pairs = signs.has(-1) ? ", applied to the products of two moves" : "";
  return holds(`The law of x_n tends to Haar measure ${from}: ${theorem}${pairs}.`, {
    ...evidence,
    scope: "law of x_n and time averages",
  });
}

export function centralLimitVerdict(walk: Walk, finding: GroupFinding): Verdict {
  const { stronglyIrreducible, proximal, obstruction, slow } = finding;
  if (stronglyIrreducible.verdict === "holds" && proximal.verdict === "holds") {
    const translated = walk.moves.some((move) => move.translation !== undefined);
    return holds(
      "log |A_n...A_1| has a central limit theorem with positive variance and a law of the iterated logarithm (Le Page 1982; Guivarc'h and Raugi 1985); time averages from a uniform start have a central limit theorem (Gordin 1969, by the spectral gap), whose variance may be 0.",
      {
        hypotheses: ["strongly irreducible", "proximal", "exponential moment"],
        timeAverages: translated
          ? "uniform start; single starts are not claimed with translations"
          : "uniform start; for determinant 1 also, from memory, single starts that rational points approximate badly",
      },
    );
  }
  if (slow) {
    return fails(
      "Every eigenvalue of every product has modulus 1, so log |A_n...A_1| grows at most like log n: divided by the root of n it tends to 0, not to a normal law of positive variance.",
      obstruction === undefined ? {} : { obstruction: obstruction.type },
    );
  }
  if (obstruction?.type === "irrational lines") {
    return undecided(
      "Up to a bounded error log |A_n...A_1| is the modulus of a sum of terms +-log of eigenvalues along the moves; whether that is asymptotically normal depends on its drift. The theorems used here do not apply.",
      { obstruction: obstruction.type },
    );
  }
  return undecided("The theorems used here need strong irreducibility and proximality.", {
    stronglyIrreducible: stronglyIrreducible.verdict,
    proximal: proximal.verdict,
  });
}
