import { describe, expect, it } from "vitest";
import { OptionsError } from "../../src/errors.js";
import { exactRational } from "../../src/exact/number.js";
import { Rational } from "../../src/exact/rational.js";
import { law } from "../../src/law/law.js";
import type { LawResult } from "../../src/law/result.js";
import type { Quantity } from "../../src/quantity/quantity.js";
import type { Walk } from "../../src/walk/walk.js";
import { dot, move, number, phase, point, r, walkOf } from "../dual/naive.js";

const half = r(1, 2);
const tray = [
  move(
    [
      [2, 1],
      [1, 1],
    ],
    half,
  ),
  move(
    [
      [3, 1],
      [2, 1],
    ],
    half,
    1,
    [r(0), r(1, 3)],
  ),
];
const mirrored = [
  move(
    [
      [0, 1],
      [1, 1],
    ],
    r(1, 3),
    -1,
  ),
  move(
    [
      [1, -2],
      [0, 1],
    ],
    r(1, 6),
    1,
    [r(2, 7), r(-1, 5)],
  ),
  move(
    [
      [-1, 0],
      [3, 1],
    ],
    half,
    -1,
  ),
];

/** E exp(2 pi i k.x_n) over all sequences of n moves, each point an exact fraction. */
function brute(walk: Walk, k: bigint[], n: number): { re: number; im: number } {
  if (walk.start.type !== "point") throw new Error("a point is needed");
  let laws = [{ x: walk.start.point.map((c) => c.rational!), p: 1 }];
  for (let i = 0; i < n; i++) {
    laws = laws.flatMap(({ x, p }) =>
      walk.moves.map((m) => ({
        x: m.matrix.map((row, j) =>
          dot(row, x)
            .add(m.translation?.[j]?.rational ?? Rational.ZERO)
            .mod1(),
        ),
        p: p * m.probability.toNumber(),
      })),
    );
  }
  let [re, im] = [0, 0];
  for (const { x, p } of laws) {
    const e = phase(dot(k, x));
    re += p * e.re;
    im += p * e.im;
  }
  return { re, im };
}

function contains(q: Quantity, x: number, slack: number, width: number): void {
  expect(q.standing).toBe("enclosed");
  expect(Number(q.low)).toBeLessThanOrEqual(x + slack);
  expect(Number(q.high)).toBeGreaterThanOrEqual(x - slack);
  expect(Number(q.high) - Number(q.low)).toBeLessThan(width);
}

function agrees(result: LawResult, walk: Walk, k: bigint[], upTo: number): void {
  for (let n = 0; n <= upTo; n++) {
    const { re, im } = brute(walk, k, n);
    const c = result.coefficients[n]!;
    expect(c.step).toBe(n);
    contains(c.real, re, 1e-14, 1e-13);
    contains(c.imag, im, 1e-14, 1e-13);
  }
}

describe("law from a point", () => {
  it("encloses the average over all sequences of moves", async () => {
    for (const [moves, k] of [
      [tray, [1n, -2n]],
      [mirrored, [3n, 1n]],
    ] as const) {
      // Denominator 2^31 + 11 (residues do not apply), then a small one (they do).
      for (const start of [point([1234567, 2147483659], [7654321, 2147483659]), point([1, 6], [3, 4])]) {
        const walk = walkOf([...moves], start);
        agrees(await law(walk, { frequency: k, steps: 7, workers: 0, distance: false }), walk, [...k], 7);
      }
    }
  });

  it("runs on for a thousand steps from a rational start", async () => {
    const walk = walkOf(tray, point([1, 5], [2, 5]));
    const result = await law(walk, { frequency: [1, 0], steps: 1000, workers: 0, distance: false });
    expect(result.coefficients.length).toBe(1001);
    expect(result.stoppedAt).toBeUndefined();
    expect(result.coefficients.at(-1)!.frequencies).toBeLessThan(225);
    agrees(result, walk, [1n, 0n], 6);
    // The orbit of points with denominators 5 and 3: the limit is its mean, and the law is there by now.
    const last = result.coefficients.at(-1)!.real;
    const before = result.coefficients.at(-2)!.real;
    contains(last, before.value as number, 1e-12, 1e-10);
  });

  it("is exact where nothing has to be computed", async () => {
    const zero = await law(walkOf([tray[0]!], point([0, 1], [0, 1])), {
      frequency: [5, 3],
      steps: 3,
      workers: 0,
      distance: false,
    });
    for (const c of zero.coefficients) expect([c.real.value, c.real.standing, c.imag.value]).toEqual([1, "exact", 0]);
    const constant = await law(walkOf(tray, point([1, 7], [0, 1])), {
      frequency: [0, 0],
      steps: 2,
      workers: 0,
      distance: false,
    });
    expect(constant.coefficients.map((c) => c.real.value)).toEqual([1, 1, 1]);
    const uniform = await law(walkOf(tray), { frequency: ["1", "0"], workers: 0, distance: false });
    expect(uniform.coefficients.length).toBe(41);
    for (const c of uniform.coefficients) expect([c.real.value, c.real.standing]).toEqual([0, "exact"]);
  });
});

describe("law from a density", () => {
  it("agrees with integration on a fine grid", async () => {
    const terms = [
      { frequency: [0n, 0n], cos: number(1), sin: number(0) },
      { frequency: [2n, 1n], cos: number(1, 2), sin: number(1, 3) },
      { frequency: [-3n, -1n], cos: number(0), sin: number(1, 5) },
      { frequency: [1n, 0n], cos: number(1, 7), sin: number(0) },
    ];
    const walk = walkOf(tray, { type: "density", terms });
    const result = await law(walk, { frequency: [1, 0], steps: 3, workers: 0, distance: false });
    const N = 32; // exact for all frequencies below 32: those met here stay below 15
    for (const c of result.coefficients.slice(0, 3)) {
      let [re, im] = [0, 0];
      for (let a = 0; a < N; a++) {
        for (let b = 0; b < N; b++) {
          const x = [Rational.of(a, N), Rational.of(b, N)];
          let density = 1;
          for (const t of terms.slice(1)) {
            const e = phase(dot(t.frequency, x));
            density += t.cos.toNumber() * e.re + t.sin.toNumber() * e.im;
          }
          const e = c.step === 0 ? phase(x[0]!) : gridLaw(walk, [1n, 0n], c.step, x);
          re += (density * e.re) / N ** 2;
          im += (density * e.im) / N ** 2;
        }
      }
      if (c.real.standing === "exact") expect(Math.abs(re) + Math.abs(im)).toBeLessThan(1e-12);
      else {
        contains(c.real, re, 1e-12, 1e-13);
        contains(c.imag, im, 1e-12, 1e-13);
      }
    }
    expect(result.coefficients.map((c) => c.real.standing)).toEqual(["enclosed", "enclosed", "exact", "exact"]);
  });
});

function gridLaw(walk: Walk, k: bigint[], n: number, x: Rational[]) {
  return brute({ ...walk, start: { type: "point", point: x.map((c) => exactRational(c)) } }, k, n);
}

describe("limits of law", () => {
  const sqrt = (n: bigint) => ({
    text: `sqrt(${n})`,
    kind: "algebraic" as const,
    toFixed: (bits: number) => root(n << BigInt(2 * bits)),
    toNumber: () => Math.sqrt(Number(n)),
  });
  const start = { type: "point", point: [sqrt(2n), sqrt(3n)] } as const;

  it("keeps what is finished when the table is full, and says how to go on", async () => {
    const memoryLimit = 2 ** 23;
    const result = await law(walkOf(tray, start), {
      frequency: [1, 0],
      steps: 40,
      workers: 0,
      distance: false,
      memoryLimit,
    });
    const last = result.coefficients.length - 1;
    expect(last).toBeGreaterThan(15);
    expect(result.stoppedAt).toEqual({ step: last, reason: expect.stringMatching(/--effort/) });
    const open = await law(walkOf(tray, start), { frequency: [1, 0], workers: 0, distance: false, memoryLimit });
    expect(open.stoppedAt).toBeUndefined();
    expect(open.reached.step).toBe(last);
  });

  it("stops before a frequency overflows", async () => {
    const big = walkOf(
      [
        move(
          [
            [1000001, 1000000],
            [1, 1],
          ],
          r(1),
        ),
      ],
      start,
    );
    const result = await law(big, { frequency: [1, 1], steps: 10, workers: 0, distance: false });
    expect(result.stoppedAt).toEqual({ step: 3, reason: expect.stringMatching(/63 bits/) });
  });

  it("gives the first coefficient alone where a matrix entry needs more than 63 bits", async () => {
    const wide = walkOf(
      [
        move(
          [
            [1, 2n ** 70n],
            [0, 1],
          ],
          r(1),
        ),
      ],
      start,
    );
    const result = await law(wide, { frequency: [1, 1], steps: 10, workers: 0, distance: false });
    expect(result.stoppedAt).toEqual({ step: 0, reason: expect.stringMatching(/63 bits/) });
  });

  it("names options that are wrong", async () => {
    const call = law(walkOf(tray), { frequency: [1, 0.5, 2], steps: -1, workers: 0, distance: false });
    await expect(call).rejects.toThrow(OptionsError);
    await expect(call).rejects.toThrow(/--frequency: found 1,0.5,2; accepted: 2 whole numbers.*\n--steps: found -1/);
  });
});

function root(n: bigint): bigint {
  let x = 1n << BigInt((n.toString(2).length + 1) >> 1);
  for (;;) {
    const y = (x + n / x) >> 1n;
    if (y >= x) return x;
    x = y;
  }
}
