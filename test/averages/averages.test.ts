import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { averages } from "../../src/averages/averages.js";
import { OptionsError, StoppedError, WalkError } from "../../src/errors.js";
import { quantityNumber } from "../../src/quantity/quantity.js";
import { parseWalk } from "../../src/walk/parse.js";
import { move, number, point, r, walkOf } from "../dual/naive.js";

const example = (name: string) => readFileSync(new URL(`../../examples/${name}.json`, import.meta.url), "utf8");
const small = { effort: "quick", workers: 0, steps: 400, replicates: 60 } as const;

describe("averages", () => {
  it("puts exact and sampled findings of every observable side by side", async () => {
    const result = await averages(example("tray-symmetric"), small);
    expect(result.observables.map((f) => f.label)).toEqual(["east probe", "diagonal ripple", "west half"]);
    expect(result.warnings).toEqual([]);
    for (const f of result.observables) {
      const sampled = quantityNumber(f.sampled.variance);
      expect(quantityNumber(f.variance) / sampled).toBeGreaterThan(0.4);
      expect(quantityNumber(f.variance) / sampled).toBeLessThan(2.5);
      expect(f.degenerate.verdict).toBe("fails");
      const [wide, middle, narrow] = f.stepsFor.map((s) => quantityNumber(s.steps)) as [number, number, number];
      // z sqrt(variance / n) + |start's sum| / n = h at level 0.95, rounded up.
      const off = (n: number) =>
        1.959963984540054 * Math.sqrt(quantityNumber(f.variance) / n) +
        Math.abs(f.startCost === undefined ? 0 : quantityNumber(f.startCost.sum)) / n;
      expect(off(wide)).toBeLessThanOrEqual(0.1 * (1 + 1e-9));
      expect(off(wide - 1)).toBeGreaterThan(0.1);
      expect(narrow / middle).toBeCloseTo(100, 1);
    }
    const [probe, , west] = result.observables;
    expect(probe!.mean).toMatchObject({ value: 0, standing: "exact" });
    expect(probe!.variance.standing).toBe("enclosed");
    // Its moves have translations: the sum is enumerated, its tail bounded.
    expect(Number(probe!.variance.high) - Number(probe!.variance.low)).toBeLessThan(0.05);
    expect(west!.mean).toMatchObject({ value: "1/2", standing: "exact" });
    expect(west!.variance).toEqual(west!.sampled.variance);
    expect(west!.correlations).toMatchObject([{ value: "1/4", standing: "exact" }]);
  });

  it("tells the norm by certificates, beside Kesten's value where the moves are free", async () => {
    const quarter = r(1, 4);
    const free = [
      [
        [1, 2],
        [0, 1],
      ],
      [
        [1, -2],
        [0, 1],
      ],
      [
        [1, 0],
        [2, 1],
      ],
      [
        [1, 0],
        [-2, 1],
      ],
    ];
    const { gap } = await averages(walkOf(free.map((m) => move(m, quarter))), { ...small, steps: 50 });
    expect(gap!.kesten).toMatchObject({ value: "sqrt(3)/2", standing: "exact" });
    for (const q of [gap!.norm, gap!.spectralRadius]) {
      expect(q.standing).toBe("enclosed");
      expect(Number(q.low)).toBeLessThan(Math.sqrt(3) / 2);
      expect(Number(q.high)).toBeGreaterThan(Math.sqrt(3) / 2);
      expect(Number(q.high) - Number(q.low)).toBeLessThan(1e-6);
    }
    const shifted = free.map((m, i) => move(m, quarter, 1, [r(i, 5), r(1, 3)]));
    const upper = (await averages(walkOf(shifted), { ...small, steps: 50 })).gap!;
    expect(Number(upper.norm.high)).toBeCloseTo(Math.sqrt(3) / 2, 6);
    // |P e_k|^2 = 4 / 16 for a k with four images.
    expect(Number(upper.norm.low)).toBeCloseTo(0.5, 12);
    expect(upper.spectralRadius.low).toBe("0");
    expect(upper.kesten).toBeUndefined();
  });

  it("solves the Poisson equation in dimension 3, and says how well", async () => {
    const { observables } = await averages(example("tray-3d"), {
      ...small,
      steps: 1500,
      replicates: 300,
      level: 0.999,
    });
    for (const f of observables) {
      if (f.poisson === undefined) continue;
      expect(f.variance.standing).toBe("estimated");
      expect(quantityNumber(f.poisson.residual)).toBeLessThan(0.5);
      const product = quantityNumber(f.poisson.residual) * quantityNumber(f.poisson.adjointResidual);
      const { low, high } = f.sampled.variance;
      // |G| is not known; 4 is of the size that gaps of small sets of moves give.
      const slack = 4 * product * quantityNumber(f.correlations[0]!);
      expect(quantityNumber(f.variance)).toBeGreaterThan(Number(low) - slack);
      expect(quantityNumber(f.variance)).toBeLessThan(Number(high) + slack);
    }
    expect(observables.some((f) => f.poisson !== undefined)).toBe(true);
  });

  it("plans moves that sampling bears out", async () => {
    const free = [
      [
        [1, 2],
        [0, 1],
      ],
      [
        [1, -2],
        [0, 1],
      ],
      [
        [1, 0],
        [2, 1],
      ],
      [
        [1, 0],
        [-2, 1],
      ],
    ];
    const walk = walkOf(free.map((m) => move(m, r(1, 4))));
    // Variance 5/2 (see test/outside): z^2 5/2 / 0.01 = 961 moves for 0.1.
    const { observables } = await averages(walk, { ...small, steps: 961, replicates: 800 });
    const probe = observables[0]!;
    expect(probe.stepsFor[0]).toMatchObject({ halfWidth: 0.1, steps: { value: 961 } });
    const within = probe.sampled.standardised.filter((s) => Math.abs(s) <= 1.959963984540054).length / 800;
    // Four standard errors of a share of 0.95 among 800.
    expect(Math.abs(within - 0.95)).toBeLessThan(4 * Math.sqrt((0.95 * 0.05) / 800));
  });

  it("allows for what a start beside a fixed point costs", async () => {
    const walk = parseWalk({
      torwend: 1,
      title: "beside the origin",
      dimension: 2,
      moves: [
        [
          [2, 1],
          [1, 1],
        ],
        [
          [1, 1],
          [1, 2],
        ],
      ].map((matrix) => ({ matrix })),
      start: ["sqrt(2)/10^40", "sqrt(3)/10^40"],
      observables: [{ label: "f", terms: [{ frequency: [1, 0], cos: "1" }] }],
    });
    const { observables } = await averages(walk, { ...small, steps: 1000, replicates: 400 });
    const { startCost, stepsFor, sampled, variance } = observables[0]!;
    expect(startCost!.trap).toEqual({ denominator: 1, numerators: [0, 0] });
    const sum = quantityNumber(startCost!.sum);
    // Some log(10^40 / 4) / 0.96 moves at f = 1.
    expect(sum).toBeGreaterThan(80);
    const seen = 1000 * quantityNumber(sampled.mean);
    const error = Math.sqrt((1000 * quantityNumber(variance)) / 400);
    expect(Math.abs(seen - sum)).toBeLessThan(5 * error + 3);
    const plain = (1.959963984540054 ** 2 * quantityNumber(variance)) / 0.01;
    expect(quantityNumber(stepsFor[0]!.steps)).toBeGreaterThan(plain + 10 * sum * 0.9);
  });

  it("recognises variance 0, and then counts moves by the bounded sums", async () => {
    const moves = [
      move(
        [
          [2, 1],
          [1, 1],
        ],
        r(1, 2),
      ),
      move(
        [
          [2, 1],
          [3, 2],
        ],
        r(1, 2),
      ),
    ];
    const terms = [
      { frequency: [1n, 0n], cos: number(1), sin: number(0) },
      { frequency: [2n, 1n], cos: number(-1), sin: number(0) },
    ];
    const { observables } = await averages(
      walkOf(moves, { type: "uniform" }, [{ type: "terms", label: "probe", terms }]),
      small,
    );
    const f = observables[0]!;
    expect(f.variance).toMatchObject({ value: 0, standing: "exact" });
    expect(f.stepsFor.map((s) => s.steps.value)).toEqual([20, 200, 2000].map((n) => n + 1));
    expect(f.degenerate.verdict).toBe("holds");
    expect(Math.abs(quantityNumber(f.sampled.variance))).toBeLessThan(0.1);
  });

  it("speaks of the finite orbit for a rational start", async () => {
    const moves = [
      move(
        [
          [2, 1],
          [1, 1],
        ],
        r(1, 2),
      ),
      move(
        [
          [1, 0],
          [1, 1],
        ],
        r(1, 2),
      ),
    ];
    const result = await averages(walkOf(moves, point([1, 5], [0, 1])), small);
    expect(result.orbit).toEqual({ denominator: 5, size: 24 });
    expect(result.warnings[0]).toMatch(/24 points/);
    for (const f of result.observables) {
      const { low, high } = f.sampled.mean;
      const slack = Number(high) - Number(low);
      expect(quantityNumber(f.mean)).toBeGreaterThan(Number(low) - slack);
      expect(quantityNumber(f.mean)).toBeLessThan(Number(high) + slack);
    }
  });

  it("warns where the moves are not strongly irreducible", async () => {
    const result = await averages(
      walkOf([
        move(
          [
            [1, 1],
            [0, 1],
          ],
          r(1),
        ),
      ]),
      { ...small, steps: 50 },
    );
    expect(result.warnings[0]).toMatch(/not strongly irreducible/);
    // The cosine of x_2 is kept by the move, so that its correlations do not decay.
    expect(result.observables[2]!.notes[0]).toMatch(/may be far from the limit/);
  });

  it("names faults of options and walks, and stops when asked", async () => {
    const walk = example("tray");
    await expect(averages(walk, { ...small, steps: 1.5, replicates: 0 })).rejects.toThrow(
      /--steps: found 1.5.*\n--replicates: found 0/,
    );
    await expect(averages(walk, { ...small, steps: 0 })).rejects.toThrow(OptionsError);
    await expect(averages("{}", small)).rejects.toThrow(WalkError);
    await expect(averages(walk, { ...small, signal: AbortSignal.abort() })).rejects.toThrow(StoppedError);
  });
});
