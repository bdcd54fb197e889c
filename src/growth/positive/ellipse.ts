/**
 * Bounds on an ellipse around [-1, 1], or the product of such ellipses around the box: what
 * interpolation needs to know of a function away from it.
 *
 * One coordinate: by the maximum principle the ellipse's edge is enough; it is cut into arcs,
 * each inside a disc, and a disc's image under a move has a simple bound. More coordinates: the
 * ellipses are inside discs, linear forms on products of discs have obvious bounds, and the disc
 * of radius b is inside the ellipse of parameter b + sqrt(1 + b^2).
 *
 * All in doubles. Every quantity is a few operations away from integers with relative errors
 * of 2^-52 each; sums that cancel are asked to keep a thousandth of their parts, so that
 * relative errors stay below 1e-12, and SLACK covers them.
 */
import { bitLength } from "../../exact/rational.js";
import type { Real } from "../../kernel/real.js";
import { degreeOf, type Polynomial } from "./chebyshev.js";
import { coneRows, type PositiveCone } from "./cone.js";

const ARCS = 96;
/** Natural logarithm of the widest ellipse's parameter: each further point gains 8 bits. */
const WIDEST = 6.5;
const SLACK = 1 + 1e-9;

export interface MoveBound {
  /** log2 of an s such that the move takes the ellipse into the ellipse of parameter s. */
  readonly image: number;
  /** Bounds of the stretch factor |c z + d| / scale on the ellipse. */
  readonly least: number;
  readonly most: number;
}

export interface Ellipse {
  /** log2 of the parameter r: half axes (r +- 1/r) / 2. */
  readonly r: number;
  readonly moves: readonly MoveBound[];
}

/** Parameter of the ellipse with foci +-1 through points whose distances from the foci add up to `sum`. */
export function parameter(sum: number): number {
  return (sum + Math.sqrt(Math.max(0, sum * sum - 4))) / 2;
}

/** log2 of the ellipse's parameter that contains the image, one coordinate; undefined where a pole is near. */
function imageOfEllipse([[a, b], [c, d]]: readonly (readonly number[])[], r: number, real: Real): number | undefined {
  const [long, short] = [(r + 1 / r) / 2, (r - 1 / r) / 2];
  // The edge moves at most as fast as its long half axis: half an arc's length.
  const radius = ((long * Math.PI) / (2 * ARCS)) * SLACK;
  let furthest = 0;
  for (let j = 0; j < ARCS; j++) {
    const angle = ((j + 0.5) * Math.PI) / ARCS;
    const [x, y] = [long * real.cos(angle), short * real.sin(angle)];
    const [p, q] = [c * x + d, c * y];
    const size = Math.sqrt(p * p + q * q);
    // |A z - A w| = |z - w| / (|c z + d| |c w + d|), the determinant +-1; and the rounding of the image.
    const rounding = (1e-12 * (Math.abs(a) * long + Math.abs(b))) / size;
    const spread = radius / (size * (size - Math.abs(c) * radius)) + rounding;
    if (!(spread > 0 && Number.isFinite(spread))) return undefined;
    const [u, v] = [a * x + b, a * y];
    const [s, t] = [(u * p + v * q) / (size * size), (v * p - u * q) / (size * size)];
    const sum = Math.sqrt((s - 1) * (s - 1) + t * t) + Math.sqrt((s + 1) * (s + 1) + t * t);
    furthest = Math.max(furthest, sum + 2 * spread);
  }
  return parameter(furthest * SLACK);
}

/** Bounds of the last form's real part and modulus on the product of discs of radius `long`. */
function lastForm(rows: readonly (readonly number[])[], long: number): { least: number; most: number } {
  const last = rows[rows.length - 1];
  const slope = last.slice(0, -1).reduce((s, x) => s + Math.abs(x), 0) * long;
  const middle = last[last.length - 1];
  return { least: middle - slope * SLACK, most: (middle + slope) * SLACK };
}

/** A radius that contains the images' coordinates of the product of discs of radius `long`. */
export function imageOfDiscs(rows: readonly (readonly number[])[], long: number): number {
  const { least } = lastForm(rows, long);
  const tops = rows
    .slice(0, -1)
    .map((row) => row.reduce((s, x, k) => s + Math.abs(x) * (k < row.length - 1 ? long : 1), 0));
  return least > 0 ? (Math.max(...tops) / least) * SLACK : Number.POSITIVE_INFINITY;
}

/** The bounds for the ellipse of parameter r, or undefined where a pole is too near. */
function around(cone: PositiveCone, r: number, real: Real): Ellipse | undefined {
  const log2 = (x: number) => real.log(x) / Math.LN2;
  const long = (r + 1 / r) / 2;
  const moves: MoveBound[] = [];
  for (const move of cone.moves) {
    const rows = coneRows(cone, move);
    const { least, most } = lastForm(rows, long);
    // The real part of the last form is positive on the ellipse: no pole, and a logarithm.
    if (!(least > 1e-3 * most)) return undefined;
    const disc = imageOfDiscs(rows, long);
    const image = cone.coordinates === 1 ? imageOfEllipse(rows, r, real) : disc + Math.sqrt(1 + disc * disc);
    if (image === undefined) return undefined;
    moves.push({ image: log2(image * SLACK), least: least / SLACK, most });
  }
  return { r: log2(r / SLACK), moves };
}

/** A wide ellipse on which everything is bounded, or undefined where even a narrow one meets a pole. */
export function wideEllipse(cone: PositiveCone, real: Real): Ellipse | undefined {
  // The disc |u| < reach is mapped into itself: its ellipse, less a part of its logarithm.
  // No wider than serves: roundings of high coefficients are large far away.
  const log = Math.min(real.log(parameter(2 * cone.reach)), WIDEST);
  for (const part of [0.85, 0.7, 0.5, 0.3]) {
    const found = around(cone, real.exp(part * log), real);
    if (found !== undefined) return found;
  }
  return undefined;
}

/** log2 of a bound of |h| on the ellipse of parameter 2^r: sum |c_k| r^(k_1 + ...), each term up to a power of two. */
export function polynomialBound(h: Polynomial, r: number, p: number, real: Real): number {
  let top = Number.NEGATIVE_INFINITY;
  const terms = h.coefficients.map((c, index) =>
    c === 0n ? Number.NEGATIVE_INFINITY : bitLength(c) - p + degreeOf(index, h.size) * r,
  );
  for (const t of terms) top = Math.max(top, t);
  if (top === Number.NEGATIVE_INFINITY) return -1e9;
  const sum = terms.reduce((s, t) => s + real.exp((t - top) * Math.LN2), 0);
  return top + real.log(sum * SLACK) / Math.LN2 + 1e-6;
}
