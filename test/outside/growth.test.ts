import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { enumeratedBounds } from "../../src/growth/enumerated.js";
import { growth } from "../../src/growth/growth.js";
import { exponentEstimates, logNormVariance } from "../../src/growth/intervals.js";
import { samplingPlan } from "../../src/growth/plan.js";
import type { GrowthSamples } from "../../src/growth/sample.js";
import { provedPressure } from "../../src/growth/symmetric.js";
import { sampleGrowth } from "../../src/kernel/growth.js";
import { loadKernel } from "../../src/kernel/kernel.js";
import { loadReal } from "../../src/kernel/real.js";
import { withSession } from "../../src/session.js";
import type { Walk } from "../../src/walk/walk.js";
import { type Numbers, POSITIVE_PAIR, RANDOM_FIBONACCI, shear, tableOf, walkOf } from "../growth/walks.js";

/** Viswanath: Random Fibonacci sequences and the number 1.13198824..., Math. Comp. 69 (2000). */
const VISWANATH = 1.13198824;
/** E of the s-fold Kronecker power: its spectral radius is that of the symmetric power. */
function kroneckerRadius(set: readonly Numbers[], s: number): number {
  let mean: Matrix | undefined;
  for (const m of set) {
    let power = new Matrix(m.map((row) => [...row]));
    for (let k = 1; k < s; k++) power = power.kroneckerProduct(new Matrix(m.map((row) => [...row])));
    power.mul(1 / set.length);
    mean = mean === undefined ? power : Matrix.add(mean, power);
  }
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(mean!);
  return Math.max(...realEigenvalues.map((x, i) => Math.hypot(x, imaginaryEigenvalues[i]!)));
}

/** The same source, to 40 decimals. */
const POLLICOTT_40 = "1.1433110351029492458432518536555882994025";
/** Pollicott: Maximal Lyapunov exponents for random matrix products, Invent. Math. 181 (2010). */
const POLLICOTT = 1.1433110351029492;

async function samplesOf(walk: Walk, seed: bigint, steps: number): Promise<GrowthSamples> {
  const table = tableOf(walk);
  const plan = samplingPlan(table, "quick", steps);
  const replicates = 32;
  const { warmUp, checkpoints } = plan;
  const run = { seed, firstReplicate: 0, replicates, warmUp, checkpoints };
  return { plan, replicates, exponents: 1, logs: sampleGrowth(await loadKernel(), table, run) };
}

describe("the top exponent's interval", () => {
  const sets: [string, readonly Numbers[], (log: (x: number) => number) => number][] = [
    ["random Fibonacci (Viswanath 2000)", RANDOM_FIBONACCI, (log) => log(VISWANATH)],
    ["a positive pair (Pollicott 2010)", POSITIVE_PAIR, () => POLLICOTT],
  ];
  for (const [name, set, published] of sets) {
    it(`covers the published value at its level over 300 seeds: ${name}`, async () => {
      const truth = published((await loadReal()).log);
      const walk = walkOf(set);
      let covered = 0;
      let widest = 0;
      for (let seed = 1n; seed <= 300n; seed++) {
        const top = exponentEstimates(await samplesOf(walk, seed, 512), 0.95).estimates[0]!;
        widest = Math.max(widest, top.halfWidth);
        if (Math.abs(top.value - truth) <= top.halfWidth) covered++;
      }
      // 285 wanted; the binomial law's standard deviation is 3.8, four of them allowed.
      expect(covered).toBeGreaterThanOrEqual(270);
      expect(covered).toBeLessThanOrEqual(299);
      expect(widest).toBeLessThan(0.02);
    });

    it(`is narrow around the published value in a longer run: ${name}`, async () => {
      const truth = published((await loadReal()).log);
      const top = exponentEstimates(await samplesOf(walkOf(set), 7n, 300_000), 0.999).estimates[0]!;
      expect(Math.abs(top.value - truth)).toBeLessThanOrEqual(top.halfWidth);
      expect(top.halfWidth).toBeLessThan(5e-4);
    });
  }
});

describe("a positive set", () => {
  it("has its exponent to the digits asked for (Pollicott 2010)", async () => {
    const options = { workers: 0, effort: "quick", steps: 256, digits: 40, pressure: [1, 2, -1.5] } as const;
    const { exponents, pressure, sampled, warnings } = await growth(walkOf(POSITIVE_PAIR), options);
    expect(exponents[0]?.standing).toBe("enclosed");
    for (const end of [exponents[0]!.low!, exponents[0]!.high!]) expect(end.startsWith(POLLICOTT_40)).toBe(true);
    expect([exponents[1]!.low, exponents[1]!.high]).toEqual([`-${exponents[0]!.high}`, `-${exponents[0]!.low}`]);
    expect(warnings).toEqual([]);
    expect(Number(sampled!.low) < POLLICOTT && POLLICOTT < Number(sampled!.high)).toBe(true);
    for (const [i, s] of [1, 2].entries()) {
      expect(Math.abs(Math.log(kroneckerRadius(POSITIVE_PAIR, s)) - (pressure[i]!.value.value as number))).toBeLessThan(
        1e-13,
      );
    }
    expect(pressure.map((p) => p.value.standing)).toEqual(["enclosed", "enclosed", "enclosed"]);
  });
});

describe("parabolic moves", () => {
  it("have their exponent within 1e-8 at the standard effort (Alkauskas)", async () => {
    const real = await loadReal();
    // The dimension of Minkowski's question-mark measure (Alkauskas, from memory): log 2 over twice it.
    const value = real.log(2) / (2 * 0.874716305108211);
    const walk = walkOf([shear(2, 0, 1), shear(2, 1, 0)]);
    const { enclosure } = await withSession({ workers: 0 }, (session) => enumeratedBounds(walk, session, real));
    const [low, high] = [Number(enclosure!.low), Number(enclosure!.high)];
    expect(low < value && value < high).toBe(true);
    expect(high - low).toBeLessThan(1e-8);
  }, 60_000);
});

describe("the log norm's variance", () => {
  it("has an interval that covers a long run's value", async () => {
    const real = await loadReal();
    const walk = walkOf(RANDOM_FIBONACCI);
    const long = logNormVariance(await samplesOf(walk, 1000n, 400_000), 0.999, real);
    expect(long.interval!.high - long.interval!.low).toBeLessThan(0.05);
    let covered = 0;
    for (let seed = 1n; seed <= 100n; seed++) {
      const { interval } = logNormVariance(await samplesOf(walk, seed, 2048), 0.95, real);
      if (interval!.low <= long.interval!.high && long.interval!.low <= interval!.high) covered++;
    }
    expect(covered).toBeGreaterThanOrEqual(87);
  });
});

describe("Lambda(s) from symmetric powers", () => {
  const sets: [string, readonly Numbers[]][] = [
    ["a positive pair", POSITIVE_PAIR],
    ["random Fibonacci", RANDOM_FIBONACCI],
    ["dimension 3", [shear(3, 0, 1), shear(3, 1, 2), shear(3, 2, 0)]],
  ];
  for (const [name, set] of sets) {
    for (const s of [1, 2, 4]) {
      it(`s = ${s} is enclosed around ml-matrix's eigenvalue, narrowly: ${name}`, async () => {
        const q = provedPressure(walkOf(set), s);
        if (set === RANDOM_FIBONACCI && s === 1) {
          expect(q).toBeUndefined(); // signs, odd power: not linear
          return;
        }
        const other = Math.log(kroneckerRadius(set, s));
        if (q?.standing === "exact") {
          expect(other).toBeCloseTo(q.approx!, 10);
          return;
        }
        expect(q?.standing).toBe("enclosed");
        expect(Math.abs(other - (q!.value as number))).toBeLessThan(1e-10);
        expect(Number(q!.high) - Number(q!.low)).toBeLessThan(1e-13);
      });
    }
  }
});
