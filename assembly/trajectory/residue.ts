/**
 * Walks on points with a common denominator q, exactly, in machine words: numerators in
 * [0, q) move by x -> A x + b mod q.
 *
 * No division in the loop. A sum S with |S| <= N q < 2^62 has S / q within N < 2^33 in
 * absolute value (entries are centred residues), so the floor of S (1 / q) in doubles is
 * off by at most one from floor(S / q), and one comparison each way mends it.
 */

/** floor(value / q), where `inverse` is 1 / q to the nearest; the remainder is what the caller wants next. */
function quotient(value: i64, q: i64, inverse: f64): i64 {
  let t = <i64>Math.floor(<f64>value * inverse);
  const rest = value - t * q;
  if (rest < 0) t--;
  else if (rest >= q) t++;
  return t;
}

/** floor(2^64 r / q), some bits at a time: `shift` with q 2^shift <= 2^62, at most 32. */
function fraction(r: i64, q: i64, inverse: f64, shift: i64): u64 {
  let x: u64 = 0;
  for (let left: i64 = 64; left > 0; ) {
    const s = min(left, shift);
    r <<= s;
    const t = quotient(r, q, inverse);
    r -= t * q;
    x = (x << s) | <u64>t;
    left -= s;
  }
  return x;
}

/** Writes floor(2^64 r / q) for each of `count` numerators. */
function emit(state: usize, count: usize, q: i64, inverse: f64, shift: i64, out: usize): void {
  for (let j: usize = 0; j < count; j++) {
    store<u64>(out + (j << 3), fraction(load<i64>(state + (j << 3)), q, inverse, shift));
  }
}

/**
 * @param moves d x (d + 1) signed 64-bit each: centred residues of A, then b in [0, q)
 * @param state d numerators, replaced by the last position's; d more words of work space follow
 * @param shift 62 - (bits of q), at most 32
 * @param out positions 0, ..., steps as floor(2^64 x), or 0
 * @param numerators the same as numerators over q, or 0
 */
export function residueWalk(
  dimension: u32,
  moves: usize,
  choices: usize,
  steps: u32,
  q: i64,
  shift: u32,
  state: usize,
  out: usize,
  numerators: usize,
): void {
  const d = <usize>dimension;
  const row = d << 3;
  const size = row * (d + 1);
  const work = state + row;
  const inverse = 1.0 / <f64>q;
  for (let k: u32 = 0; ; k++) {
    if (out != 0) {
      emit(state, d, q, inverse, <i64>shift, out);
      out += row;
    }
    if (numerators != 0) {
      memory.copy(numerators, state, row);
      numerators += row;
    }
    if (k == steps) break;
    let m = moves + <usize>load<u16>(choices + ((<usize>k) << 1)) * size;
    for (let i: usize = 0; i < d; i++) {
      let sum: i64 = 0;
      for (let j: usize = 0; j < row; j += 8, m += 8) sum += load<i64>(m) * load<i64>(state + j);
      sum += load<i64>(m);
      m += 8;
      store<i64>(work + (i << 3), sum - quotient(sum, q, inverse) * q);
    }
    memory.copy(state, work, row);
  }
}
