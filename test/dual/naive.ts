/** The dual walk in plain TypeScript, on exact frequencies and with phases from exact fractions: for comparison. */
import { exactRational } from "../../src/exact/number.js";
import { Rational } from "../../src/exact/rational.js";
import { parseWalk } from "../../src/walk/parse.js";
import type { Move, Observable, Start, Term, Walk } from "../../src/walk/walk.js";

export interface Complex {
  re: number;
  im: number;
}
export type Table = Map<string, { k: bigint[]; c: Complex }>;

/** exp(2 pi i r) of an exact fraction; Math's functions are right to an ulp or so, enough for a test. */
export function phase(r: Rational): Complex {
  const x = 2 * Math.PI * r.mod1().toNumber();
  return { re: Math.cos(x), im: Math.sin(x) };
}

export function dot(k: readonly bigint[], x: readonly Rational[]): Rational {
  return k.reduce((sum, kj, j) => sum.add(Rational.of(kj).mul(x[j]!)), Rational.ZERO);
}

export interface NaiveMove {
  matrix: bigint[][];
  weight: number;
  translation?: Rational[];
}

export function naiveStep(from: Table, moves: NaiveMove[]): Table {
  const to: Table = new Map();
  for (const { k, c } of from.values()) {
    for (const { matrix, weight, translation } of moves) {
      const image = matrix.map((row) => row.reduce((s, m, j) => s + m * k[j]!, 0n));
      const p = translation === undefined ? { re: 1, im: 0 } : phase(dot(k, translation));
      const old = to.get(image.join()) ?? { k: image, c: { re: 0, im: 0 } };
      old.c = {
        re: old.c.re + weight * (c.re * p.re - c.im * p.im),
        im: old.c.im + weight * (c.re * p.im + c.im * p.re),
      };
      to.set(image.join(), old);
    }
  }
  return to;
}

export function naiveTable(terms: { k: bigint[]; c: Complex }[]): Table {
  const table: Table = new Map();
  for (const { k, c } of terms) {
    const old = table.get(k.join())?.c ?? { re: 0, im: 0 };
    table.set(k.join(), { k, c: { re: old.re + c.re, im: old.im + c.im } });
  }
  return table;
}

/** Sum of a_k conj(b_k), real part. */
export function naivePair(a: Table, b: Table): number {
  let sum = 0;
  for (const [key, { c }] of a) {
    const other = b.get(key)?.c;
    if (other !== undefined) sum += c.re * other.re + c.im * other.im;
  }
  return sum;
}

export function move(
  matrix: (number | bigint)[][],
  weight: Rational,
  determinant: 1 | -1 = 1,
  translation?: Rational[],
): Move {
  return {
    label: "",
    weight,
    probability: weight,
    matrix: matrix.map((row) => row.map(BigInt)),
    determinant,
    ...(translation === undefined ? {} : { translation: translation.map((x) => exactRational(x)) }),
  };
}

const written = (terms: readonly Term[]) =>
  terms.map((t) => ({ frequency: t.frequency, cos: t.cos.text, sin: t.sin.text }));
const texts = (xs: readonly { text: string }[]) => xs.map((x) => x.text);

/** A walk as parseWalk makes it. */
export function walkOf(moves: Move[], start: Start = { type: "uniform" }, observables: Observable[] = []): Walk {
  return parseWalk({
    torwend: 1,
    title: "stirred tray",
    dimension: moves[0]!.matrix.length,
    moves: moves.map((m, i) => ({
      label: `stroke ${i}`,
      weight: m.weight.toString(),
      matrix: m.matrix,
      ...(m.translation === undefined ? {} : { translation: texts(m.translation) }),
    })),
    start:
      start.type === "point"
        ? texts(start.point)
        : start.type === "density"
          ? { density: written(start.terms) }
          : { uniform: true },
    ...(observables.length === 0
      ? {}
      : {
          observables: observables.map((f) =>
            f.type === "terms"
              ? { label: f.label, terms: written(f.terms) }
              : { label: f.label, box: { low: texts(f.low), high: texts(f.high) } },
          ),
        }),
  });
}

export const point = (...xs: [number, number][]): Start => ({
  type: "point",
  point: xs.map(([a, b]) => exactRational(Rational.of(a, b))),
});
export const r = (a: number, b = 1): Rational => Rational.of(a, b);
export const number = (a: number, b = 1) => exactRational(Rational.of(a, b));
