/**
 * Dimension 3 and more: what can be decided about the group of the moves exactly, in this
 * order. V = R^d; A is the algebra that the products span over Q.
 *
 * 1. A is not semisimple: rad(A) V is an invariant rational subspace.
 * 2. A is semisimple, its commutant C over Q. V is irreducible exactly if C (over R) is a
 *    division algebra: R, the complex numbers or the quaternions (Frobenius). A matrix of C
 *    that is not scalar and has a real eigenvalue has an invariant eigenspace.
 *    (Before: a group that keeps a definite form is finite; looked for where no product has
 *    |trace| > d, which a finite group has not.)
 * 3. C = Q. The group is finite exactly if it keeps a definite form (an average of one is
 *    kept, and the form is unique up to a factor). If infinite, the Lie algebra of its
 *    Zariski closure is not 0 and invariant under the adjoint action: where that is
 *    irreducible on sl_d, or on sp_d or so_d where a form is kept, it is all of that. The
 *    closure then contains SL_d, Sp_d or SO(p, q), p, q >= 1, which act strongly
 *    irreducibly, and Zariski density in them gives a proximal element (Gol'dsheid and
 *    Margulis 1989).
 */
import { transpose } from "../dual/matrix.js";
import type { Move } from "../walk/walk.js";
import { algebraBasis, commutant, definiteForm, imageOf, invariantForms, radical } from "./algebra.js";
import { isDivisionAlgebra, realRoots, withoutRealEigenvalues } from "./division.js";
import { dominanceEvidence, proximalWord } from "./dominant.js";
import { nullSpace } from "./elimination.js";
import { fails, type GroupFinding, holds, undecided } from "./finding.js";
import { characteristicPolynomial, combine, identity, plain, plainMatrix, plainVector, trace } from "./matrix.js";
import { fullAlgebraPrime } from "./norton.js";
import { adjoint, square } from "./representations.js";
import { permutedSubspaces, signedFlag } from "./subspaces.js";
import { longProducts, type Products, productsOf, type Word, wordEvidence } from "./words.js";

type Irreducibility = Pick<GroupFinding, "stronglyIrreducible" | "obstruction"> & {
  /** A proof that every real eigenspace of every product has dimension 2 or more. */
  readonly commuting?: bigint[][];
  /** A theorem by which the group has a proximal element. */
  readonly dense?: string;
};

const MOST_PRODUCTS = 1000;

function subspaceFails(reason: string, evidence: Record<string, unknown>, rational: boolean): Irreducibility {
  return {
    stronglyIrreducible: fails(reason, evidence),
    obstruction: { type: rational ? "rational subspaces" : "real subspace" },
  };
}

function irreducibility(moves: readonly Move[], products: Products): Irreducibility {
  const d = moves[0].matrix.length;
  const basis = algebraBasis(moves);
  const algebra = { dimension: basis.length, of: d * d, basis: basis.map((word) => word.indices) };
  if (basis.length === d * d) return absolutely(moves, products, algebra);
  const rad = radical(basis);
  if (rad.length > 0) {
    const subspace = imageOf(rad);
    return subspaceFails(
      `Every move keeps a rational subspace of dimension ${subspace.length}.`,
      { subspace: plainMatrix(subspace), algebra },
      true,
    );
  }
  const commuting = commutant(moves);
  for (const matrix of commuting) {
    const polynomial = characteristicPolynomial(matrix);
    const scalar = matrix.every((row, i) => row.every((x, j) => x === (i === j ? matrix[0][0] : 0n)));
    const roots = scalar ? undefined : realRoots(polynomial);
    if (roots === undefined || roots.count === 0) continue;
    const evidence = {
      commuting: plainMatrix(matrix),
      characteristicPolynomial: plainVector(polynomial),
      realEigenvalues: roots.count,
      ...(roots.integer === undefined
        ? {}
        : { eigenvalue: plain(roots.integer), subspace: plainMatrix(eigenspace(matrix, roots.integer)) }),
    };
    return subspaceFails(
      "A matrix that is not scalar commutes with every move and has a real eigenvalue, so its eigenspace is an invariant proper subspace.",
      evidence,
      roots.integer !== undefined,
    );
  }
  if (!isDivisionAlgebra(commuting)) {
    return subspaceFails(
      `The matrices that commute with every move form an algebra of dimension ${commuting.length} that is not a division algebra over the reals, so an invariant proper subspace exists.`,
      { commutant: commuting.map(plainMatrix), algebra },
      false,
    );
  }
  const union = permutedSubspaces(moves);
  const witness = commuting.find((m) => m.some((row, i) => row.some((x, j) => i !== j && x !== 0n))) as bigint[][];
  if (union !== undefined) return { ...permuted(union), commuting: witness };
  return {
    commuting: witness,
    stronglyIrreducible: undecided(
      "The moves are irreducible over the reals, but matrices that are not scalar commute with them; whether a finite union of subspaces is kept was not decided.",
      { algebra, commutant: commuting.map(plainMatrix), tried: ["unions of coordinate subspaces"] },
    ),
  };
}

function eigenspace(matrix: readonly (readonly bigint[])[], eigenvalue: bigint): bigint[][] {
  const d = matrix.length;
  return nullSpace(combine(1n, matrix, -eigenvalue, identity(d)), d);
}

function permuted(union: bigint[][][]): Irreducibility {
  return subspaceFails(
    `The moves permute ${union.length} rational subspaces of dimension ${union[0].length}.`,
    { subspaces: union.map(plainMatrix) },
    true,
  );
}

/** The algebra is that of all matrices: V is irreducible, over the complex numbers too. */
function absolutely(moves: readonly Move[], products: Products, algebra: Record<string, unknown>): Irreducibility {
  const d = moves[0].matrix.length;
  const matrices = moves.map((move) => move.matrix);
  // Not definite: that was tried before.
  const [symmetric] = invariantForms(moves, 1n);
  const irreducibleBy = "irreducible: products of moves span all matrices";
  const infinite = infiniteEvidence(products, moves);
  const alternating = symmetric === undefined ? invariantForms(moves, -1n)[0] : undefined;
  const form = symmetric ?? alternating;
  const [group, lie, action] =
    form === undefined
      ? [`SL_${d}`, "the matrices of trace 0", matrices.map(adjoint)]
      : symmetric === undefined
        ? [`Sp_${d}`, "the symmetric square", matrices.map((a) => square(a, 1n))]
        : ["the orthogonal group of the form", "the alternating square", matrices.map((a) => square(a, -1n))];
  const prime = fullAlgebraPrime(action);
  const evidence = {
    algebra,
    infinite,
    ...(form === undefined ? {} : { form: plainMatrix(form) }),
  };
  if (prime !== undefined) {
    const size = action[0].length;
    return {
      stronglyIrreducible: holds(
        `The moves are irreducible, infinite, and act irreducibly on ${lie} (dimension ${size}), so their Zariski closure contains ${symmetric === undefined ? group : "the identity component of the orthogonal group of the form"}, which is strongly irreducible.`,
        { ...evidence, action: { on: lie, dimension: size, algebra: size * size, prime } },
      ),
      dense: `Zariski density in ${group} (Gol'dsheid and Margulis 1989)`,
    };
  }
  const union = permutedSubspaces(moves);
  if (union !== undefined) return permuted(union);
  return {
    stronglyIrreducible: undecided(
      `The moves are irreducible and generate an infinite group, but no proof was found that no finite union of subspaces is kept.`,
      { ...evidence, tried: [irreducibleBy, `irreducible action on ${lie}`, "unions of coordinate subspaces"] },
    ),
  };
}

/** A product with |trace| > d, which no finite group has. */
function largeTrace({ words }: Products): Word | undefined {
  const d = BigInt(words[0].matrix.length);
  return words.find(({ matrix }) => trace(matrix) > d || trace(matrix) < -d);
}

/** A product that no finite group has, or the reason why the group is infinite. */
function infiniteEvidence(products: Products, moves: readonly Move[]): Record<string, unknown> {
  const word = largeTrace(products);
  if (word === undefined)
    return { reason: "an irreducible finite group keeps a definite form, and this one keeps none" };
  return { word: wordEvidence(word, moves), reason: "|trace| > d: some eigenvalue is not of modulus 1" };
}

function transposedMoves(moves: readonly Move[]): Move[] {
  return moves.map((move) => ({ ...move, matrix: transpose(move.matrix) }));
}

function proximality(
  moves: readonly Move[],
  products: Products,
  found: Irreducibility,
): Pick<GroupFinding, "proximal" | "slow"> {
  const proximal = proximalWord([...products.words, ...longProducts(moves, 60)]);
  if (proximal !== undefined) {
    const { word, proof } = proximal;
    return {
      proximal: holds(
        `The product of the moves ${word.indices.map((i) => `"${moves[i].label}"`).join(", ")} has one real simple eigenvalue of largest modulus.`,
        { word: wordEvidence(word, moves), ...dominanceEvidence(proof) },
      ),
      slow: false,
    };
  }
  const flag = signedFlag(moves) ?? signedFlag(transposedMoves(moves));
  if (flag !== undefined) {
    return {
      proximal: fails("In a suitable basis every move is triangular with 1 or -1 on the diagonal.", {
        flag: plainMatrix(flag),
      }),
      slow: true,
    };
  }
  const commuting =
    found.dense === undefined ? (found.commuting ?? withoutRealEigenvalues(commutant(moves))) : undefined;
  if (commuting !== undefined) {
    return {
      proximal: fails(
        "A matrix without real eigenvalues commutes with every move, so every real eigenspace of every product has even dimension.",
        {
          commuting: plainMatrix(commuting),
          characteristicPolynomial: plainVector(characteristicPolynomial(commuting)),
        },
      ),
      slow: false,
    };
  }
  if (found.dense !== undefined) return { proximal: holds(`${found.dense}.`, { theorem: found.dense }), slow: false };
  return {
    proximal: undecided("No product of moves was proved to have one eigenvalue of largest modulus.", {
      tried: `${products.words.length} products, the longest of ${longest(products.words)} moves`,
    }),
    slow: false,
  };
}

function longest(words: readonly Word[]): number {
  return words.reduce((most, word) => Math.max(most, word.indices.length), 0);
}

export function spaceVerdicts(moves: readonly Move[]): GroupFinding {
  const products = productsOf(moves, MOST_PRODUCTS);
  if (products.closed) return finiteGroup(products, moves);
  const form = largeTrace(products) === undefined ? definiteForm(moves) : undefined;
  if (form !== undefined) return orthogonalGroup(form);
  const found = irreducibility(moves, products);
  return { ...found, ...proximality(moves, products, found) };
}

function orthogonalGroup(form: bigint[][]): GroupFinding {
  const reason = "Every move keeps a definite quadratic form with whole coefficients, so the group is finite";
  const evidence = { form: plainMatrix(form), check: "A^T S A = S for every move A" };
  return {
    stronglyIrreducible: fails(`${reason}, and the images of any subspace are finitely many.`, evidence),
    proximal: fails(`${reason}, and every eigenvalue of every product has modulus 1.`, evidence),
    obstruction: { type: "finite group" },
    slow: true,
  };
}

function finiteGroup({ words }: Products, moves: readonly Move[]): GroupFinding {
  const order = words.length;
  const evidence = {
    order,
    elements: words.slice(0, 48).map((word) => ({ moves: word.indices, matrix: plainMatrix(word.matrix) })),
    ...(order > 48 ? { listed: 48 } : {}),
    dimension: moves[0].matrix.length,
  };
  const group = `The moves generate a finite group of order ${order}`;
  return {
    stronglyIrreducible: fails(`${group}, so the images of any subspace are finitely many.`, evidence),
    proximal: fails(`${group}, so every eigenvalue of every product has modulus 1.`, evidence),
    obstruction: { type: "finite group" },
    slow: true,
  };
}
