/**
 * One move of the dual walk: sum of c_k e_k goes to the sum of p_i exp(2 pi i k.b_i) c_k
 * at M_i k over all moves i, equal frequencies merged.
 *
 * Products are made in blocks: first all images, phases and hashes of a block, then a look
 * at each home slot, so that the memory's answers overlap, then the insertions, in the
 * order of the source table. The order of every addition is fixed by the two tables'
 * sizes, so the result has the same bits everywhere.
 *
 * A move: d x d entries of M_i (i64, by rows), its weight (f64), a flag (u64: 1 where it
 * has a phase), d fractions of b_i (16 bytes each: low word, high word).
 * With a modulus q > 0 (below 2^31) frequencies are residues in [0, q).
 *
 * Coefficients are f64, or i64: exact integers, with integer weights and no phases; the
 * caller sees to it that no sum of their absolute values reaches 2^63. Images with a
 * component beyond `keep` (where that is positive) are dropped.
 */
import { FULL, OK, OVERFLOW } from "../status";
import { fractionOf, turn, turnCos, turnSin } from "./phase";
import {
  dualCount,
  FOLD_EVEN,
  FOLD_NONE,
  foldKey,
  HEADER,
  hash2,
  hashKey,
  home,
  inPart,
  locate,
  partsOf,
  slotsOf,
  vacant,
} from "./table";

const BLOCK: u32 = 256;
/** A staged product: 8 components, two doubles, the home slot's address, a spare word. */
const STAGED: usize = 96;
const stage = memory.data(24576, 16);
/** Components stay below this: 2^63 less 2^16, more than the bound's own rounding, (d + 2) 2^-53 2^63. */
const ROOM: f64 = 9223372036854710272.0;

export function dualMoveBytes(dimension: u32): u32 {
  return 8 * (dimension * dimension + 2 + 2 * dimension);
}

/** Whether every component of the image of `key` stays within 63 bits. */
function fits(key: usize, matrix: usize, dimension: u32): bool {
  for (let r: u32 = 0; r < dimension; r++) {
    let bound: f64 = 0;
    for (let c: u32 = 0; c < dimension; c++) {
      const m = load<i64>(matrix + ((<usize>(r * dimension + c)) << 3));
      bound += abs(<f64>m) * abs(<f64>load<i64>(key + ((<usize>c) << 3)));
    }
    if (bound > ROOM) return false;
  }
  return true;
}

function image(out: usize, key: usize, matrix: usize, dimension: u32, modulus: i64): void {
  if (dimension == 2 && modulus == 0) {
    const k0 = load<i64>(key);
    const k1 = load<i64>(key, 8);
    store<i64>(out, load<i64>(matrix) * k0 + load<i64>(matrix, 8) * k1);
    store<i64>(out, load<i64>(matrix, 16) * k0 + load<i64>(matrix, 24) * k1, 8);
    return;
  }
  for (let r: u32 = 0; r < dimension; r++) {
    let sum: i64 = 0;
    for (let c: u32 = 0; c < dimension; c++) {
      sum += load<i64>(matrix + ((<usize>(r * dimension + c)) << 3)) * load<i64>(key + ((<usize>c) << 3));
      if (modulus != 0) sum %= modulus;
    }
    store<i64>(out + ((<usize>r) << 3), sum);
  }
}

/**
 * A tight loop of independent looks at the home slots, so that the memory's answers overlap;
 * what was seen is stored, or the compiler would leave the looks out.
 */
function lookAhead(count: u32): void {
  let seen: u64 = 0;
  for (let i: u32 = 0; i < count; i++) seen ^= load<u64>(<usize>load<u64>(stage + STAGED * i, 80));
  store<u64>(stage, seen, 88);
}

/** Adds the staged products to the table; false where it is full. */
function insertStaged<T>(to: usize, count: u32, dimension: u32, width: u32): bool {
  lookAhead(count);
  const stride = (<usize>(dimension + width)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  const limit = load<u32>(to, 8);
  const end = to + HEADER + <usize>slotsOf(to) * stride;
  let entries = dualCount(to);
  let largest = load<i64>(to, 16);
  for (let i: u32 = 0; i < count; i++) {
    const at = stage + STAGED * i;
    let slot = <usize>load<u64>(at, 80);
    let fresh: bool;
    if (dimension == 2) {
      const k0 = load<i64>(at);
      const k1 = load<i64>(at, 8);
      while (true) {
        const h0 = load<i64>(slot);
        const h1 = load<i64>(slot, 8);
        fresh = (h0 | h1) == 0;
        if (fresh || (h0 == k0 && h1 == k1)) break;
        slot += stride;
        if (slot == end) slot = to + HEADER;
      }
    } else {
      const from = <u32>((slot - to - HEADER) / stride);
      slot = locate(to, at, dimension, stride, from);
      fresh = vacant(slot, dimension);
    }
    if (fresh) {
      if (entries == limit) {
        store<u32>(to, entries, 4);
        return false;
      }
      entries++;
      for (let j: u32 = 0; j < dimension; j++) {
        const k = load<i64>(at + ((<usize>j) << 3));
        store<i64>(slot + ((<usize>j) << 3), k);
        largest = max(largest, abs(k));
      }
      store<T>(slot + keyBytes, load<T>(at, 64));
      if (width == 2) store<T>(slot + keyBytes, load<T>(at, 72), 8);
    } else {
      store<T>(slot + keyBytes, load<T>(slot + keyBytes) + load<T>(at, 64));
      if (width == 2) store<T>(slot + keyBytes, load<T>(slot + keyBytes, 8) + load<T>(at, 72), 8);
    }
  }
  store<u32>(to, entries, 4);
  store<i64>(to, largest, 16);
  return true;
}

/** Folds the staged key, flips the coefficient where the fold asks, finds the home slot; false where it lies in another part. */
function settle<T>(to: usize, at: usize, dimension: u32, width: u32, fold: u32, whole: bool): bool {
  if (fold != FOLD_NONE && foldKey(at, dimension) && fold != FOLD_EVEN) {
    const last = at + 64 + ((<usize>(width - 1)) << 3);
    store<T>(last, <T>-load<T>(last));
  }
  const h = dimension == 2 ? hash2(load<i64>(at), load<i64>(at, 8)) : hashKey(at, dimension);
  if (!whole && !inPart(to, h)) return false;
  const slot = to + HEADER + <usize>home(h, to) * ((<usize>(dimension + width)) << 3);
  store<u64>(at, slot, 80);
  return true;
}

/** Puts `count` given terms (d components, two coefficients each) into the table. OK or FULL. */
export function dualAdd(to: usize, terms: usize, count: u32, dimension: u32, width: u32, fold: u32, exact: bool): i32 {
  return exact
    ? addTerms<i64>(to, terms, count, dimension, width, fold)
    : addTerms<f64>(to, terms, count, dimension, width, fold);
}

function addTerms<T>(to: usize, terms: usize, count: u32, dimension: u32, width: u32, fold: u32): i32 {
  const bytes = (<usize>(dimension + 2)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  for (let i: u32 = 0; i < count; i++) {
    const term = terms + bytes * i;
    memory.copy(stage, term, keyBytes);
    store<T>(stage, load<T>(term + keyBytes), 64);
    store<T>(stage, load<T>(term + keyBytes, 8), 72);
    if (!settle<T>(to, stage, dimension, width, fold, false)) continue;
    if (!insertStaged<T>(to, 1, dimension, width)) return FULL;
  }
  return OK;
}

/** Whether a component is beyond `keep`. */
function beyond(key: usize, dimension: u32, keep: i64): bool {
  for (let j: u32 = 0; j < dimension; j++) if (abs(load<i64>(key + ((<usize>j) << 3))) > keep) return true;
  return false;
}

/**
 * Adds the image of table `from` to table `to` (cleared by the caller).
 * OVERFLOW and FULL leave `to` unfinished and `from` as it was.
 */
export function dualEvolve(
  from: usize,
  to: usize,
  moves: usize,
  moveCount: u32,
  dimension: u32,
  width: u32,
  fold: u32,
  modulus: i64,
  checked: bool,
  keep: i64,
  exact: bool,
): i32 {
  return exact
    ? evolve<i64>(from, to, moves, moveCount, dimension, width, fold, modulus, checked, keep)
    : evolve<f64>(from, to, moves, moveCount, dimension, width, fold, modulus, checked, keep);
}

function evolve<T>(
  from: usize,
  to: usize,
  moves: usize,
  moveCount: u32,
  dimension: u32,
  width: u32,
  fold: u32,
  modulus: i64,
  checked: bool,
  keep: i64,
): i32 {
  const stride = (<usize>(dimension + width)) << 3;
  const keyBytes = (<usize>dimension) << 3;
  const moveBytes = <usize>dualMoveBytes(dimension);
  const weightAt = (<usize>(dimension * dimension)) << 3;
  const end = from + HEADER + <usize>slotsOf(from) * stride;
  const whole = partsOf(to) == 1;
  let staged: u32 = 0;
  for (let slot = from + HEADER; slot < end; slot += stride) {
    if (vacant(slot, dimension)) continue;
    const re = load<T>(slot + keyBytes);
    const im: T = width == 2 ? load<T>(slot + keyBytes, 8) : <T>0;
    let move = moves;
    for (let i: u32 = 0; i < moveCount; i++, move += moveBytes) {
      if (checked && !fits(slot, move, dimension)) return OVERFLOW;
      const at = stage + STAGED * staged;
      image(at, slot, move, dimension, modulus);
      if (keep > 0 && beyond(at, dimension, keep)) continue;
      const weight = load<T>(move + weightAt);
      if (load<u64>(move + weightAt, 8) == 0) {
        store<T>(at, <T>(weight * re), 64);
        store<T>(at, <T>(weight * im), 72);
      } else {
        turn(fractionOf(slot, move + weightAt + 16, dimension));
        const c = <f64>weight * turnCos;
        const s = <f64>weight * turnSin;
        store<T>(at, <T>(c * <f64>re - s * <f64>im), 64);
        store<T>(at, <T>(c * <f64>im + s * <f64>re), 72);
      }
      if (!settle<T>(to, at, dimension, width, fold, whole)) continue;
      if (++staged == BLOCK) {
        if (!insertStaged<T>(to, staged, dimension, width)) return FULL;
        staged = 0;
      }
    }
  }
  return insertStaged<T>(to, staged, dimension, width) ? OK : FULL;
}
