import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { algebraBasis } from "../../src/conditions/algebra.js";
import { conditionsOf } from "../../src/conditions/conditions.js";
import { isDivisionAlgebra, realRoots } from "../../src/conditions/division.js";
import { dominance, squaredRoots } from "../../src/conditions/dominant.js";
import { characteristicPolynomial } from "../../src/conditions/matrix.js";
import { PRIMES } from "../../src/conditions/modular.js";
import { fullAlgebraPrime } from "../../src/conditions/norton.js";
import { adjoint, square } from "../../src/conditions/representations.js";
import { blocks, elementary, type Small, tensor, times, unit, walkOf } from "./walks.js";

const big = (a: Small) => a.map((row) => row.map(BigInt));
const cycle = (d: number) => Array.from({ length: d }, (_, i) => elementary(d, i, (i + 1) % d));
const cat: Small = [
  [2, 1],
  [1, 1],
];
const other: Small = [
  [3, 1],
  [2, 1],
];
const swap: Small = [
  [0, 1],
  [1, 0],
];
const turn: Small = [
  [0, -1],
  [1, 0],
];

function verdicts(...matrices: Small[]) {
  const { stronglyIrreducible, proximal, equidistribution } = conditionsOf(walkOf(matrices));
  return {
    strong: stronglyIrreducible,
    proximal,
    all: [stronglyIrreducible.verdict, proximal.verdict, equidistribution.verdict],
  };
}

const permutation = (images: readonly number[]): number[][] => images.map((j) => unit(images.length)[j]);

/** The action of a 2 x 2 matrix on quadratic forms: it keeps the discriminant, of signature (2, 1). */
const onForms = ([[p, q], [r, s]]: Small): number[][] => [
  [p * p, p * q, q * q],
  [2 * p * r, p * s + q * r, 2 * q * s],
  [r * r, r * s, s * s],
];

describe("dimension 3 and more", () => {
  it("decides elementary matrices of SL_d, d = 3 to 8, with a proximal product", () => {
    for (const d of [3, 4, 8]) {
      const { all, proximal } = verdicts(...cycle(d));
      expect(all, `d = ${d}`).toEqual(["holds", "holds", "holds"]);
      const { word } = proximal.evidence as { word: { moves: number[]; matrix: number[][] } };
      expect(word.matrix).toEqual(word.moves.slice(1).reduce((m, i) => times(cycle(d)[i], m), cycle(d)[word.moves[0]]));
      const moduli = new EigenvalueDecomposition(new Matrix(word.matrix));
      const sizes = moduli.realEigenvalues
        .map((re, i) => Math.hypot(re, moduli.imaginaryEigenvalues[i]))
        .sort((a, b) => b - a);
      expect(sizes[0]).toBeGreaterThan(sizes[1] * 1.000001);
    }
  });

  it("decides a set with determinant -1", () => {
    const reflection = blocks([[-1]], unit(2));
    const { all } = verdicts(...cycle(3), reflection);
    expect(all).toEqual(["holds", "holds", "holds"]);
  });

  it("names an invariant rational subspace", () => {
    const { all, strong } = verdicts(blocks(cat, [[1]]), blocks(other, [[1]]));
    expect(all).toEqual(["fails", "holds", "fails"]);
    expect(strong.evidence.subspace).toBeDefined();
    // Not semisimple: block triangular, the corner not removable.
    const shear = [
      [2, 1, 1],
      [1, 1, 0],
      [0, 0, 1],
    ];
    const triangular = verdicts(shear, blocks(other, [[1]]));
    expect(triangular.all).toEqual(["fails", "holds", "fails"]);
    expect(triangular.strong.evidence.subspace).toEqual([
      [1, 0, 0],
      [0, 1, 0],
    ]);
  });

  it("recognises unipotent and signed triangular sets", () => {
    const { all } = verdicts(elementary(3, 0, 1), elementary(3, 1, 2), blocks([[-1]], unit(2)));
    expect(all).toEqual(["fails", "fails", "fails"]);
  });

  it("recognises finite groups, listed or by the form they keep", () => {
    const small = verdicts(permutation([1, 2, 0]), permutation([1, 0, 2]));
    expect(small.all).toEqual(["fails", "fails", "fails"]);
    expect(small.strong.evidence.order).toBe(6);
    const signed = verdicts(permutation([1, 2, 3, 0]), permutation([1, 0, 2, 3]), blocks([[-1]], unit(3)));
    expect(signed.strong.evidence.order).toBe(384);
    // 2^8 8! elements, and 8! of them: beyond any list.
    const long = [permutation([1, 2, 3, 4, 5, 6, 7, 0]), permutation([1, 0, 2, 3, 4, 5, 6, 7])];
    for (const set of [[...long, blocks([[-1]], unit(7))], long]) {
      const { all, strong } = verdicts(...set);
      expect(all).toEqual(["fails", "fails", "fails"]);
      expect(strong.evidence.form).toBeDefined();
    }
  });

  it("recognises a finite union of subspaces that is permuted", () => {
    const { all, strong } = verdicts(blocks(cat, unit(2)), blocks(other, unit(2)), permutation([2, 3, 0, 1]));
    expect(all).toEqual(["fails", "holds", "fails"]);
    expect(strong.evidence.subspaces).toHaveLength(2);
  });

  it("finds a real eigenspace where multiplication by sqrt(2) commutes", () => {
    // GL_2(Z[sqrt 2]) on Z^4: a + b sqrt 2 becomes [[a, 2b], [b, a]].
    const root: Small = [
      [0, 2],
      [1, 0],
    ];
    const upper = [
      [1, 0, 0, 2],
      [0, 1, 1, 0],
      [0, 0, 1, 0],
      [0, 0, 0, 1],
    ];
    expect(upper.slice(0, 2).map((row) => row.slice(2))).toEqual(root);
    const { all, strong } = verdicts(upper, tensor(cat, unit(2)), tensor(other, unit(2)));
    expect(all[0]).toBe("fails");
    expect(all[2]).toBe("undecided");
    expect(strong.evidence.realEigenvalues).toBe(2);
  });

  it("knows that a commuting complex structure excludes proximality", () => {
    const upper = [
      [1, 0, 0, -1],
      [0, 1, 1, 0],
      [0, 0, 1, 0],
      [0, 0, 0, 1],
    ];
    const { all } = verdicts(upper, tensor(cat, unit(2)), tensor(turn, unit(2)));
    expect(all).toEqual(["undecided", "fails", "undecided"]);
  });

  it("knows that equal blocks exclude proximality", () => {
    for (const copies of [2, 4]) {
      const { all } = verdicts(tensor(unit(copies), cat), tensor(unit(copies), other));
      expect(all).toEqual(["fails", "fails", "fails"]);
    }
  });

  it("decides symplectic and orthogonal sets by the form that they keep", () => {
    // Transvections x -> x + w(x, v) v of the form w(e1, e2) = w(e3, e4) = 1.
    const w = [
      [0, 1, 0, 0],
      [-1, 0, 0, 0],
      [0, 0, 0, 1],
      [0, 0, -1, 0],
    ];
    const transvection = (v: number[]) => {
      const row = v.map((_, j) => -v.reduce((sum, x, i) => sum + x * w[i][j], 0));
      return unit(4).map((r, i) => r.map((x, j) => x + v[i] * row[j]));
    };
    const vectors = [
      [1, 0, 0, 0],
      [0, 1, 0, 0],
      [0, 0, 1, 0],
      [0, 0, 0, 1],
      [1, 0, 1, 0],
    ];
    const symplectic = verdicts(...vectors.map(transvection));
    expect(symplectic.all).toEqual(["holds", "holds", "holds"]);
    expect(symplectic.strong.reason).toContain("Sp_4");
    const orthogonal = verdicts(onForms(cat), onForms(other));
    expect(orthogonal.all).toEqual(["holds", "holds", "holds"]);
    expect(orthogonal.strong.evidence.form).toBeDefined();
  });

  it("says undecided, and what was tried, for a tensor product", () => {
    const id = unit(2);
    const { strong, proximal } = verdicts(tensor(cat, id), tensor(other, id), tensor(id, cat), tensor(id, other));
    expect(strong.verdict).toBe("undecided");
    expect(strong.evidence.tried).toBeDefined();
    expect(proximal.verdict).toBe("holds");
  });

  it("decides a single matrix", () => {
    const { all } = verdicts([
      [0, 0, 1],
      [1, 0, 1],
      [0, 1, 0],
    ]);
    expect(all).toEqual(["fails", "holds", "undecided"]);
  });
});

describe("its tools", () => {
  it("agrees with the exact dimension of the adjoint algebra", () => {
    const sets: Small[][] = [
      cycle(3),
      [onForms(cat), onForms(other)],
      [blocks(cat, [[1]]), blocks(other, [[1]])],
      [permutation([1, 2, 0]), elementary(3, 0, 1)],
    ];
    for (const set of sets) {
      const images = set.map((a) => adjoint(big(a)));
      const moves = walkOf(set).moves.map((move, i) => ({ ...move, matrix: images[i] }));
      expect(fullAlgebraPrime(images) !== undefined).toBe(algebraBasis(moves).length === 64);
    }
  });

  it("has homomorphisms for representations", () => {
    const [a, b] = [cycle(4)[0], times(cycle(4)[1], cycle(4)[3])];
    const product = (x: bigint[][], y: bigint[][]) =>
      x.map((row) => y.map((_, j) => row.reduce((sum, e, k) => sum + e * y[k][j], 0n)));
    for (const map of [adjoint, (m: bigint[][]) => square(m, 1n), (m: bigint[][]) => square(m, -1n)]) {
      expect(map(big(times(a, b)))).toEqual(product(map(big(a)), map(big(b))));
    }
  });

  it("works modulo primes", () => {
    for (const p of PRIMES) for (let k = 2; k * k <= p; k++) expect(p % k).not.toBe(0);
  });

  it("squares roots, and proves dominance only where it is", () => {
    // (x - 2)(x - 3)(x + 1)
    expect(squaredRoots([6n, 1n, -4n, 1n])).toEqual([-36n, 49n, -14n, 1n]);
    expect(dominance(big(blocks(cat, cat)), 8)).toBeUndefined();
    expect(dominance(big(turn), 8)).toBeUndefined();
    expect(
      dominance(
        big([
          [1, 1],
          [0, -1],
        ]),
        8,
      ),
    ).toBeUndefined();
    expect(dominance(big(cat), 8)?.power).toBeLessThanOrEqual(2);
    expect(characteristicPolynomial(big(cat))).toEqual([1n, -3n, 1n]);
  });

  it("counts real roots and tells the quaternions from matrix algebras", () => {
    expect(realRoots([-2n, 0n, 1n])).toEqual({ count: 2 });
    expect(realRoots([-6n, 11n, -6n, 1n])).toMatchObject({ count: 3 });
    expect(realRoots([1n, 0n, 1n])).toEqual({ count: 0 });
    const i = tensor(turn, unit(2));
    const j = tensor(
      [
        [1, 0],
        [0, -1],
      ],
      turn,
    );
    const k = times(i, j);
    expect(isDivisionAlgebra([unit(4), i, j, k].map(big))).toBe(true);
    const m = tensor(swap, unit(2));
    expect(isDivisionAlgebra([unit(4), i, m, times(i, m)].map(big))).toBe(false);
  });
});
