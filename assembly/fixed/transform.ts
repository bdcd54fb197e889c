/**
 * The transform: 2 M real digits, packed as M complex numbers d_j + i d_{j+M}, evaluated
 * at the roots of x^M = i. Products of evaluations, transformed back, are the product of
 * the digit polynomials modulo x^{2M} + 1 (a real polynomial modulo x^{2M} + 1 and its
 * complex remainder modulo x^M - i determine one another). So half-length products mod 1
 * come for free: what passes the top wraps with its sign turned.
 *
 * ## Why the rounded result is exact
 * Write u = 2^-53 and |.| for the L2 norm. A complex addition rounds within u of its
 * result, a complex product within sqrt(5) u (Brent, Percival, Zimmermann: Error bounds on
 * complex floating-point multiplication, Math. Comp. 2007), a stored twiddle is within 4 u
 * (see plan.ts). A pass is a unitary map times sqrt(r), so relative L2 errors of passes add.
 * Per pass (products of errors are covered by the final factor):
 *   radix 4: 2 u (two additions) + sqrt(5) u + 4 u      <  8.3 u
 *   radix 2:   u + sqrt(5) u + 4 u, also the lane split <  7.3 u
 *   radix 3: each coefficient of the butterfly is off by at most 5 u, so in Frobenius norm
 *            by 15 u against sqrt(3): 8.7 u + 6.3 u     < 15 u
 *   radix 5: likewise 10 u a coefficient, 50 u against sqrt(5): 22.4 u + 6.3 u < 29 u
 * Let F be the sum over the passes. Both operands come out within F |X|, F |Y| (X, Y the
 * evaluations), so the pointwise products are off, in L1 norm, by (2 F + sqrt(5) u) |X| |Y|
 * (Cauchy and Schwarz), and an output of the inverse transform, being a mean of M terms
 * each turned by a path of roundings, by at most (1/M) times that, plus F times
 * (1/M) |X| |Y|. (Along a path radix 3 costs at most 5 u + 6.3 u and radix 5 at most
 * 10 u + 6.3 u, less than in norm.) Scaling by 1/M costs 2 u more, an addition of pointwise
 * products u each. Since |X| = sqrt(M) |x|, a coefficient of the sum of products x y is off by at most
 *   (3 F + (6 + terms) u) sum |x| |y|,
 * with the norms of the digits. Below 1/2 the nearest integer is the true coefficient; we
 * ask 7/16, which covers the products of errors (1 + F)^3 < 1 + 2^-40 and the rounding of
 * this very bound. The method is Percival's (Rapid multiplication modulo the sum and
 * difference of highly composite numbers, Math. Comp. 2003), with norms in place of maxima.
 *
 * `errorFactor` is 3 F + 6 u + terms u; the caller multiplies by the norms that `digitsOf`
 * measures, and takes smaller digits where the bound is not met.
 */
import {
  forward2,
  forward3,
  forward4,
  forward5,
  inverse2,
  inverse3,
  inverse4,
  inverse5,
  pointAddProduct,
  pointProduct,
  pointTwoProducts,
} from "./passes";
import { passRadix, passTable, planLength, planPasses, tableStride } from "./plan";

const U: f64 = 1.1102230246251565e-16;
/** exp(i pi / 4), the root that parts the lanes: both of its parts. */
const DIAGONAL: f64 = 0.7071067811865475244;
/** Bytes of a block that stays in the first-level cache: from there on passes run level by level. */
const CACHE_BYTES: usize = 16384;

/** 3 F + (6 + terms) u of the proof above, for a plan of length m. */
export function errorFactor(m: u32, terms: u32): f64 {
  const half = m >> 1;
  const twos = ctz(half);
  const odd = half >> twos;
  let f = 7.3 + 8.3 * <f64>(twos >> 1);
  if (twos & 1) f += 7.3;
  if (odd == 3) f += 15.0;
  if (odd == 5) f += 29.0;
  return (3.0 * f + 6.0 + <f64>terms) * U;
}

/** Bytes of one transform. */
export function transformBytes(plan: usize): usize {
  return (<usize>planLength(plan)) << 4;
}

function forwardPass<T>(radix: u32, p: usize, part: usize, tw: usize): void {
  if (radix == 4) forward4<T>(p, part, tw);
  else if (radix == 2) forward2<T>(p, part, tw);
  else if (radix == 3) forward3<T>(p, part, tw);
  else forward5<T>(p, part, tw);
}
function inversePass<T>(radix: u32, p: usize, part: usize, tw: usize): void {
  if (radix == 4) inverse4<T>(p, part, tw);
  else if (radix == 2) inverse2<T>(p, part, tw);
  else if (radix == 3) inverse3<T>(p, part, tw);
  else inverse5<T>(p, part, tw);
}

/** Blocks above the cache's size go depth first, the rest level by level. */
function forwardFrom<T>(plan: usize, lane: usize, p: usize, bytes: usize, pass: i32, block: usize): void {
  const passes = planPasses(plan);
  if (bytes > CACHE_BYTES) {
    const radix = passRadix(plan, pass);
    const part = bytes / radix;
    forwardPass<T>(radix, p, part, passTable(plan, pass) + lane + block * tableStride(radix));
    for (let k: usize = 0; k < radix; k++) {
      forwardFrom<T>(plan, lane, p + k * part, part, pass + 1, block * radix + k);
    }
    return;
  }
  let blocks: usize = 1;
  for (let at = pass; at < passes; at++) {
    const radix = passRadix(plan, at);
    const stride = tableStride(radix);
    const step = bytes / blocks;
    const part = step / radix;
    let tw = passTable(plan, at) + lane + block * stride;
    let q = p;
    for (let b: usize = 0; b < blocks; b++) {
      forwardPass<T>(radix, q, part, tw);
      q += step;
      tw += stride;
    }
    blocks *= radix;
    block *= radix;
  }
}

function inverseFrom<T>(plan: usize, lane: usize, p: usize, bytes: usize, pass: i32, block: usize): void {
  const passes = planPasses(plan);
  if (bytes > CACHE_BYTES) {
    const radix = passRadix(plan, pass);
    const part = bytes / radix;
    for (let k: usize = 0; k < radix; k++) {
      inverseFrom<T>(plan, lane, p + k * part, part, pass + 1, block * radix + k);
    }
    inversePass<T>(radix, p, part, passTable(plan, pass) + lane + block * tableStride(radix));
    return;
  }
  let blocks: usize = 1;
  for (let at = pass; at < passes; at++) {
    blocks *= passRadix(plan, at);
    block *= passRadix(plan, at);
  }
  for (let at = passes - 1; at >= pass; at--) {
    const radix = passRadix(plan, at);
    const stride = tableStride(radix);
    blocks /= radix;
    block /= radix;
    const step = bytes / blocks;
    const part = step / radix;
    let tw = passTable(plan, at) + lane + block * stride;
    let q = p;
    for (let b: usize = 0; b < blocks; b++) {
      inversePass<T>(radix, q, part, tw);
      q += step;
      tw += stride;
    }
  }
}

/** A pair (a, b) becomes (a + w b, a - w b), w = exp(i pi / 4). */
function partLanes(p: usize, bytes: usize): void {
  const end = p + bytes;
  do {
    const br = load<f64>(p, 8);
    const bi = load<f64>(p, 24);
    const tr = (br - bi) * DIAGONAL;
    const ti = (br + bi) * DIAGONAL;
    const ar = load<f64>(p);
    const ai = load<f64>(p, 16);
    store<f64>(p, ar + tr);
    store<f64>(p, ar - tr, 8);
    store<f64>(p, ai + ti, 16);
    store<f64>(p, ai - ti, 24);
    p += 32;
  } while (p < end);
}

/** The inverse of `partLanes`, times 2. */
function joinLanes(p: usize, bytes: usize): void {
  const end = p + bytes;
  do {
    const xr = load<f64>(p);
    const yr = load<f64>(p, 8);
    const xi = load<f64>(p, 16);
    const yi = load<f64>(p, 24);
    const dr = xr - yr;
    const di = xi - yi;
    store<f64>(p, xr + yr);
    store<f64>(p, (dr + di) * DIAGONAL, 8);
    store<f64>(p, xi + yi, 16);
    store<f64>(p, (di - dr) * DIAGONAL, 24);
    p += 32;
  } while (p < end);
}

/** Evaluates in place. */
export function forward(plan: usize, p: usize): void {
  const bytes = transformBytes(plan);
  partLanes(p, bytes);
  if (ASC_FEATURE_SIMD) forwardFrom<v128>(plan, 0, p, bytes, 0, 0);
  else {
    forwardFrom<f64>(plan, 0, p, bytes, 0, 0);
    forwardFrom<f64>(plan, 8, p + 8, bytes, 0, 0);
  }
}

/** Back from evaluations to coefficients times M, in place. */
export function inverse(plan: usize, p: usize): void {
  const bytes = transformBytes(plan);
  if (ASC_FEATURE_SIMD) inverseFrom<v128>(plan, 0, p, bytes, 0, 0);
  else {
    inverseFrom<f64>(plan, 0, p, bytes, 0, 0);
    inverseFrom<f64>(plan, 8, p + 8, bytes, 0, 0);
  }
  joinLanes(p, bytes);
}

/** c = a b. */
export function product(plan: usize, c: usize, a: usize, b: usize): void {
  const bytes = transformBytes(plan);
  if (ASC_FEATURE_SIMD) pointProduct<v128>(c, a, b, bytes);
  else {
    pointProduct<f64>(c, a, b, bytes);
    pointProduct<f64>(c + 8, a + 8, b + 8, bytes);
  }
}

/** c += a b. */
export function addProduct(plan: usize, c: usize, a: usize, b: usize): void {
  const bytes = transformBytes(plan);
  if (ASC_FEATURE_SIMD) pointAddProduct<v128>(c, a, b, bytes);
  else {
    pointAddProduct<f64>(c, a, b, bytes);
    pointAddProduct<f64>(c + 8, a + 8, b + 8, bytes);
  }
}

/** c = a b + d e. */
export function twoProducts(plan: usize, c: usize, a: usize, b: usize, d: usize, e: usize): void {
  const bytes = transformBytes(plan);
  if (ASC_FEATURE_SIMD) pointTwoProducts<v128>(c, a, b, d, e, bytes);
  else {
    pointTwoProducts<f64>(c, a, b, d, e, bytes);
    pointTwoProducts<f64>(c + 8, a + 8, b + 8, d + 8, e + 8, bytes);
  }
}
