/** The moves on (Z/q)^d: whether q fits the translations, and the maps' residues. */
import { OptionsError } from "../errors.js";
import { gcdBig, Rational } from "../exact/rational.js";
import type { ResidueMap } from "../kernel/finite.js";
import type { Walk } from "../walk/walk.js";

/** Common denominator of all translations; undefined, with the move to blame, where one is not proved rational. */
function translationDenominator(walk: Walk): { denominator: bigint } | { label: string; text: string } {
  let denominator = 1n;
  for (const move of walk.moves) {
    for (const x of move.translation ?? []) {
      if (x.rational === undefined) return { label: move.label, text: x.text };
      denominator *= x.rational.den / gcdBig(denominator, x.rational.den);
    }
  }
  return { denominator };
}

/**
 * The moduli that a walk accepts are the multiples of the returned number: points whose
 * q-multiple is whole stay such points exactly if every translation's denominator divides q.
 * undefined: none, since a translation is not proved rational.
 */
export function modulusUnit(walk: Walk): bigint | undefined {
  const found = translationDenominator(walk);
  return "denominator" in found ? found.denominator : undefined;
}

/** @throws OptionsError saying which moduli are accepted */
export function checkModulus(walk: Walk, modulus: unknown): number {
  const found = translationDenominator(walk);
  const refuse = (accepted: string): never => {
    throw new OptionsError([{ pointer: "--modulus", message: `found ${modulus ?? "nothing"}; accepted: ${accepted}` }]);
  };
  if (!("denominator" in found)) {
    const why = `the translation ${found.text} of move ${JSON.stringify(found.label)} is not proved rational`;
    return refuse(`none for this walk, since ${why}: no denominator is kept`);
  }
  const unit = found.denominator;
  const whole = Number.isSafeInteger(modulus) && (modulus as number) >= 1;
  if (!whole && unit === 1n) return refuse("a whole number from 1 up");
  if (!whole || BigInt(modulus as number) % unit !== 0n) {
    return refuse(`multiples of ${unit}, the common denominator of the moves' translations`);
  }
  return modulus as number;
}

function residue(x: bigint, q: bigint): number {
  const r = x % q;
  return Number(r < 0n ? r + q : r);
}

/** One map for each move, in the walk's order. `q` must have passed `checkModulus`. */
export function residueMaps(walk: Walk, q: number): ResidueMap[] {
  const n = BigInt(q);
  return walk.moves.map(({ matrix, translation }) => ({
    matrix: matrix.map((row) => row.map((x) => residue(x, n))),
    translation: matrix.map((_, i) => {
      const x = translation?.[i]?.rational ?? Rational.ZERO;
      return residue((x.num * n) / x.den, n);
    }),
  }));
}

/** g after f is the identity of (Z/q)^d. */
function undoes(g: ResidueMap, f: ResidueMap, q: number): boolean {
  const d = f.matrix.length;
  const n = BigInt(q);
  for (let i = 0; i < d; i++) {
    const row = (g.matrix[i] as number[]).map(BigInt);
    for (let j = 0; j <= d; j++) {
      let sum = j === d ? BigInt(g.translation[i] as number) : 0n;
      for (let k = 0; k < d; k++) sum += row[k]! * BigInt((j === d ? f.translation[k] : f.matrix[k]![j]) as number);
      if (sum % n !== (i === j ? 1n % n : 0n)) return false;
    }
  }
  return true;
}

/**
 * Whether the averaged operator on (Z/q)^d is symmetric because the maps, equal ones taken
 * together, come in pairs of inverses of equal weight. Exact; modulo q more maps may be
 * inverse to each other than on the torus.
 */
export function closedUnderInverse(maps: readonly ResidueMap[], weights: readonly Rational[], q: number): boolean {
  const distinct = new Map<string, { map: ResidueMap; weight: Rational }>();
  for (const [i, map] of maps.entries()) {
    const key = JSON.stringify(map);
    const before = distinct.get(key);
    const weight = weights[i] as Rational;
    distinct.set(key, { map, weight: before === undefined ? weight : before.weight.add(weight) });
  }
  const all = [...distinct.values()];
  return all.every((a) => all.some((b) => a.weight.equals(b.weight) && undoes(b.map, a.map, q)));
}
