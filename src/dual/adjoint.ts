/** Whether the averaging operator is its own adjoint: the moves and their inverses, with weights, are one list. */
import { Rational } from "../exact/rational.js";
import { type IntegerMatrix, inverseMatrix } from "../walk/integers.js";
import type { Walk } from "../walk/walk.js";

function describe(matrix: IntegerMatrix, translation: readonly Rational[]): string {
  return `${matrix.join(";")}|${translation.map((x) => x.mod1()).join(";")}`;
}

/** Proved: with an irrational translation the answer is false, although it may be true. */
export function isSelfAdjoint(walk: Walk): boolean {
  const balance = new Map<string, Rational>();
  const add = (name: string, p: Rational) => balance.set(name, (balance.get(name) ?? Rational.ZERO).add(p));
  for (const { matrix, translation, probability } of walk.moves) {
    const b = translation?.map((x) => x.rational) ?? matrix.map(() => Rational.ZERO);
    if (b.some((x) => x === undefined)) return false;
    const exact = b as Rational[];
    const back = inverseMatrix(matrix);
    const shift = back.map((row) =>
      row.reduce((s, e, j) => s.sub(Rational.of(e).mul(exact[j] as Rational)), Rational.ZERO),
    );
    add(describe(matrix, exact), probability);
    add(describe(back, shift), probability.neg());
  }
  return [...balance.values()].every((p) => p.sign() === 0);
}
