/**
 * Walks on points with a common denominator q, exactly, in machine words: numerators in
 * [0, q) move by x -> A x + b mod q.
 *
 * No division in the loop. A sum S with |S| <= N q < 2^62 has S / q within N < 2^33 in
 * absolute value (entries are centred residues), so the floor of S (1 / q) in doubles is
 * off by at most one from floor(S / q), and one comparison each way mends it.
 */

/** value mod q in [0, q), where `inverse` is 1 / q to the nearest. */
function remainder(value: i64, q: i64, inverse: f64): i64 {
  const rest = value - <i64>Math.floor(<f64>value * inverse) * q;
  return rest < 0 ? rest + q : rest >= q ? rest - q : rest;
}

/** floor(value / q). */
function quotient(value: i64, q: i64, inverse: f64): i64 {
  const t = <i64>Math.floor(<f64>value * inverse);
  const rest = value - t * q;
  return rest < 0 ? t - 1 : rest >= q ? t + 1 : t;
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

/** One move, from `state` to `next`. */
function step(d: usize, move: usize, state: usize, next: usize, q: i64, inverse: f64): void {
  const end = state + (d << 3);
  const last = next + (d << 3);
  for (; next < last; next += 8, move += 8) {
    let sum: i64 = 0;
    for (let x = state; x < end; x += 8, move += 8) sum += load<i64>(move) * load<i64>(x);
    store<i64>(next, remainder(sum + load<i64>(move), q, inverse));
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
  const inverse = 1.0 / <f64>q;
  const last = choices + ((<usize>steps) << 1);
  let here = state;
  let next = state + row;
  for (let choice = choices; ; choice += 2) {
    if (out != 0) {
      emit(here, d, q, inverse, <i64>shift, out);
      out += row;
    }
    if (numerators != 0) {
      for (let j: usize = 0; j < row; j += 8) store<i64>(numerators + j, load<i64>(here + j));
      numerators += row;
    }
    if (choice == last) break;
    step(d, moves + <usize>load<u16>(choice) * size, here, next, q, inverse);
    const spare = here;
    here = next;
    next = spare;
  }
  if (here != state) memory.copy(state, here, row);
}

/** `residueWalk` in dimension 2, in registers. */
export function residueWalk2(
  moves: usize,
  choices: usize,
  steps: u32,
  q: i64,
  shift: u32,
  state: usize,
  out: usize,
  numerators: usize,
): void {
  const inverse = 1.0 / <f64>q;
  const last = choices + ((<usize>steps) << 1);
  let x = load<i64>(state);
  let y = load<i64>(state, 8);
  for (let choice = choices; ; choice += 2) {
    if (out != 0) {
      store<u64>(out, fraction(x, q, inverse, <i64>shift));
      store<u64>(out, fraction(y, q, inverse, <i64>shift), 8);
      out += 16;
    }
    if (numerators != 0) {
      store<i64>(numerators, x);
      store<i64>(numerators, y, 8);
      numerators += 16;
    }
    if (choice == last) break;
    const m = moves + <usize>load<u16>(choice) * 48;
    const u = load<i64>(m) * x + load<i64>(m, 8) * y + load<i64>(m, 16);
    const v = load<i64>(m, 24) * x + load<i64>(m, 32) * y + load<i64>(m, 40);
    x = remainder(u, q, inverse);
    y = remainder(v, q, inverse);
  }
  store<i64>(state, x);
  store<i64>(state, y, 8);
}
