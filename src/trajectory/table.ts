/** A walk's moves in the form that the trajectory kernels take. */

import { LimitError } from "../errors.js";
import type { ExactNumber } from "../exact/number.js";
import { floorDiv, type Rational } from "../exact/rational.js";
import type { ResidueTable } from "../kernel/residue.js";
import type { WindowTable } from "../kernel/trajectory.js";
import { commonDenominator } from "../walk/denominator.js";
import type { Walk } from "../walk/walk.js";
import { rowSumNorm } from "./consumed.js";

function absolute(x: bigint): bigint {
  return x < 0n ? -x : x;
}

/** Whether the number is an integer, that is zero on the torus. */
function vanishes(x: ExactNumber): boolean {
  return x.rational?.isInteger() ?? false;
}

export interface WindowPlan {
  readonly table: WindowTable;
  /** The walk's distinct translation coordinates: components dimension, dimension + 1, ... of the vector. */
  readonly constants: readonly ExactNumber[];
}

/**
 * Matrices [A | E] of every move, with its translation b = E z in the walk's constants z.
 * @throws LimitError where a row of |A| and |E| sums to more than 2^62
 */
export function windowTable(walk: Walk): WindowPlan {
  const d = walk.dimension;
  const constants: ExactNumber[] = [];
  const known = new Map<string, number>();
  const columns = walk.moves.map((move) =>
    (move.translation ?? []).map((x) => {
      if (vanishes(x)) return -1;
      const at = known.get(x.text) ?? constants.push(x) - 1;
      known.set(x.text, at);
      return at;
    }),
  );
  const inputs = d + constants.length;
  const matrices = new BigInt64Array(walk.moves.length * d * inputs);
  const norms = new Float64Array(walk.moves.length);
  for (const [m, move] of walk.moves.entries()) {
    let norm = 0n;
    for (const [i, row] of move.matrix.entries()) {
      const at = (m * d + i) * inputs;
      const column = columns[m]?.[i] ?? -1;
      let sum = row.reduce((a, b) => a + absolute(b), 0n);
      if (column >= 0) sum += 1n;
      if (sum > norm) norm = sum;
      if (sum > 1n << 62n) continue;
      for (const [j, entry] of row.entries()) matrices[at + j] = entry;
      if (column >= 0) matrices[at + d + column] = 1n;
    }
    if (norm > 1n << 62n) {
      throw new LimitError(
        `move ${m} (${move.label}) has a row whose absolute entries sum to ${norm}; exact trajectories take at most 2^62`,
      );
    }
    // One unit up covers the rounding of the conversion.
    norms[m] = Number(norm) * (1 + Number.EPSILON);
  }
  return { table: { dimension: d, inputs, matrices, norms }, constants };
}

/** The walk on points of one denominator. */
export interface RationalWalk {
  readonly denominator: bigint;
  /** Numerators of the start, in [0, denominator). */
  readonly start: readonly bigint[];
  /** For each move the translation's numerators, in [0, denominator). */
  readonly translations: readonly (readonly bigint[])[];
}

/** The walk on (Z/q)^d, where the start and every translation are rational; q is the least common denominator. */
export function rationalWalk(walk: Walk): RationalWalk | undefined {
  const q = commonDenominator(walk);
  if (q === undefined || walk.start.type !== "point") return undefined;
  // Every number is rational here; the denominator says so.
  const numerators = (row: readonly ExactNumber[]) =>
    row.map((x) => {
      const fraction = (x.rational as Rational).mod1();
      return fraction.num * (q / fraction.den);
    });
  const zeros = new Array<bigint>(walk.dimension).fill(0n);
  return {
    denominator: q,
    start: numerators(walk.start.point),
    translations: walk.moves.map((m) => (m.translation === undefined ? zeros : numerators(m.translation))),
  };
}

function larger(a: bigint, b: bigint): bigint {
  return a > b ? a : b;
}

/** Largest row sum, and one, of a table; of a narrow one. */
const ROWS = 1n << 40n;
const NARROW_ROWS = 1n << 17n;

/** The kernel's table of a rational walk; undefined where numerators or entries are beyond its machine words. */
export function residueTable(walk: Walk, rational: RationalWalk): ResidueTable | undefined {
  const d = walk.dimension;
  const q = rational.denominator;
  if (q >= 1n << 63n) return undefined;
  const matrices = walk.moves.map(({ matrix }) =>
    matrix.map((row) =>
      row.map((a) => {
        const r = a - floorDiv(a, q) * q;
        return 2n * r > q ? r - q : r;
      }),
    ),
  );
  const rows = 1n + matrices.reduce((most, matrix) => larger(most, rowSumNorm(matrix)), 0n);
  if (rows > ROWS) return undefined;
  const narrow = rows <= NARROW_ROWS && 2n * rows * q < 1n << 62n;
  const moves = new BigInt64Array(walk.moves.length * d * (d + 1));
  for (const [m, matrix] of matrices.entries()) {
    for (const [i, row] of matrix.entries()) {
      const negative = narrow ? row.reduce((sum, a) => (a < 0n ? sum - a : sum), 0n) : 0n;
      moves.set([...row, (rational.translations[m]?.[i] ?? 0n) + negative * q], (m * d + i) * (d + 1));
    }
  }
  return { dimension: d, denominator: q, rows, narrow, moves, start: BigInt64Array.from(rational.start) };
}
