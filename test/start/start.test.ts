import { describe, expect, it } from "vitest";
import { OptionsError } from "../../src/errors.js";
import { exactFromText } from "../../src/exact/read.js";
import { displacementKind, isTrapped } from "../../src/start/displacement.js";
import { exitMoves } from "../../src/start/jobs.js";
import { start } from "../../src/start/start.js";
import { parseWalk } from "../../src/walk/parse.js";
import { elementary } from "../conditions/walks.js";

const tray = [
  [
    [2, 1],
    [1, 1],
  ],
  [
    [3, 1],
    [2, 1],
  ],
];

function document(at: unknown, matrices: number[][][] = tray, translation?: string[]) {
  return {
    torwend: 1,
    title: "test",
    dimension: matrices[0].length,
    moves: matrices.map((matrix, i) => ({ matrix, ...(translation === undefined || i > 0 ? {} : { translation }) })),
    start: at,
  };
}

const here = { workers: 0, effort: "quick" } as const;
const ask = (at: unknown, matrices?: number[][][], translation?: string[], more: object = {}) =>
  start(document(at, matrices, translation), { ...here, denominators: 200, ...more });

describe("start", () => {
  it("tells the kinds apart, and what follows from each", async () => {
    const cases: [unknown, string, string][] = [
      [["1/3", "0.125"], "rational", "fails"],
      [["0", "0"], "rational", "fails"],
      [["sqrt(2)-1", "1/2"], "algebraic", "holds"],
      [["sqrt(4)-1", "1/2"], "rational", "fails"],
      [["sqrt(2)", "pi"], "algebraic", "holds"],
      [["pi", "1/2"], "unproved", "undecided"],
      [{ uniform: true }, "uniform", "holds"],
      [
        {
          density: [
            { frequency: [0, 0], cos: "1" },
            { frequency: [1, 0], cos: "1/2" },
          ],
        },
        "density",
        "holds",
      ],
    ];
    for (const [at, kind, verdict] of cases) {
      const result = await ask(at);
      expect([result.kind, result.verdict.verdict], JSON.stringify(at)).toEqual([kind, verdict]);
      if (kind === "uniform" || kind === "density") expect(result.traps).toEqual([]);
    }
  });

  it("gives a rational start's denominator and the size of its orbit", async () => {
    expect((await ask(["1/3", "0.125"])).orbit?.denominator).toBe("24");
    // By hand: [[2, 1], [1, 1]] permutes the three points with halves cyclically.
    expect((await ask(["1/2", "0"])).orbit).toMatchObject({ denominator: "2", size: { value: 3, standing: "exact" } });
    expect((await ask(["0", "0"])).orbit).toMatchObject({ denominator: "1", size: { value: 1, standing: "exact" } });
    // All translates of 0 by (1/2, 0) and what the moves make of it.
    expect((await ask(["0", "0"], tray, ["1/2", "0"])).orbit).toMatchObject({ denominator: "2", size: { value: 4 } });
    const long = await ask(["1/100000007", "0"]);
    expect(long.orbit?.size).toMatchObject({ standing: "enclosed", low: "1", high: "10000001400000049" });
  });

  it("follows the translations' kinds", async () => {
    expect((await ask(["0", "0"], tray, ["sqrt(2)", "0"])).verdict.verdict).toBe("holds");
    expect((await ask(["0", "0"], tray, ["pi", "0"])).verdict.verdict).toBe("undecided");
    expect((await ask(["sqrt(2)", "0"], tray, ["1/3", "0"])).verdict.verdict).toBe("holds");
    // x = (sqrt 2, 0) is fixed by the first move if b = -(A - I) x; the second move then moves it off.
    expect((await ask(["sqrt(2)", "0"], tray, ["-sqrt(2)", "-sqrt(2)"])).verdict.verdict).toBe("holds");
    const shifted = await ask(["sqrt(2)", "0"], tray, ["sqrt(2)", "0"]);
    expect(shifted.traps).toEqual([]);
    expect(shifted.search).toContain("translation is not rational");
  });

  it("recognises a start that is trapped on an irrational translate of the rational points", () => {
    const x = [exactFromText("sqrt(2)"), exactFromText("cbrt(3)")];
    // b = x - A x + (1/3, 0): every displacement is (1/3, 0).
    const walk = parseWalk({
      ...document(["sqrt(2)", "cbrt(3)"]),
      moves: [
        { matrix: tray[0], translation: ["1/3 - sqrt(2) - cbrt(3)", "-sqrt(2)"] },
        { matrix: tray[1], translation: ["-2*sqrt(2) - cbrt(3)", "-2*sqrt(2)"] },
      ],
    });
    expect(walk.moves.map((move) => displacementKind(move, x))).toEqual(["rational", "rational"]);
    expect(isTrapped(walk.moves, x)).toBe(true);
    expect(isTrapped(walk.moves, [exactFromText("sqrt(3)"), exactFromText("0")])).toBe(false);
    expect(isTrapped(walk.moves, [exactFromText("pi"), exactFromText("0")])).toBe(undefined);
  });

  it("does not promise what the conditions do not give", async () => {
    const shear = [
      [
        [1, 1],
        [0, 1],
      ],
    ];
    expect((await ask(["sqrt(2)", "sqrt(3)"], shear)).verdict.verdict).toBe("undecided");
    const turn = [
      [
        [0, -1],
        [1, 0],
      ],
    ];
    const turned = await ask(["sqrt(2)", "sqrt(3)"], turn);
    expect(turned.verdict.verdict).toBe("fails");
    expect(turned.traps).toEqual([]);
    expect((await ask(["sqrt(2)", "sqrt(3)"], turn, ["sqrt(5)", "0"])).verdict.verdict).toBe("undecided");
    expect((await ask({ density: [{ frequency: [0, 0], cos: "1" }] }, shear)).verdict.verdict).toBe("undecided");
  });

  it("predicts the hold of a trap, and exact walks agree", async () => {
    const { traps } = await ask(["0.33333333333333333333", "0.5"]);
    const trap = traps[0];
    expect([trap.denominator, trap.numerators]).toEqual([6, [2, 3]]);
    expect(trap.distance.standing).toBe("enclosed");
    expect(trap.hold.standing).toBe("estimated");
    const { low, median, high } = trap.sampledHold!;
    // log((1/12) 3 10^20) / 1.143 = 39.1, up to the size of the first product.
    expect(trap.hold.value as number).toBeGreaterThan(38);
    expect(trap.hold.value as number).toBeLessThan(40.5);
    expect(Math.abs(median - (trap.hold.value as number))).toBeLessThan(4);
    const { mean, exits, replicates, unfinished } = trap.sampledHold!;
    expect(exits.counts.reduce((a, b) => a + b)).toBe(replicates);
    expect(unfinished).toBe(0);
    expect(exits.counts.reduce((s, n, i) => s + n * (exits.first + i), 0) / replicates).toBeCloseTo(
      Number(mean.value),
      9,
    );
    expect(low).toBeLessThanOrEqual(median);
    expect(median).toBeLessThanOrEqual(high);
    const holds = traps.map((t) => Number(t.hold.value));
    expect(holds).toEqual([...holds].sort((a, b) => b - a));
  });

  it("says what the first trap costs an average, as sampled walks see it", async () => {
    const walk = {
      ...document(["0.3333333333333333333333333", "0.5"]),
      observables: [{ label: "wave", terms: [{ frequency: [0, 2], cos: "1" }] }],
    };
    const { cost, traps } = await start(walk, { ...here, denominators: 20 });
    expect(cost).toMatchObject({ denominator: 6, numerators: [2, 3], orbitSize: 24 });
    // The 24 points whose denominator is exactly 6 are one orbit: the cosine is summed over them.
    let sum = 0;
    const gcd = (a: number, b: number): number => (b === 0 ? a : gcd(b, a % b));
    for (let a = 0; a < 6; a++) {
      for (let b = 0; b < 6; b++) if (gcd(gcd(a, b), 6) === 1) sum += Math.cos((4 * Math.PI * b) / 6);
    }
    const hold = Number(traps[0]!.sampledHold!.mean.value);
    expect(Number(cost!.observables[0]!.sum.value)).toBeCloseTo((hold * sum) / 24, 8);
  });

  it("checks a start of unproved kind against every denominator up to 10^9", async () => {
    const result = await ask(["pi", "e"]);
    expect(result.verdict.verdict).toBe("undecided");
    expect(result.verdict.reason).toContain("denominator up to 1000000000");
    expect(Math.max(...result.traps.map((t) => t.denominator))).toBeLessThanOrEqual(200);
  });

  it("takes eight dimensions, translations, determinant -1 and one move", async () => {
    const d = 8;
    const moves = Array.from({ length: d }, (_, i) => elementary(d, i, (i + 1) % d));
    const at = [2, 3, 5, 6, 7, 10, 11, 13].map((n) => `sqrt(${n})`);
    expect((await ask(at, moves, new Array(d).fill("1/2"))).verdict.verdict).toBe("holds");
    const mirrored = [
      [
        [1, 1],
        [1, 0],
      ],
    ];
    expect((await ask(["sqrt(2)", "0"], mirrored)).verdict.verdict).toBe("undecided");
  });

  it("keeps its answer where matrices are too large to sample, and says so", async () => {
    const large = (2n ** 70n).toString();
    const at = ["sqrt(2)-1", "sqrt(3)-1"];
    const walk = {
      ...document(at),
      moves: [
        {
          matrix: [
            [1, large],
            [0, 1],
          ],
        },
        {
          matrix: [
            [1, 0],
            [large, 1],
          ],
        },
      ],
    };
    const result = await start(walk, { ...here, denominators: 50 });
    expect(result.verdict.verdict).toBe("holds");
    expect(result.search).toMatch(/not (predicted|sampled)/);
  });

  it("walks the start and the trap under the same moves", async () => {
    const walk = document(["1/3", "1/2"]);
    const payload = { document: walk, seed: 1n, memoryLimit: 2 ** 28, steps: 50, first: 0, count: 5 };
    // Beside itself for ever: steps + 1 says that the end came first.
    const forever = await exitMoves({ ...payload, denominator: 6, numerators: [2, 3], room: 0.01 });
    expect([...forever]).toEqual(new Array(5).fill(51));
    // At distance 1/6 from the start: outside at once.
    const never = await exitMoves({ ...payload, denominator: 2, numerators: [1, 1], room: 0.1 });
    expect([...never]).toEqual(new Array(5).fill(0));
    // Difference (10^-9, 0): by hand, the first move gives (2 or 3, 1 or 2) 10^-9.
    const near = { ...payload, document: document(["0.000000001", "0"]), denominator: 1, numerators: [0, 0] };
    const one = await exitMoves({ ...near, room: 2e-9 });
    expect([...one]).toEqual(new Array(5).fill(1));
  });

  it("gives the same for any number of workers, and refuses wrong options", async () => {
    const at = ["sqrt(2)-1", "sqrt(3)-1"];
    expect(await ask(at, tray, undefined, { workers: 2 })).toEqual(await ask(at));
    for (const denominators of [0, 1.5, 1e10]) {
      await expect(ask(at, tray, undefined, { denominators })).rejects.toThrow(OptionsError);
      await expect(ask(at, tray, undefined, { denominators })).rejects.toThrow(
        `--denominators: found ${denominators}; accepted: a whole number from 1 to 1000000000`,
      );
    }
  });
});
