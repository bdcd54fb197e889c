/**
 * Free generators certified by ping-pong on directions: disjoint arcs X_g with rational ends,
 * one for each generator and inverse, such that g takes all directions outside X_(g^-1) into X_g.
 * Floating point proposes the arcs, from where reduced words send a direction; integers check them.
 */
import { inverse2, type Matrix2, multiply2 } from "./words.js";

/** A direction: a primitive integer vector up to sign, here with y > 0, or (1, 0). */
export type Direction = readonly [bigint, bigint];

export interface Arc {
  readonly matrix: Matrix2;
  /** Directions from `from`, itself included, counterclockwise up to `to`, itself excluded. */
  readonly from: Direction;
  readonly to: Direction;
}

export interface Freedom {
  /** One of each generator and its inverse. */
  readonly generators: readonly Matrix2[];
  readonly arcs: readonly Arc[];
}

const upright = ([x, y]: Direction): Direction => (y < 0n || (y === 0n && x < 0n) ? [-x, -y] : [x, y]);
const cross = (a: Direction, b: Direction) => a[0] * b[1] - a[1] * b[0];
const apply = (m: Matrix2, [x, y]: Direction): Direction => upright([m[0] * x + m[1] * y, m[2] * x + m[3] * y]);
const equal = (a: Direction, b: Direction) => cross(a, b) === 0n;

/** Whether b comes no later than c, counterclockwise from a; a itself is first. */
function ordered(a: Direction, b: Direction, c: Direction): boolean {
  const after = (x: Direction) => cross(a, x) < 0n; // past the angle pi, where directions begin anew
  if (equal(a, b)) return true;
  if (equal(a, c)) return false;
  if (after(b) !== after(c)) return !after(b);
  return cross(b, c) >= 0n;
}

/** The image of the directions outside the inverse's arc lies within the arc. */
function plays({ matrix, from, to }: Arc, inverse: Arc): boolean {
  const start = apply(matrix, inverse.to);
  const end = apply(matrix, inverse.from);
  // [start, end) within [from, to): in this order from `from`, with `to`, if it is `from`, at the end.
  const within = ordered(from, start, to) && !equal(start, to) && ordered(from, start, end) && !equal(start, end);
  return within && (equal(end, to) || (ordered(from, end, to) && !equal(end, from)));
}

const isPlusMinus = (a: Matrix2, b: Matrix2) => a.every((x, i) => x === b[i]) || a.every((x, i) => x === -b[i]!);

const MOST_WORDS = 3000;
const DOUBLINGS = 5;
const SEEDS: readonly Direction[] = [
  [1597n, 987n],
  [-1597n, 2584n],
];

/** Directions to which reduced words send where their last letter leads in the long run, with their first letters. */
function landings(set: readonly Matrix2[], inverses: readonly number[]): { slope: Direction; first: number }[] {
  const ends = set.map((m) => {
    let power = m;
    for (let k = 0; k < DOUBLINGS; k++) power = multiply2(power, power);
    return SEEDS.map((seed) => apply(power, seed));
  });
  let words = set.map((matrix, i) => ({ matrix, first: i, last: i }));
  const out: { slope: Direction; first: number }[] = [];
  for (;;) {
    for (const w of words) for (const end of ends[w.last]!) out.push({ slope: apply(w.matrix, end), first: w.first });
    if (words.length * (set.length - 1) > MOST_WORDS) return out;
    words = words.flatMap((w) =>
      set.flatMap((m, i) =>
        i === inverses[w.last] ? [] : [{ matrix: multiply2(w.matrix, m), first: w.first, last: i }],
      ),
    );
  }
}

/** The direction with the smallest entries from a to b, counterclockwise, both ends excluded. */
function simplestBetween(a: Direction, b: Direction): Direction | undefined {
  for (let size = 1n; size <= 64n; size++) {
    for (let t = -size; t <= size; t++) {
      for (const v of [
        [t, size],
        [size, t],
      ] as const) {
        const d = upright(v);
        if (!equal(d, a) && !equal(d, b) && ordered(a, d, b)) return d;
      }
    }
  }
  return undefined;
}

/**
 * Whether the matrices (determinant 1) are free generators and their inverses, each once, up
 * to sign; undefined where that was not certified.
 */
export function certifyFree(set: readonly Matrix2[]): Freedom | undefined {
  const inverses = set.map((m) => set.findIndex((x) => isPlusMinus(x, inverse2(m))));
  const paired = inverses.every((j, i) => j >= 0 && j !== i && inverses[j] === i);
  if (set.length < 4 || !paired || set.some(([a, b, c, d]) => a * d - b * c !== 1n)) return undefined;
  const points = landings(set, inverses).sort((p, q) => {
    const s = cross(p.slope, q.slope);
    return s > 0n ? -1 : s < 0n ? 1 : 0;
  });
  const begins = points.flatMap((p, i) => (points.at(i - 1)?.first === p.first ? [] : [i]));
  if (begins.length !== set.length) return undefined;
  const cuts: Direction[] = [];
  for (const i of begins) {
    const cut = simplestBetween(points.at(i - 1)!.slope, points[i]!.slope);
    if (cut === undefined) return undefined;
    cuts.push(cut);
  }
  const arcs = set.map((matrix, i): Arc | undefined => {
    const at = begins.findIndex((b) => points[b]!.first === i);
    return at < 0 ? undefined : { matrix, from: cuts[at]!, to: cuts[(at + 1) % cuts.length]! };
  });
  if (arcs.some((a) => a === undefined)) return undefined;
  const all = arcs as Arc[];
  // Cuts in cyclic order make the arcs disjoint.
  const turned = cuts.every((c, i) => i < 2 || ordered(cuts[0]!, cuts[i - 1]!, c));
  const distinct = cuts.every((c, i) => cuts.every((d, j) => i === j || !equal(c, d)));
  if (!turned || !distinct || !all.every((a, i) => plays(a, all[inverses[i]!]!))) return undefined;
  return { generators: set.filter((_, i) => i < inverses[i]!), arcs: all };
}
