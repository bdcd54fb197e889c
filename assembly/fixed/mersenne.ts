/** Integers modulo the prime 2^61 - 1: the check of products that do not wrap. */

const P: u64 = 0x1fffffffffffffff;

/** Below 2 P to below P (0 may also come as P: `same` knows). */
function fold(x: u64): u64 {
  return (x & P) + (x >> 61);
}

/** Whether two residues, each up to P, are the same. */
export function same61(a: u64, b: u64): bool {
  return a == b || (a == P && b == 0) || (a == 0 && b == P);
}

export function add61(a: u64, b: u64): u64 {
  return fold(a + b);
}

/** a b, by halves of 32 bits: 2^64 is 8, and 2^32 times x is x turned by 32 bits in 61. */
export function multiply61(a: u64, b: u64): u64 {
  const ah = a >> 32;
  const al = a & 0xffffffff;
  const bh = b >> 32;
  const bl = b & 0xffffffff;
  const middle = fold(ah * bl + al * bh);
  // middle 2^32: its low 29 bits go up, the others come round.
  const turned = ((middle & 0x1fffffff) << 32) + (middle >> 29);
  return fold(fold(fold(al * bl) + ((ah * bh) << 3)) + turned);
}

/** An integer in two's complement limbs of 64 bits, least significant first, modulo 2^61 - 1. */
export function residue61(at: usize, limbs: u32): u64 {
  let r: u64 = 0;
  let p = at + ((<usize>limbs) << 3);
  const negative = load<i64>(p - 8) < 0;
  do {
    p -= 8;
    const x = load<u64>(p);
    // 2^64 r = 8 r: three bits round, then the limb's.
    r = ((r << 3) & P) + (r >> 58) + fold(x);
    r = fold(r);
  } while (p > at);
  // Read without its sign, it was 2^(64 limbs) too large: 8^limbs, a turn by 3 limbs bits.
  if (negative) r = fold(r + (P - ((<u64>1) << ((3 * <u64>limbs) % 61))));
  return r;
}
