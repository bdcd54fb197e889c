/**
 * The averaged operator (P f)(i) = sum_m p_m f(t_m(i)) on an orbit's functions, and the
 * vector work of Lanczos' and Arnoldi's methods.
 *
 * Scalar code in both builds: gathers do not vectorise, and sums keep one order. Rows go
 * by blocks, so that a block of the vector at hand stays in the nearest cache.
 */
const BLOCK: usize = 1024 << 3;

/** Sum over moves of weight times the gathered entry; `at` is the point's row of the table. */
function gather(at: usize, row: usize, weights: usize, v: usize): f64 {
  let sum: f64 = 0;
  for (let m: usize = 0; m < row; m += 4) {
    sum += load<f64>(weights + (m << 1)) * load<f64>(v + ((<usize>load<u32>(at + m)) << 3));
  }
  return sum;
}

/** w = P v. */
export function orbitApply(table: usize, count: u32, weights: usize, size: u32, v: usize, w: usize): void {
  const row = (<usize>count) << 2;
  const end = w + ((<usize>size) << 3);
  for (; w < end; w += 8, table += row) store<f64>(w, gather(table, row, weights, v));
}

/**
 * One step of Lanczos' recurrence on functions of mean zero: w = P v - beta before - alpha v,
 * less its mean.
 * @param out alpha and |w|, written
 */
export function orbitLanczos(
  table: usize,
  count: u32,
  weights: usize,
  size: u32,
  before: usize,
  beta: f64,
  v: usize,
  w: usize,
  out: usize,
): void {
  const row = (<usize>count) << 2;
  const bytes = (<usize>size) << 3;
  let alpha: f64 = 0;
  let total: f64 = 0;
  for (let i: usize = 0; i < bytes; i += 8, table += row) {
    const x = gather(table, row, weights, v) - beta * load<f64>(before + i);
    store<f64>(w + i, x);
    alpha += x * load<f64>(v + i);
    total += x;
  }
  const mean = total / <f64>size;
  let square: f64 = 0;
  for (let i: usize = 0; i < bytes; i += 8) {
    const x = load<f64>(w + i) - alpha * load<f64>(v + i) - mean;
    store<f64>(w + i, x);
    square += x * x;
  }
  store<f64>(out, alpha);
  store<f64>(out, Math.sqrt(square), 8);
}

/** Takes the mean off w; returns |w| after. */
export function orbitCentre(size: u32, w: usize): f64 {
  const end = w + ((<usize>size) << 3);
  let total: f64 = 0;
  for (let i = w; i < end; i += 8) total += load<f64>(i);
  const mean = total / <f64>size;
  let square: f64 = 0;
  for (let i = w; i < end; i += 8) {
    const x = load<f64>(i) - mean;
    store<f64>(i, x);
    square += x * x;
  }
  return Math.sqrt(square);
}

/** w = c w. */
export function orbitScale(size: u32, w: usize, c: f64): void {
  const end = w + ((<usize>size) << 3);
  for (; w < end; w += 8) store<f64>(w, c * load<f64>(w));
}

/** w = w + c v. */
export function orbitAdd(size: u32, w: usize, c: f64, v: usize): void {
  const end = w + ((<usize>size) << 3);
  for (; w < end; w += 8, v += 8) store<f64>(w, load<f64>(w) + c * load<f64>(v));
}

/**
 * One pass of Gram and Schmidt's: h_j = h_j + <v_j, w>, w = w - sum_j <v_j, w> v_j.
 * @param basis `vectors` vectors, one after the other
 * @param h doubles, added to; as many again are work space
 * @returns |w| after
 */
export function orbitProject(basis: usize, vectors: u32, size: u32, w: usize, h: usize): f64 {
  const bytes = (<usize>size) << 3;
  const all = (<usize>vectors) << 3;
  const dots = h + all;
  memory.fill(dots, 0, all);
  for (let from: usize = 0; from < bytes; from += BLOCK) {
    const to = min(from + BLOCK, bytes);
    let v = basis;
    for (let j: usize = 0; j < all; j += 8, v += bytes) {
      let sum = load<f64>(dots + j);
      for (let i = from; i < to; i += 8) sum += load<f64>(v + i) * load<f64>(w + i);
      store<f64>(dots + j, sum);
    }
  }
  let square: f64 = 0;
  for (let from: usize = 0; from < bytes; from += BLOCK) {
    const to = min(from + BLOCK, bytes);
    let v = basis;
    for (let j: usize = 0; j < all; j += 8, v += bytes) {
      const c = load<f64>(dots + j);
      for (let i = from; i < to; i += 8) store<f64>(w + i, load<f64>(w + i) - c * load<f64>(v + i));
    }
    for (let i = from; i < to; i += 8) square += load<f64>(w + i) * load<f64>(w + i);
  }
  for (let j: usize = 0; j < all; j += 8) store<f64>(h + j, load<f64>(h + j) + load<f64>(dots + j));
  return Math.sqrt(square);
}

/**
 * The basis times a small matrix, in place: v_c becomes sum_j v_j S_jc for c < kept.
 * @param small vectors x kept, row after row
 * @param work `kept` doubles
 */
export function orbitRotate(basis: usize, vectors: u32, size: u32, small: usize, kept: u32, work: usize): void {
  const bytes = (<usize>size) << 3;
  const row = (<usize>kept) << 3;
  for (let i: usize = 0; i < bytes; i += 8) {
    memory.fill(work, 0, row);
    let s = small;
    for (let j: usize = 0; j < <usize>vectors; j++, s += row) {
      const x = load<f64>(basis + j * bytes + i);
      for (let c: usize = 0; c < row; c += 8) {
        store<f64>(work + c, load<f64>(work + c) + x * load<f64>(s + c));
      }
    }
    for (let c: usize = 0; c < <usize>kept; c++) store<f64>(basis + c * bytes + i, load<f64>(work + (c << 3)));
  }
}

/** Random words in place become doubles in [-1/2, 1/2). */
export function orbitSpread(size: u32, w: usize): void {
  const end = w + ((<usize>size) << 3);
  for (; w < end; w += 8) store<f64>(w, <f64>(load<u64>(w) >> 11) * (1.0 / 9007199254740992.0) - 0.5);
}
