/** Observables along a path: the kernel against plain TypeScript on the same positions. */
import { drawStartWords } from "../src/kernel/draws.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { type ObserveProgram, Observer } from "../src/kernel/observe.js";
import { type Comparison, compare } from "./compare.js";

const ROWS = 100_000;
const FREQUENCIES = [
  [1n, 0n],
  [0n, 1n],
  [2n, -3n],
] as const;

/** Cosine, sine and a quarter box: three waves and an indicator. */
const program: ObserveProgram = {
  dimension: 2,
  frequencies: FREQUENCIES,
  observables: [
    ...FREQUENCIES.map((_, frequency) => ({ type: "waves" as const, waves: [{ frequency, cos: 1, sin: 0.5 }] })),
    {
      type: "box",
      sides: [
        { coordinate: 0, low: 0n, span: (1n << 63n) - 1n },
        { coordinate: 1, low: 0n, span: (1n << 63n) - 1n },
      ],
    },
  ],
};

/** Doubles throughout: a position's top 53 bits, Math.cos and Math.sin, a running sum. */
function plainDoubles(path: Float64Array): Float64Array {
  const sums = new Float64Array(4);
  for (let r = 0; r < ROWS; r++) {
    const x = path[2 * r] as number;
    const y = path[2 * r + 1] as number;
    for (let i = 0; i < 3; i++) {
      const k = FREQUENCIES[i] as readonly [bigint, bigint];
      const t = 2 * Math.PI * (Number(k[0]) * x + Number(k[1]) * y);
      sums[i] = (sums[i] as number) + Math.cos(t) + 0.5 * Math.sin(t);
    }
    if (x < 0.5 && y < 0.5) sums[3] = (sums[3] as number) + 1;
  }
  return sums;
}

/** The phase exact modulo 1, by BigInt: what the kernel does. */
function plainExact(path: BigUint64Array): Float64Array {
  const sums = new Float64Array(4);
  const half = 1n << 63n;
  for (let r = 0; r < ROWS; r++) {
    const x = path[2 * r] as bigint;
    const y = path[2 * r + 1] as bigint;
    for (let i = 0; i < 3; i++) {
      const k = FREQUENCIES[i] as readonly [bigint, bigint];
      const t = (Number(BigInt.asIntN(64, k[0] * x + k[1] * y)) / 2 ** 64) * 2 * Math.PI;
      sums[i] = (sums[i] as number) + Math.cos(t) + 0.5 * Math.sin(t);
    }
    if (x < half && y < half) sums[3] = (sums[3] as number) + 1;
  }
  return sums;
}

export async function suite(): Promise<Comparison[]> {
  const path = drawStartWords(await loadKernel(), 1n, 0, 0, 2 * ROWS);
  const doubles = Float64Array.from(path, (x) => Number(x >> 11n) / 2 ** 53);
  const simd = new Observer(await loadKernel({ target: "simd" }), program);
  const plain = new Observer(await loadKernel({ target: "plain" }), program);
  const sums = (o: Observer) => {
    const out = new Float64Array(4);
    o.segmentSums(path, [ROWS], out);
    return out;
  };
  return [
    await compare(
      "3 waves and a box along 100,000 positions",
      [
        { label: "kernel (SIMD)", run: () => sums(simd) },
        { label: "kernel (plain build)", run: () => sums(plain) },
        { label: "plain TypeScript, doubles", run: () => plainDoubles(doubles) },
        { label: "plain TypeScript, exact phases by BigInt", run: () => plainExact(path) },
      ],
      (a, b) => a.every((x, i) => Math.abs(x - (b[i] as number)) < 1e-6),
    ),
  ];
}
