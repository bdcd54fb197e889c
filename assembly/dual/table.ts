/**
 * Frequency tables: open addressing with linear probing, in place in linear memory.
 *
 * A table is a header of 64 bytes and then its slots. Header: slots (u32), entries (u32),
 * the most entries it may take (u32), parts (u32), the largest |component| (i64), part (u32).
 * A table with part p of P takes the keys whose hash lies in the p-th of P equal ranges, so
 * that the parts of one function may be made apart from each other.
 * Slot: d components (i64), then the coefficient: one double, or two (real, imaginary).
 * The frequency 0 marks an empty slot: it is mapped to itself by every move, so the
 * constant of a function never needs a table.
 *
 * Under a fold, k and -k share a slot: the one whose first non-zero component is positive
 * (half the table for functions that are real). What becomes of the coefficient when k
 * turns into -k is the kind of fold.
 */
export const HEADER: usize = 64;
/** k and -k are apart. */
export const FOLD_NONE: u32 = 0;
/** The coefficient at -k is that at k. */
export const FOLD_EVEN: u32 = 1;
/** The last double changes sign: an odd function (one double) or a conjugate (two). */
export const FOLD_CONJUGATE: u32 = 2;

export function dualFoldNone(): u32 {
  return FOLD_NONE;
}
export function dualFoldEven(): u32 {
  return FOLD_EVEN;
}
export function dualFoldConjugate(): u32 {
  return FOLD_CONJUGATE;
}
export function dualHeaderBytes(): u32 {
  return <u32>HEADER;
}

export function dualSlots(table: usize): u32 {
  return slotsOf(table);
}
export function slotsOf(table: usize): u32 {
  return load<u32>(table);
}
export function dualCount(table: usize): u32 {
  return load<u32>(table, 4);
}
export function partsOf(table: usize): u32 {
  return load<u32>(table, 12);
}
export function dualLargest(table: usize): i64 {
  return load<i64>(table, 16);
}

/** Empties a table and gives it `slots` slots of `stride` bytes, at most `limit` of them taken. */
export function dualClear(table: usize, slots: u32, limit: u32, stride: u32): void {
  store<u32>(table, slots);
  store<u32>(table, 0, 4);
  store<u32>(table, limit, 8);
  store<u32>(table, 1, 12);
  store<u32>(table, 0, 24);
  store<i64>(table, 0, 16);
  memory.fill(table + HEADER, 0, <usize>slots * stride);
}

function mix(h: u64): u64 {
  h ^= h >> 32;
  h *= 0x9fb21c651e98df25;
  h ^= h >> 29;
  h *= 0xd6e8feb86659fd93;
  return h ^ (h >> 32);
}

export function hash2(k0: i64, k1: i64): u64 {
  return mix(<u64>k0 * 0x9e3779b97f4a7c15 + rotl<u64>(<u64>k1 * 0xc2b2ae3d27d4eb4f, 31));
}

export function hashKey(key: usize, dimension: u32): u64 {
  let h: u64 = 0;
  for (let j: u32 = 0; j < dimension; j++) {
    h = rotl<u64>(h, 31) * 0x9e3779b97f4a7c15 + load<u64>(key + ((<usize>j) << 3)) * 0xc2b2ae3d27d4eb4f;
    h ^= h >> 27;
  }
  return mix(h);
}

/** Makes an empty table one of `parts` parts. */
export function dualSetPart(table: usize, part: u32, parts: u32): void {
  store<u32>(table, parts, 12);
  store<u32>(table, part, 24);
}

/** A header for `count` slots that the caller fills, all taken: to be read from slot to slot, not looked up in. */
export function dualSetPacked(table: usize, count: u32, largest: i64): void {
  store<u32>(table, count);
  store<u32>(table, count, 4);
  store<u32>(table, count, 8);
  store<u32>(table, 1, 12);
  store<i64>(table, largest, 16);
  store<u32>(table, 0, 24);
}

/** Whether a hash lies in the table's range. */
export function inPart(table: usize, h: u64): bool {
  return <u32>(((h >> 32) * <u64>partsOf(table)) >> 32) == load<u32>(table, 24);
}

/** Index of the slot at which probing for a hash starts: its place in the table's range. */
export function home(h: u64, table: usize): u32 {
  const within = ((h >> 32) * <u64>partsOf(table)) & 0xffffffff;
  return <u32>((within * <u64>slotsOf(table)) >> 32);
}

/** Address of the slot that holds `key`, or of the empty one where it would go. */
export function locate(table: usize, key: usize, dimension: u32, stride: usize, from: u32): usize {
  const slots = slotsOf(table);
  const end = table + HEADER + <usize>slots * stride;
  let at = table + HEADER + <usize>from * stride;
  while (true) {
    let any: u64 = 0;
    let differ: u64 = 0;
    for (let j: u32 = 0; j < dimension; j++) {
      const here = load<u64>(at + ((<usize>j) << 3));
      any |= here;
      differ |= here ^ load<u64>(key + ((<usize>j) << 3));
    }
    if (any == 0 || differ == 0) return at;
    at += stride;
    if (at == end) at = table + HEADER;
  }
}

/** Whether the slot at `at` is empty. */
export function vacant(at: usize, dimension: u32): bool {
  let any: u64 = 0;
  for (let j: u32 = 0; j < dimension; j++) any |= load<u64>(at + ((<usize>j) << 3));
  return any == 0;
}

/** Turns `key` into its representative of +-k; true where it changed sign. */
export function foldKey(key: usize, dimension: u32): bool {
  for (let j: u32 = 0; j < dimension; j++) {
    const k = load<i64>(key + ((<usize>j) << 3));
    if (k > 0) return false;
    if (k < 0) {
      for (let i = j; i < dimension; i++) {
        const at = key + ((<usize>i) << 3);
        store<i64>(at, -load<i64>(at));
      }
      return true;
    }
  }
  return false;
}
