/** Binary digits of exact numbers, as the window kernel holds them. */
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { drawStartWords } from "../kernel/draws.js";
import type { Kernel } from "../kernel/kernel.js";
import type { StartDigits } from "../kernel/trajectory.js";

/** Writes m (0 <= m < 2^(32 limbs)) to every `stride`-th place from `first`, least significant limb first. */
function scatter(m: bigint, limbs: number, values: Uint32Array, first: number, stride: number): void {
  const hex = m.toString(16).padStart(8 * limbs, "0");
  for (let i = 0; i < limbs; i++) {
    const end = hex.length - 8 * i;
    values[first + i * stride] = Number.parseInt(hex.slice(end - 8, end), 16);
  }
}

/** Extra bits beyond which two candidates for a floor are left undecided. */
const MOST_SPARE = 4096;

/**
 * floor(x 2^bits), so that fewer bits asked for later are the same digits: extra bits
 * until the proved error of one unit decides. (A number that looks like a short dyadic
 * fraction through 4096 extra bits, yet is not known to be rational, may be one unit off.)
 */
export function binaryFloor(x: ExactNumber, bits: number): bigint {
  if (x.rational !== undefined) return Rational.of(x.rational.num << BigInt(bits), x.rational.den).floor();
  for (let spare = 32; ; spare *= 4) {
    const m = x.toFixed(bits + spare);
    const low = (m - 1n) >> BigInt(spare);
    if (low === (m + 1n) >> BigInt(spare) || spare > MOST_SPARE) return low;
  }
}

/** The first 64 `words` bits of one coordinate of a replicate's uniform point, as an integer. */
export function uniformFloor(
  kernel: Kernel,
  seed: bigint,
  replicate: number,
  coordinate: number,
  words: number,
): bigint {
  const drawn = drawStartWords(kernel, seed, replicate, coordinate, words);
  return BigInt(`0x${Array.from(drawn, (w) => w.toString(16).padStart(16, "0")).join("")}`);
}

/** The first 32 `limbs` bits after the binary point of each number modulo 1, rounded down; absent numbers: zeros. */
export function startDigits(numbers: readonly (ExactNumber | undefined)[], limbs: number): StartDigits {
  const values = new Uint32Array(limbs * numbers.length);
  const bits = 32 * limbs;
  for (const [j, x] of numbers.entries()) {
    if (x !== undefined) scatter(BigInt.asUintN(bits, binaryFloor(x, bits)), limbs, values, j, numbers.length);
  }
  return { limbs, values };
}
