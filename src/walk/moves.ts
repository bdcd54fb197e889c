/** The moves of a document whose shape is right: matrices, weights, translations. */
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { below, type Findings, shown } from "./findings.js";
import { determinant } from "./integers.js";
import { numberAt, numbersAt, sizeIs, type WrittenNumber } from "./numbers.js";
import type { Move } from "./walk.js";

export interface WrittenMove {
  readonly label?: string;
  readonly weight?: string | number;
  readonly matrix: readonly (readonly (string | number)[])[];
  readonly translation?: readonly WrittenNumber[];
}

const isSquare = (rows: readonly (readonly unknown[])[]) => rows.every((row) => row.length === rows.length);

/**
 * The dimension that sizes are judged by: the stated one, unless every matrix is square of
 * one other size; undefined where neither is to be had.
 */
export function effectiveDimension(
  stated: unknown,
  moves: readonly WrittenMove[],
  findings: Findings,
): number | undefined {
  const given = findings.clean("/dimension") && typeof stated === "number" ? stated : undefined;
  const sizes = new Set(
    moves.map((move, i) => {
      const readable =
        findings.clean(below("/moves", i, "matrix")) && move.matrix !== undefined && isSquare(move.matrix);
      return readable ? move.matrix.length : undefined;
    }),
  );
  const [size] = sizes;
  if (sizes.size !== 1 || size === undefined || size < 2 || size > 8 || size === given) return given;
  if (given !== undefined) {
    const matrices = `matrices of ${given} rows of ${given} integers`;
    const found = moves.length === 1 ? "the matrix is" : "every matrix is";
    findings.add("/dimension", `found ${given}, but ${found} ${size} x ${size}; accepted: ${size}, or ${matrices}`);
  }
  return size;
}

function matrixAt(rows: WrittenMove["matrix"], pointer: string, d: number | undefined, findings: Findings) {
  if (!findings.clean(pointer)) return undefined;
  if (!sizeIs(rows, pointer, d, `rows of ${d} integers`, findings)) return undefined;
  const fits = rows.map((row, i) => sizeIs(row, below(pointer, i), d ?? rows.length, "integers", findings));
  if (rows.length === 0 || fits.includes(false)) return undefined;
  const matrix = rows.map((row) => row.map((c) => BigInt(c)));
  const value = determinant(matrix);
  if (value === 1n || value === -1n) return { matrix, determinant: value === 1n ? (1 as const) : (-1 as const) };
  findings.add(pointer, `found determinant ${value}; accepted: 1 or -1`);
  return undefined;
}

function weightAt(weight: string | number, pointer: string, findings: Findings): Rational | undefined {
  const number = numberAt(weight, pointer, findings);
  if (number === undefined) return undefined;
  if (number.rational !== undefined && number.rational.sign() > 0) return number.rational;
  const why = number.rational === undefined ? ", which is not proved rational" : "";
  const what = number.kind === "algebraic" ? ", which is irrational" : why;
  findings.add(pointer, `found ${shown(weight)}${what}; accepted: a positive rational such as "1/2", "0.25" or 3`);
  return undefined;
}

/** A weight on every move, or on none. */
function checkMixture(moves: readonly WrittenMove[], findings: Findings): void {
  const without = moves.flatMap((move, i) => (move.weight === undefined ? [i] : []));
  const broken = moves.some((move) => Object.keys(move).length === 0);
  if (broken || without.length === 0 || without.length === moves.length) return;
  const names = without.length === 1 ? `move ${without[0]}` : `moves ${without.join(", ")}`;
  findings.add(
    "/moves",
    `found no weight on ${names}, but on the others; accepted: a weight on every move, or on none (equal weights)`,
  );
}

const isWhole = (x: ExactNumber) => x.rational?.isInteger() === true;

/** Valid only where `findings` has stayed empty. */
export function readMoves(moves: readonly WrittenMove[], d: number | undefined, findings: Findings): Move[] {
  const read = moves.map((move, i) => {
    const at = (field: string) => below("/moves", i, field);
    const matrix = move.matrix ? matrixAt(move.matrix, at("matrix"), d, findings) : undefined;
    const weight = move.weight === undefined ? Rational.ONE : weightAt(move.weight, at("weight"), findings);
    const translation = move.translation ? numbersAt(move.translation, at("translation"), d, findings) : undefined;
    return { label: move.label ?? `move ${i}`, matrix, weight, translation };
  });
  checkMixture(moves, findings);
  const total = read.reduce((sum, { weight }) => sum.add(weight ?? Rational.ONE), Rational.ZERO);
  return read.flatMap(({ label, matrix, weight, translation }) => {
    if (matrix === undefined || weight === undefined) return [];
    // On the torus a translation by integers is none.
    const moved = translation !== undefined && !translation.every(isWhole);
    return [{ label, weight, probability: weight.div(total), ...matrix, ...(moved && { translation }) }];
  });
}
