/** Draws of moves: the kernel against the same generator in plain TypeScript. */
import { Rational } from "../src/exact/rational.js";
import { cumulativeWeights, drawMoves } from "../src/kernel/draws.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { type Comparison, compare } from "./compare.js";

/** Philox4x32-10 with BigInt products, four moves a block, for two equal weights. */
function plain(seed: bigint, count: number): Uint16Array {
  const out = new Uint16Array(count);
  const low = (x: bigint) => x & 0xffffffffn;
  for (let b = 0; 4 * b < count; b++) {
    let c = [BigInt(b), 0n, 0n, 0n];
    let [k0, k1] = [low(seed), seed >> 32n];
    for (let round = 0; round < 10; round++) {
      const p0 = 0xd2511f53n * c[0]!;
      const p1 = 0xcd9e8d57n * c[2]!;
      c = [(p1 >> 32n) ^ c[1]! ^ k0, low(p1), (p0 >> 32n) ^ c[3]! ^ k1, low(p0)];
      k0 = low(k0 + 0x9e3779b9n);
      k1 = low(k1 + 0xbb67ae85n);
    }
    for (let i = 0; i < 4 && 4 * b + i < count; i++) out[4 * b + i] = Number(c[i]! >> 31n);
  }
  return out;
}

export async function suite(): Promise<Comparison[]> {
  const kernel = await loadKernel();
  const table = cumulativeWeights([Rational.of(1, 2), Rational.of(1, 2)]);
  return [
    await compare(
      "10,000 draws of a move",
      [
        { label: "kernel", run: () => drawMoves(kernel, table, 1n, 0, 0, 10_000) },
        { label: "plain BigInt", run: () => plain(1n, 10_000) },
      ],
      (a, b) => a.every((x, i) => x === b[i]),
    ),
  ];
}
