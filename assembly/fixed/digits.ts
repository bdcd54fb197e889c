/**
 * Between limbs and the digits of a transform.
 *
 * A big integer is an array of 64-bit limbs, least significant first, in two's complement.
 * Digits have `width` bits (a multiple of 2, at most 14) and are balanced: from
 * -2^(width-1) to 2^(width-1) - 1. Digit j of 2 M sits in quarter floor(j / (M / 2)) of the
 * pairs: real parts of lane 0, of lane 1, imaginary parts of lane 0, of lane 1.
 */
import { planLength } from "./plan";

/** Adding this to a double below 2^51 leaves its nearest integer in the low bits. */
const MAGIC: f64 = 6755399441055744.0;
const MAGIC_BITS: i64 = 0x4338000000000000;

/**
 * Writes the digits of the `limbs` limbs at src into the transform at dst, and returns the
 * sum of their squares. What lies beyond 2 M digits must be a carry (it wraps, negated).
 */
export function digitsOf(plan: usize, dst: usize, src: usize, limbs: u32, width: u32): f64 {
  const quarter = planLength(plan) >> 1; // digits a quarter
  const group = width >> 1; // bytes of four digits
  const bits = (<u64>width) << 2;
  const mask = ((<u64>1) << bits) - 1;
  const one = ((<u64>1) << width) - 1;
  const half = (<u64>1) << (width - 1);
  const bias = half | (half << width) | (half << (2 * width)) | (half << (3 * width));
  const middle = <f64>(<i64>half);
  const bytes = limbs << 3;
  const groups = (bytes + group - 1) / group;
  const w = <u64>width;
  let carry: u64 = 0;
  let norm: f64 = 0;
  let g: u32 = 0;
  for (let q: usize = 0; q < 4; q++) {
    let d = dst + (q << 3);
    const end = d + ((<usize>quarter) << 5);
    const last = min(groups, (<u32>q + 1) * (quarter >> 2));
    let s = src + g * group;
    for (; g < last; g++) {
      const left = bytes - g * group;
      // Near the top: what is left, sign-extended, without reading past the number.
      const x = left >= 8 ? load<u64>(s) : <u64>(load<i64>(src + bytes - 8) >> (64 - <i64>(left << 3)));
      const t = (x & mask) + bias + carry;
      carry = t >> bits;
      const d0 = <f64>(<i64>(t & one)) - middle;
      const d1 = <f64>(<i64>((t >> w) & one)) - middle;
      const d2 = <f64>(<i64>((t >> (2 * w)) & one)) - middle;
      const d3 = <f64>(<i64>((t >> (3 * w)) & one)) - middle;
      store<f64>(d, d0);
      store<f64>(d, d1, 32);
      store<f64>(d, d2, 64);
      store<f64>(d, d3, 96);
      norm += d0 * d0 + d1 * d1 + (d2 * d2 + d3 * d3);
      d += 128;
      s += group;
    }
    if (g == groups && d < end) {
      // A negative number was read as its two's complement: take one off beyond its top.
      const top = <f64>(<i64>carry - <i64>(load<u64>(src + bytes - 8) >> 63));
      store<f64>(d, top);
      norm += top * top;
      d += 32;
      g++; // once
    }
    for (; d < end; d += 32) store<f64>(d, 0);
  }
  if (g == groups) {
    const top = <f64>(<i64>carry - <i64>(load<u64>(src + bytes - 8) >> 63));
    const d0 = load<f64>(dst);
    store<f64>(dst, d0 - top);
    norm += abs(top) * (2.0 * abs(d0) + abs(top));
  }
  return norm;
}

/**
 * Rounds the coefficients (times M) of the transform at src and writes the integer that
 * they are the digits of, modulo 2^(64 limbs), at dst. Limbs below `first` are not written;
 * with first > 0 what is written may be short of the true value by a few units of the
 * first digit read, which starts at or below limb `first`.
 */
export function limbsOf(plan: usize, dst: usize, src: usize, limbs: u32, first: u32, width: u32): void {
  const quarter = planLength(plan) >> 1;
  const group = width >> 1;
  const scale = 1.0 / <f64>planLength(plan);
  const bytes = limbs << 3;
  const groups = min((bytes + group - 1) / group, quarter);
  const perQuarter = quarter >> 2;
  const one = ((<i64>1) << width) - 1;
  const w = <i64>width;
  let g = (first << 3) / group;
  let carry: i64 = 0;
  const safe = dst + bytes - 8;
  for (let q: u32 = g / perQuarter; q < 4; q++) {
    const last = min(groups, (q + 1) * perQuarter);
    let s = src + ((<usize>(g - q * perQuarter)) << 7) + ((<usize>q) << 3);
    let o = dst + g * group;
    for (; g < last; g++) {
      carry += reinterpret<i64>(load<f64>(s) * scale + MAGIC) - MAGIC_BITS;
      let x = carry & one;
      carry >>= w;
      carry += reinterpret<i64>(load<f64>(s, 32) * scale + MAGIC) - MAGIC_BITS;
      x |= (carry & one) << w;
      carry >>= w;
      carry += reinterpret<i64>(load<f64>(s, 64) * scale + MAGIC) - MAGIC_BITS;
      x |= (carry & one) << (2 * w);
      carry >>= w;
      carry += reinterpret<i64>(load<f64>(s, 96) * scale + MAGIC) - MAGIC_BITS;
      x |= (carry & one) << (3 * w);
      carry >>= w;
      if (o <= safe) store<i64>(o, x);
      else {
        for (let at = o; at < dst + bytes; at++) {
          store<u8>(at, <u8>x);
          x >>= 8;
        }
      }
      s += 128;
      o += group;
    }
  }
  // Where the transform holds fewer bits than were asked for, the rest is the sign.
  for (let at = dst + groups * group; at < dst + bytes; at++) {
    store<u8>(at, <u8>carry);
    carry >>= 8;
  }
}
