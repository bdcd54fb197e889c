/** Orbits of (Z/q)^2 and the averaged operator: the kernel against plain TypeScript on typed arrays. */
import { FinitePoints, OrbitOperator, type ResidueMap } from "../src/kernel/finite.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { type Comparison, compare } from "./compare.js";

const q = 500;
const maps: ResidueMap[] = [
  [1, 2, 0, 1],
  [1, q - 2, 0, 1],
  [1, 0, 2, 1],
  [1, 0, q - 2, 1],
].map(([a, b, c, d]) => ({ matrix: [[a, b] as number[], [c, d] as number[]], translation: [0, 0] }));

/** Sizes of all orbits by breadth-first search. */
function plainSizes(): number[] {
  const points = q * q;
  const table = new Uint32Array(points * maps.length);
  for (const [m, { matrix }] of maps.entries()) {
    const [[a, b], [c, d]] = matrix as [[number, number], [number, number]];
    for (let x = 0; x < q; x++) {
      for (let y = 0; y < q; y++) {
        table[(x * q + y) * maps.length + m] = ((a * x + b * y) % q) * q + ((c * x + d * y) % q);
      }
    }
  }
  const met = new Uint8Array(points);
  const queue = new Uint32Array(points);
  const sizes: number[] = [];
  let filled = 0;
  for (let p = 0; p < points; p++) {
    if (met[p]) continue;
    const first = filled;
    met[p] = 1;
    queue[filled++] = p;
    for (let next = first; next < filled; next++) {
      const row = queue[next]! * maps.length;
      for (let m = 0; m < maps.length; m++) {
        const t = table[row + m]!;
        if (!met[t]) {
          met[t] = 1;
          queue[filled++] = t;
        }
      }
    }
    sizes.push(filled - first);
  }
  return sizes;
}

export async function suite(): Promise<Comparison[]> {
  const labelling = await loadKernel();
  const sizes = () =>
    labelling.scoped(() => {
      const points = new FinitePoints(labelling, 2, q, maps);
      return Array.from({ length: points.count }, (_, o) => points.sizeOf(o));
    });

  const kernel = await loadKernel();
  const table = new FinitePoints(kernel, 2, q, maps).tableOf(1);
  const weights = maps.map(() => 1 / maps.length);
  const operator = new OrbitOperator(kernel, table, weights, 2);
  operator.random(0, 1n);
  const v = operator.read(0);
  const w = new Float64Array(v.length);
  const plainApply = () => {
    const m = weights.length;
    for (let i = 0; i < w.length; i++) {
      let sum = 0;
      for (let j = 0; j < m; j++) sum += weights[j]! * v[table[i * m + j]!]!;
      w[i] = sum;
    }
    return w;
  };
  const same = (a: ArrayLike<number>, b: ArrayLike<number>) =>
    a.length === b.length && Array.prototype.every.call(a, (x, i) => x === b[i]);
  return [
    await compare(
      `orbits of (Z/${q})^2 under four moves`,
      [
        { label: "kernel (with each point's place)", run: sizes },
        { label: "plain TypeScript", run: plainSizes },
      ],
      same,
    ),
    await compare(
      `the averaged operator on ${operator.size} points, 20 times`,
      [
        {
          label: "kernel",
          run: () => {
            for (let i = 0; i < 20; i++) operator.apply(0, 1);
            return operator.read(1);
          },
        },
        {
          label: "plain TypeScript",
          run: () => {
            for (let i = 0; i < 20; i++) plainApply();
            return w;
          },
        },
      ],
      same,
    ),
  ];
}
