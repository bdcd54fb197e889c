/**
 * Sums over tables: pairings, values at a point, norms. Each is summed with the rounding
 * errors carried along (Sum2 of Ogita, Rump, Oishi: Accurate sum and dot product, SIAM J.
 * Sci. Comput. 2005): with N < 2^26 terms t the sum is off by at most u |sum| + (N u)^2 sum |t|.
 */
import { mulHigh } from "../random/choices";
import { fractionOf, turn, turnCos, turnSin } from "./phase";
import { FOLD_NONE, foldKey, HEADER, hash2, hashKey, home, locate, slotsOf, vacant } from "./table";

let sum0: f64 = 0;
let lost0: f64 = 0;
let sum1: f64 = 0;
let lost1: f64 = 0;

function reset(): void {
  sum0 = 0;
  lost0 = 0;
  sum1 = 0;
  lost1 = 0;
}

function add0(t: f64): void {
  const s = sum0 + t;
  const z = s - sum0;
  lost0 += sum0 - (s - z) + (t - z);
  sum0 = s;
}

function add1(t: f64): void {
  const s = sum1 + t;
  const z = s - sum1;
  lost1 += sum1 - (s - z) + (t - z);
  sum1 = s;
}

/** Address of the slot that holds `key` (folded already), or 0. */
function find(table: usize, key: usize, dimension: u32, width: u32): usize {
  const h = dimension == 2 ? hash2(load<i64>(key), load<i64>(key, 8)) : hashKey(key, dimension);
  const at = locate(table, key, dimension, (<usize>(dimension + width)) << 3, home(h, table));
  return vacant(at, dimension) ? 0 : at;
}

/**
 * Sum over the slots of a_k times the conjugate of b_k, real part; writes it at `out`, and
 * the sum of the products' absolute values, and the number of common frequencies, after it.
 * The second table is the one looked up.
 */
export function dualPair(out: usize, a: usize, b: usize, dimension: u32, width: u32): void {
  const stride = (<usize>(dimension + width)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  const end = a + HEADER + <usize>slotsOf(a) * stride;
  let absolute: f64 = 0;
  let met: f64 = 0;
  reset();
  for (let slot = a + HEADER; slot < end; slot += stride) {
    if (vacant(slot, dimension)) continue;
    const other = a == b ? slot : find(b, slot, dimension, width);
    if (other == 0) continue;
    met += 1;
    const t = load<f64>(slot + keyBytes) * load<f64>(other + keyBytes);
    add0(t);
    absolute += abs(t);
    if (width == 2) {
      const v = load<f64>(slot + keyBytes, 8) * load<f64>(other + keyBytes, 8);
      add0(v);
      absolute += abs(v);
    }
  }
  store<f64>(out, sum0 + lost0);
  store<f64>(out, absolute, 8);
  store<f64>(out, met, 16);
}

let wide0: u64 = 0;
let wide1: u64 = 0;

/** Adds a b to the 128 bits of wide1, wide0, signed. */
function addWide(a: i64, b: i64): void {
  const low = <u64>a * <u64>b;
  const high = mulHigh(<u64>a, <u64>b) - (a < 0 ? <u64>b : 0) - (b < 0 ? <u64>a : 0);
  wide0 += low;
  wide1 += high + u64(wide0 < low);
}

/**
 * `dualPair` for tables of integers, exactly: 128 bits at `out`, low word first. Each table's
 * sum of absolute values is below 2^63, so that the sum of products is below 2^126.
 */
export function dualPairExact(out: usize, a: usize, b: usize, dimension: u32, width: u32): void {
  const stride = (<usize>(dimension + width)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  const end = a + HEADER + <usize>slotsOf(a) * stride;
  wide0 = 0;
  wide1 = 0;
  for (let slot = a + HEADER; slot < end; slot += stride) {
    if (vacant(slot, dimension)) continue;
    const other = a == b ? slot : find(b, slot, dimension, width);
    if (other == 0) continue;
    addWide(load<i64>(slot + keyBytes), load<i64>(other + keyBytes));
    if (width == 2) addWide(load<i64>(slot + keyBytes, 8), load<i64>(other + keyBytes, 8));
  }
  store<u64>(out, wide0);
  store<u64>(out, wide1, 8);
}

/** Sum of c_k exp(2 pi i k.x), written as two doubles at `out`; `point`: d fractions of 128 bits. */
export function dualEvaluate(out: usize, table: usize, point: usize, dimension: u32, width: u32): void {
  const stride = (<usize>(dimension + width)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  const end = table + HEADER + <usize>slotsOf(table) * stride;
  reset();
  for (let slot = table + HEADER; slot < end; slot += stride) {
    if (vacant(slot, dimension)) continue;
    turn(fractionOf(slot, point, dimension));
    const re = load<f64>(slot + keyBytes);
    if (width == 1) {
      add0(re * turnCos);
      add1(re * turnSin);
    } else {
      const im = load<f64>(slot + keyBytes, 8);
      add0(re * turnCos - im * turnSin);
      add1(re * turnSin + im * turnCos);
    }
  }
  store<f64>(out, sum0 + lost0);
  store<f64>(out, sum1 + lost1, 8);
}

/** Largest |real| + |imaginary| of a coefficient, at `out`. */
export function dualLargestCoefficient(table: usize, dimension: u32, width: u32): f64 {
  const stride = (<usize>(dimension + width)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  const end = table + HEADER + <usize>slotsOf(table) * stride;
  let largest: f64 = 0;
  for (let slot = table + HEADER; slot < end; slot += stride) {
    let size = abs(load<f64>(slot + keyBytes));
    if (width == 2) size += abs(load<f64>(slot + keyBytes, 8));
    largest = max(largest, size);
  }
  return largest;
}

/** Slot address of the frequency at `key`, or 0 where the table does not hold it; `key` is folded in place. */
export function dualFind(table: usize, key: usize, dimension: u32, width: u32, fold: u32): usize {
  if (fold != FOLD_NONE) foldKey(key, dimension);
  return find(table, key, dimension, width);
}

/** Copies the taken ones of the slots from, ..., to - 1 one after the other to `out`; returns their number. */
export function dualGather(out: usize, table: usize, from: u32, to: u32, dimension: u32, width: u32): u32 {
  const stride = (<usize>(dimension + width)) << 3;
  const end = table + HEADER + <usize>to * stride;
  const first = out;
  for (let slot = table + HEADER + <usize>from * stride; slot < end; slot += stride) {
    if (vacant(slot, dimension)) continue;
    memory.copy(out, slot, stride);
    out += stride;
  }
  return <u32>((out - first) / stride);
}
