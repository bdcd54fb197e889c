/** Dual evolution: the kernel's tables against a Map of plain TypeScript, ten steps of four shears. */
import { DualTables } from "../src/kernel/dual.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { type Comparison, compare } from "./compare.js";

const SHEARS: readonly (readonly [number, number, number, number])[] = [
  [1, 2, 0, 1],
  [1, -2, 0, 1],
  [1, 0, 2, 1],
  [1, 0, -2, 1],
];

/** Frequencies of an even function, small enough for one exact double as key: (k0 + 2^25) 2^26 + (k1 + 2^25). */
function plain(steps: number): number {
  const half = 2 ** 25;
  const base = 2 ** 26;
  let table = new Map<number, number>([[(1 + half) * base + half, 0.5]]);
  for (let n = 0; n < steps; n++) {
    const next = new Map<number, number>();
    for (const [key, c] of table) {
      const k0 = Math.floor(key / base) - half;
      const k1 = (key % base) - half;
      for (const [a, b, e, f] of SHEARS) {
        let i0 = a * k0 + b * k1;
        let i1 = e * k0 + f * k1;
        if (i0 < 0 || (i0 === 0 && i1 < 0)) {
          i0 = -i0;
          i1 = -i1;
        }
        const image = (i0 + half) * base + (i1 + half);
        next.set(image, (next.get(image) ?? 0) + 0.25 * c);
      }
    }
    table = next;
  }
  let sum = 0;
  for (const c of table.values()) sum += 2 * c * c;
  return sum;
}

export async function suite(): Promise<Comparison[]> {
  const out: Comparison[] = [];
  for (const steps of [8, 12]) {
    const kernel = await loadKernel();
    const tables = new DualTables(kernel, { dimension: 2, width: 1, fold: "even" }, 2 ** 21, 2);
    const moves = tables.place(
      SHEARS.map(([a, b, c, d]) => ({
        matrix: [
          [BigInt(a), BigInt(b)],
          [BigInt(c), BigInt(d)],
        ],
        weight: 0.25,
      })),
    );
    const run = () => {
      tables.fill(0, [{ frequency: [1n, 0n], re: 0.5, im: 0 }]);
      for (let n = 0; n < steps; n++) {
        const end = tables.evolve(n & 1, 1 - (n & 1), moves);
        if (end !== "done") throw new Error(`step ${n} ended ${end}`);
      }
      return 2 * tables.pair(steps & 1, steps & 1).sum;
    };
    out.push(
      await compare(
        `${steps} steps of the dual walk, four shears`,
        [
          { label: "kernel", run },
          { label: "Map of doubles", run: () => plain(steps) },
        ],
        (a, b) => Math.abs(a - b) < 1e-12 * Math.abs(b),
      ),
    );
  }
  return out;
}
