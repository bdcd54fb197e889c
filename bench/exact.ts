/** Bits of sqrt(2): Newton with doubling precision against Newton at full length. */
import { exactFromText } from "../src/exact/read.js";
import { type Comparison, compare } from "./compare.js";

const BITS = 100_000;

/** Newton's iteration for floor(sqrt(n)) at full length, from a power of two above the root. */
function plainSqrt(n: bigint): bigint {
  let x = 1n << BigInt(Math.ceil(n.toString(16).length * 2));
  for (;;) {
    const y = (x + n / x) >> 1n;
    if (y >= x) return x;
    x = y;
  }
}

const close = (a: bigint, b: bigint) => a - b <= 2n && b - a <= 2n;

export async function suite(): Promise<Comparison[]> {
  return [
    await compare(
      `sqrt(2) to ${BITS} bits`,
      [
        { label: "exact number", run: () => exactFromText("sqrt(2)").toFixed(BITS) },
        { label: "plain Newton", run: () => plainSqrt(2n << BigInt(2 * BITS)) },
      ],
      close,
    ),
  ];
}
