/**
 * Plans: for a complex length M, the radices of its passes and their twiddle factors.
 *
 * The transform evaluates a complex polynomial modulo x^M - i at the M roots of x^M = i,
 * by splitting x^n - e(t) into x^(n/r) - e((t + k) / r), k < r (e(t) = exp(2 pi i t)).
 * The first split, by 2, puts one half into each lane of a pair; from there on the two
 * lanes are transforms of their own with twiddles of their own, and no pass shuffles.
 *
 * Angles are exact fractions of a turn; sine and cosine are taken in the first octant, so
 * that a twiddle is off by less than 4 u, u = 2^-53 (argument 2 u, function one unit in
 * the last place of a number below 1).
 */
import { alloc } from "../memory";
import { LONGEST, ROOTS_BYTES, writeRoots } from "./roots";

const TURN: f64 = 6.283185307179586476925286766559;
/** Passes at most: lengths stay below 2^31. */
const PASSES: usize = 32;

/** Layout of a plan: M, number of passes, the check's roots, then per pass its radix and its table's address. */
const ROOTS: usize = 8;
const HEAD: usize = ROOTS + ROOTS_BYTES;
const SIZE: usize = HEAD + PASSES * 8;

export function planLength(plan: usize): u32 {
  return load<u32>(plan);
}
export function planPasses(plan: usize): i32 {
  return load<i32>(plan, 4);
}
export function planRoots(plan: usize): usize {
  return plan + ROOTS;
}
export function passRadix(plan: usize, pass: i32): u32 {
  return load<u32>(plan + HEAD + ((<usize>pass) << 3));
}
export function passTable(plan: usize, pass: i32): usize {
  return load<u32>(plan + HEAD + ((<usize>pass) << 3), 4);
}
/** Bytes of one block's twiddles in a pass of that radix: r - 1 complex pairs. */
export function tableStride(radix: u32): usize {
  return (<usize>(radix - 1)) << 5;
}

/** Writes e(n / d) at (at, at + 16): a real and an imaginary part, each in a pair's first lane. */
function putRoot(at: usize, n: u64, d: u64): void {
  n %= d;
  const quadrant = (n * 4) / d;
  const rest = n * 4 - quadrant * d; // over 4 d, below d
  let c: f64;
  let s: f64;
  if (rest * 2 <= d) {
    const t = (TURN * <f64>rest) / (4.0 * <f64>d);
    c = NativeMath.cos(t);
    s = NativeMath.sin(t);
  } else {
    const t = (TURN * <f64>(d - rest)) / (4.0 * <f64>d);
    c = NativeMath.sin(t);
    s = NativeMath.cos(t);
  }
  store<f64>(at, quadrant == 0 ? c : quadrant == 1 ? -s : quadrant == 2 ? -c : s);
  store<f64>(at, quadrant == 0 ? s : quadrant == 1 ? c : quadrant == 2 ? -s : -c, 16);
}

/** The smallest length of the form 2^a, 3 2^a or 5 2^a (a >= 3) that is at least `least`. */
export function lengthFor(least: u32): u32 {
  let best: u32 = u32.MAX_VALUE;
  for (let odd: u32 = 1; odd <= 5; odd += 2) {
    let m = odd << 3;
    while (m < least) m <<= 1;
    best = min(best, m);
  }
  return best;
}

/** Bytes that `makePlan(m)` takes for good. */
export function planBytes(m: u32): u32 {
  // Tables: (r - 1) pairs of 32 bytes a block; the last pass has m / (2 r) blocks, those before shrink geometrically.
  return <u32>SIZE + 20 * m + 64 * 34;
}

/** Lengths of one family split alike from the top: a shorter one's tables are the first of a longer one's. */
export function planFamily(m: u32): u32 {
  const half = m >> 1;
  const twos = ctz(half);
  return ((half >> twos) << 1) | (twos & 1);
}

/**
 * Makes the plan for length m (of the form of `lengthFor`); 0 where the arena is full or no check is to be had.
 * @param like a plan of the same family, at least as long, whose tables are shared; or 0
 */
export function makePlan(m: u32, like: usize): usize {
  if (m > LONGEST) return 0;
  const plan = alloc(<u32>SIZE);
  if (plan == 0) return 0;
  store<u32>(plan, m);
  writeRoots(plan + ROOTS, m);
  let rest = m >> 1;
  let passes = 0;
  const put = plan + HEAD;
  const odd = rest >> ctz(rest);
  if (odd > 1) {
    store<u32>(put, odd);
    rest /= odd;
    passes++;
  }
  if (ctz(rest) & 1) {
    store<u32>(put + ((<usize>passes) << 3), 2);
    rest >>= 1;
    passes++;
  }
  while (rest > 1) {
    store<u32>(put + ((<usize>passes) << 3), 4);
    rest >>= 2;
    passes++;
  }
  store<i32>(plan, passes, 4);
  if (like != 0) {
    for (let p = 0; p < passes; p++) store<u32>(put + ((<usize>p) << 3), <u32>passTable(like, p), 4);
    return plan;
  }
  let blocks: u32 = 1;
  for (let p = 0; p < passes; p++) {
    const radix = passRadix(plan, p);
    const table = alloc(blocks * <u32>tableStride(radix));
    if (table == 0) return 0;
    store<u32>(put + ((<usize>p) << 3), <u32>table, 4);
    blocks *= radix;
  }
  fillTables(plan, passes);
  return plan;
}

/** A block's angle is numerator / (8 blocks) of a turn: 1/8 and 5/8 for the two lanes at the root. */
function fillTables(plan: usize, passes: i32): void {
  for (let lane: usize = 0; lane < 2; lane++) {
    let blocks: u64 = 1;
    for (let p = 0; p < passes; p++) {
      const radix = passRadix(plan, p);
      const table = passTable(plan, p) + (lane << 3);
      const stride = tableStride(radix);
      for (let b: u64 = 0; b < blocks; b++) {
        const n = numerator(plan, p, b, blocks, lane);
        for (let k: u32 = 1; k < radix; k++) {
          putRoot(table + <usize>b * stride + ((<usize>(k - 1)) << 5), n * k, 8 * blocks * radix);
        }
      }
      blocks *= radix;
    }
  }
}

/** Follows block b of pass p down from the root. */
function numerator(plan: usize, p: i32, b: u64, blocks: u64, lane: usize): u64 {
  let n: u64 = lane == 0 ? 1 : 5;
  let above: u64 = 1; // blocks at the level reached
  let below = blocks; // blocks of pass p below one block of that level
  for (let q = 0; q < p; q++) {
    const radix = <u64>passRadix(plan, q);
    below /= radix;
    const slot = (b / below) % radix;
    // A radix-4 pass leaves its outputs in the order 0, 2, 1, 3.
    const k = radix == 4 && (slot == 1 || slot == 2) ? 3 - slot : slot;
    n += 8 * above * k;
    above *= radix;
  }
  return n;
}
