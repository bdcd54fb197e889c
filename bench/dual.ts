/** Dual evolution: the kernel's tables against a Map of plain TypeScript and hash tables of C++; cost by terms. */
import { DualTables } from "../src/kernel/dual.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { type Comparison, compare, comparison, medianTime } from "./compare.js";
import { peer } from "./native.js";

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

const STEPS = 13;

/** `steps` steps of the kernel from one frequency, in tables made for `entries` of them. */
async function kernelRun(steps: number, entries: number) {
  const kernel = await loadKernel();
  const tables = new DualTables(kernel, { dimension: 2, width: 1, fold: "even" }, entries, 2);
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
  return { run, count: () => tables.count(steps & 1), bytes: tables.bytesEach };
}

/** Against Abseil's and Tessil's tables in C++; one word for the answer, see native/dual.cpp. */
async function peers(): Promise<Comparison[]> {
  const libraries = ["-labsl_hash", "-labsl_raw_hash_set", "-labsl_city", "-labsl_low_level_hash"];
  const native = peer("dual.cpp", "g++", [...libraries, "-labsl_hashtablez_sampler"]);
  if (native === undefined) return [];
  const { run, count } = await kernelRun(STEPS, 3 ** STEPS);
  const milliseconds = await medianTime(3, run);
  const answer = (BigInt(count()) << 32n) | BigInt(Math.round(1e9 * run()));
  const rows = ["absl", "hopscotch"].map((label) => {
    const { milliseconds: time, hash } = native.run(new BigUint64Array(1), label, String(STEPS), "3");
    return { label: `${label}, C++`, milliseconds: time, answer: hash };
  });
  const products = 4 * ((3 ** STEPS - 1) / 2);
  const name = `${STEPS} steps, ${count()} frequencies: ${(products / milliseconds / 1000).toFixed(1)} million insertions a second`;
  return [comparison(name, [{ label: "kernel", milliseconds, answer }, ...rows])];
}

/** Time and memory of <f, P^n f> for n up to 2 steps, by steps: both grow by the same factor. */
async function cost(): Promise<Comparison> {
  const rows = [];
  for (const steps of [8, 10, 12, 14]) {
    const { run, count, bytes } = await kernelRun(steps, 3 ** steps);
    const milliseconds = await medianTime(3, run);
    const mebibytes = (2 * bytes * count()) / 2 ** 20;
    rows.push({
      label: `n to ${2 * steps}: ${count()} frequencies, ${mebibytes.toFixed(2)} MiB at ${bytes} bytes each, two tables`,
      milliseconds,
    });
  }
  return comparison("cost and memory of correlations against their number", rows);
}

export async function suite(): Promise<Comparison[]> {
  const out: Comparison[] = [];
  for (const steps of [8, 12]) {
    const { run } = await kernelRun(steps, 2 ** 21);
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
  return [...out, ...(await peers()), await cost()];
}
