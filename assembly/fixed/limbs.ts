/**
 * Matrices times fixed-point fractions modulo 1.
 *
 * A vector of `inputs` fractions is held as 32-bit limbs, interleaved: limb i of every
 * component side by side, least significant limbs first, so that the top limb sits just
 * below the binary point. Carries out of the top are whole numbers: dropped, exactly the
 * reduction modulo 1. On a vector cut to some limbs the product is exact arithmetic in
 * Z / 2^(32 limbs): nothing is rounded, only the cut itself is an error.
 *
 * A matrix is `rows` x `inputs` 64-bit signed integers, row-major; the first `rows`
 * components are replaced, the others (constants) stay.
 */

/** Work space: 8 carries at most, then the components of one limb, 8 bytes each. */
const CARRIES: usize = 64;

/**
 * x := M x over the limbs from `lo` to `hi`, where every row of |M| sums to at most 2^30:
 * a limb's sum stays below 2^62 + 2^31 in absolute value, and its carry within 31 bits.
 */
export function applyNarrow(matrix: usize, rows: usize, inputs: usize, lo: usize, hi: usize, work: usize): void {
  const values = work + CARRIES;
  const valuesEnd = values + (inputs << 3);
  const rowsEnd = work + (rows << 3);
  for (let c = work; c < rowsEnd; c += 8) store<i64>(c, 0);
  const stride = inputs << 2;
  for (let limb = lo; limb < hi; limb += stride) {
    let p = limb;
    for (let v = values; v < valuesEnd; v += 8, p += 4) store<u64>(v, <u64>load<u32>(p));
    let m = matrix;
    p = limb;
    for (let c = work; c < rowsEnd; c += 8, p += 4) {
      let sum = load<i64>(c);
      for (let v = values; v < valuesEnd; v += 8, m += 8) sum += load<i64>(m) * load<i64>(v);
      store<u32>(p, <u32>sum);
      store<i64>(c, sum >> 32);
    }
  }
}

/** `applyNarrow` for two rows and no constants, all in registers. */
export function applyNarrow2(p: i64, q: i64, r: i64, s: i64, lo: usize, hi: usize): void {
  let u: i64 = 0;
  let v: i64 = 0;
  for (let limb = lo; limb < hi; limb += 8) {
    const both = load<u64>(limb);
    const x = <i64>(both & 0xffffffff);
    const y = <i64>(both >> 32);
    u += p * x + q * y;
    v += r * x + s * y;
    store<u64>(limb, (<u64>u & 0xffffffff) | ((<u64>v) << 32));
    u >>= 32;
    v >>= 32;
  }
}

/**
 * x := M x where every row of |M| sums to at most 2^62. An entry is split into a signed
 * high and an unsigned low half; products of low halves are collected in two parts, so
 * that every sum stays below 2^63.
 */
export function applyWide(matrix: usize, rows: usize, inputs: usize, lo: usize, hi: usize, work: usize): void {
  const values = work + CARRIES;
  const valuesEnd = values + (inputs << 3);
  const rowsEnd = work + (rows << 3);
  for (let c = work; c < rowsEnd; c += 8) store<i64>(c, 0);
  const stride = inputs << 2;
  for (let limb = lo; limb < hi; limb += stride) {
    let p = limb;
    for (let v = values; v < valuesEnd; v += 8, p += 4) store<u64>(v, <u64>load<u32>(p));
    let m = matrix;
    p = limb;
    for (let c = work; c < rowsEnd; c += 8, p += 4) {
      let low = load<i64>(c);
      let high: i64 = 0;
      for (let v = values; v < valuesEnd; v += 8, m += 8) {
        const entry = load<i64>(m);
        const x = load<i64>(v);
        const product = <u64>((entry & 0xffffffff) * x);
        low += <i64>(product & 0xffffffff);
        high += <i64>(product >> 32) + (entry >> 32) * x;
      }
      store<u32>(p, <u32>low);
      store<i64>(c, high + (low >> 32));
    }
  }
}
