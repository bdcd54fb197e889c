/**
 * The tree: pieces of the divide and conquer over moves; src/kernel/tree.ts conducts them.
 *
 * A node stands for consecutive moves. Its product is a d x D integer matrix [A | E]
 * (D = d + number of translation constants, see window.ts), entry (i, j) as two's
 * complement limbs of 64 bits, entries one after another. A point is D fractions; each is
 * an array of limbs whose top limb ends at the same distance from the next one's, so that
 * cutting low limbs moves a start address and copies nothing.
 *
 * Transforms of a left child's entries are made once and used twice: for the product of
 * its parent, and for moving the point from the parent's first move to its middle.
 */

import { digitsOf, limbsOf } from "../fixed/digits";
import { add61, multiply61, residue61, same61 } from "../fixed/mersenne";
import { ERROR_LIMIT } from "../fixed/multiply";
import { planLength } from "../fixed/plan";
import { addResidueProduct, coefficientResidues, digitResidues } from "../fixed/residue";
import { addProduct, errorFactor, forward, inverse, product, transformBytes, twoProducts } from "../fixed/transform";
import { CHECK_FAILED, OK } from "../status";

/** Residues of one column of a matrix, 8 at most. */
const column: usize = memory.data(64);

/** What is kept of a transform beside it: its residues, then the norm of its digits. */
const NOTE: usize = 16;

/**
 * Transforms of `count` integers of `limbs` limbs, `stride` bytes apart; notes get the
 * norms of their digits and, where `noted`, their residues.
 */
export function treeTransform(
  plan: usize,
  into: usize,
  notes: usize,
  from: usize,
  stride: usize,
  count: u32,
  limbs: u32,
  width: u32,
  noted: bool,
): void {
  const bytes = transformBytes(plan);
  for (let i: u32 = 0; i < count; i++) {
    const norm = digitsOf(plan, into, from, limbs, width);
    if (noted) store<u64>(notes, digitResidues(plan, into));
    store<f64>(notes, Math.sqrt(norm), 8);
    forward(plan, into);
    into += bytes;
    notes += NOTE;
    from += stride;
  }
}

/**
 * One row of a product: for each of `columns` columns, sum over k < d of row[k] column[k],
 * back to limbs. row: d transforms; matrix: d x columns transforms, row-major.
 * @param work one transform
 * @param first limbs below it are not written (see limbsOf)
 * @param checked whether residues are compared; where not, the caller checks the integers
 * @returns CHECK_FAILED where a residue disagrees or the error bound is not met
 */
export function treeRow(
  plan: usize,
  row: usize,
  rowNotes: usize,
  matrix: usize,
  matrixNotes: usize,
  d: u32,
  columns: u32,
  work: usize,
  out: usize,
  outStride: usize,
  limbs: u32,
  first: u32,
  width: u32,
  checked: bool,
): i32 {
  const bytes = transformBytes(plan);
  const factor = errorFactor(planLength(plan), d);
  for (let j: u32 = 0; j < columns; j++) {
    let expected: u64 = 0;
    let size: f64 = 0;
    for (let k: u32 = 0; k < d; k++) {
      const a = rowNotes + <usize>k * NOTE;
      const b = matrixNotes + <usize>(k * columns + j) * NOTE;
      if (checked) expected = addResidueProduct(expected, load<u64>(a), load<u64>(b));
      size += load<f64>(a, 8) * load<f64>(b, 8);
    }
    if (!(size * factor < ERROR_LIMIT)) return CHECK_FAILED;
    const column = matrix + <usize>j * bytes;
    const step = <usize>columns * bytes;
    let k: u32 = 0;
    if (d >= 2) {
      twoProducts(plan, work, row, column, row + bytes, column + step);
      k = 2;
    } else {
      product(plan, work, row, column);
      k = 1;
    }
    for (; k < d; k++) addProduct(plan, work, row + <usize>k * bytes, column + <usize>k * step);
    inverse(plan, work);
    if (checked && coefficientResidues(plan, work) != expected) return CHECK_FAILED;
    limbsOf(plan, out, work, limbs, first, width);
    out += outStride;
  }
  return OK;
}

/**
 * Whether out = right left, as integers, modulo 2^61 - 1: matrices [A | E] of d x inputs
 * entries (see above), the last columns of the product gaining right's own.
 */
export function treeCheck(
  out: usize,
  outLimbs: u32,
  right: usize,
  rightLimbs: u32,
  left: usize,
  leftLimbs: u32,
  d: u32,
  inputs: u32,
): i32 {
  const o = (<usize>outLimbs) << 3;
  const r = (<usize>rightLimbs) << 3;
  const l = (<usize>leftLimbs) << 3;
  for (let j: u32 = 0; j < inputs; j++) {
    for (let k: u32 = 0; k < d; k++) {
      store<u64>(column + ((<usize>k) << 3), residue61(left + <usize>(k * inputs + j) * l, leftLimbs));
    }
    for (let i: u32 = 0; i < d; i++) {
      const row = right + <usize>(i * inputs) * r;
      let sum: u64 = j < d ? 0 : residue61(row + <usize>j * r, rightLimbs);
      for (let k: u32 = 0; k < d; k++) {
        const a = residue61(row + <usize>k * r, rightLimbs);
        sum = add61(sum, multiply61(a, load<u64>(column + ((<usize>k) << 3))));
      }
      if (!same61(sum, residue61(out + <usize>(i * inputs + j) * o, outLimbs))) return CHECK_FAILED;
    }
  }
  return OK;
}

/** into += from, both of two's complement limbs, from shorter or equal. */
export function treeAdd(into: usize, limbs: u32, from: usize, fromLimbs: u32): void {
  let carry: u64 = 0;
  let x: u64 = 0;
  for (let i: u32 = 0; i < limbs; i++) {
    x = i < fromLimbs ? load<u64>(from + ((<usize>i) << 3)) : <u64>(<i64>x >> 63);
    const old = load<u64>(into + ((<usize>i) << 3));
    const sum = old + x;
    const out = sum + carry;
    carry = <u64>(sum < old) | <u64>(out < sum);
    store<u64>(into + ((<usize>i) << 3), out);
  }
}

/** The most bits, sign bit included, that any of `count` integers of `limbs` limbs needs. */
export function treeBits(from: usize, count: u32, limbs: u32): u32 {
  let most: u32 = 1;
  for (let i: u32 = 0; i < count; i++) {
    let top = limbs - 1;
    const sign = <u64>(load<i64>(from + ((<usize>top) << 3)) >> 63);
    while (top > 0 && load<u64>(from + ((<usize>top) << 3)) == sign) top--;
    const bits = (top << 6) + 65 - <u32>clz(load<u64>(from + ((<usize>top) << 3)) ^ sign);
    if (bits > most) most = bits;
    from += (<usize>limbs) << 3;
  }
  return most;
}

/** Drops limbs that only repeat the sign: from `limbs` to `fewer` limbs an integer, in place or downwards. */
export function treePack(into: usize, fewer: u32, from: usize, limbs: u32, count: u32): void {
  for (let i: u32 = 0; i < count; i++) {
    memory.copy(into, from, (<usize>fewer) << 3);
    into += (<usize>fewer) << 3;
    from += (<usize>limbs) << 3;
  }
}

/**
 * The interleaved 32-bit limbs that the window kernel takes, from fractions whose top
 * limbs end at xTop, xTop + xStride, ... (d of them), then zTop, zTop + zStride, ...
 * @param have 64-bit limbs that each fraction has; limbs below them are zero
 */
export function treeInterleave(
  out: usize,
  limbs32: u32,
  d: u32,
  inputs: u32,
  xTop: usize,
  xStride: usize,
  zTop: usize,
  zStride: usize,
  have: u32,
): void {
  const step = (<usize>inputs) << 2;
  const there = min(limbs32, have << 1);
  memory.fill(out, 0, <usize>(limbs32 - there) * step);
  for (let j: u32 = 0; j < inputs; j++) {
    let from = (j < d ? xTop + <usize>j * xStride : zTop + <usize>(j - d) * zStride) - ((<usize>there) << 2);
    let to = out + <usize>(limbs32 - there) * step + ((<usize>j) << 2);
    for (let i: u32 = 0; i < there; i++) {
      store<u32>(to, load<u32>(from));
      from += 4;
      to += step;
    }
  }
}

/**
 * One column of a leaf's product as planar limbs, from the interleaved limbs of a vector
 * that the window's own arithmetic moved (integers modulo 2^(32 limbs32), two's complement).
 */
export function treeColumn(
  out: usize,
  outStride: usize,
  limbs: u32,
  vector: usize,
  limbs32: u32,
  d: u32,
  inputs: u32,
): void {
  const step = (<usize>inputs) << 2;
  for (let i: u32 = 0; i < d; i++) {
    const base = vector + ((<usize>i) << 2);
    const sign = <u32>(load<i32>(base + <usize>(limbs32 - 1) * step) >> 31);
    for (let l: u32 = 0; l < limbs << 1; l++) {
      const x = l < limbs32 ? load<u32>(base + <usize>l * step) : sign;
      store<u32>(out + ((<usize>l) << 2), x);
    }
    out += outStride;
  }
}
