/** An invented dossier of the right shape, for looking at the report; its numbers belong to no walk. */
import type { ObservableResult } from "../../src/averages/result.js";
import type { Dossier, DossierTrajectory } from "../../src/dossier/result.js";
import type { LawResult } from "../../src/law/result.js";
import type { OrbitsResult } from "../../src/orbits/result.js";
import type { Quantity, Verdict } from "../../src/quantity/quantity.js";

const estimated = (value: number, half: number, method = "invented"): Quantity => ({
  value,
  standing: "estimated",
  low: String(value - half),
  high: String(value + half),
  level: 0.95,
  method,
});
const exact = (value: number | string, approx?: number): Quantity => ({
  value,
  standing: "exact",
  method: "invented",
  ...(approx === undefined ? {} : { approx }),
});
const holds = (reason: string, evidence: Record<string, unknown> = {}): Verdict => ({
  verdict: "holds",
  reason,
  evidence,
});

/** A repeatable sequence in [0, 1), for shapes only. */
function sequence(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

function observable(label: string, seed: number): ObservableResult {
  const next = sequence(seed);
  const normal = () => Array.from({ length: 12 }, next).reduce((a, b) => a + b, -6);
  return {
    label,
    mean: exact(0),
    variance: estimated(0.731, 0.004, "partial sum of correlations"),
    degenerate: holds("invented", {}),
    correlations: [
      exact("1/2", 0.5),
      ...Array.from({ length: 14 }, (_, n) => estimated((n % 3 === 1 ? -1 : 1) * 0.3 * 0.6 ** n, 1e-9)),
      exact(0),
    ],
    lastTerms: [13, 14].map((step) => ({ step, value: estimated(0.3 * 0.6 ** step, 1e-9) })),
    reached: { step: 15, reason: "invented" },
    notes: [],
    stepsFor: [0.1, 0.01, 0.001].map((halfWidth) => ({ halfWidth, steps: estimated(2.81 / halfWidth ** 2, 9) })),
    sampled: {
      replicates: 400,
      moves: 10000,
      mean: estimated(0.0004, 0.0009),
      variance: estimated(0.74, 0.1),
      batchMeansVariance: estimated(0.72, 0.02),
      normalDistance: { statistic: 0.031, pValue: 0.62, method: "invented" },
      evaluationError: 1e-15,
      resolution: 2 ** -60,
      coverage: estimated(0.945, 0.022),
      iteratedLogarithm: { largest: 1.31, median: 0.44 },
      standardised: Array.from({ length: 400 }, normal),
      running: Array.from({ length: 40 }, (_, i) => {
        const moves = Math.round(10 ** (i / 10)) + i;
        const average = (0.4 * normal()) / Math.sqrt(moves);
        const half = 1.7 / Math.sqrt(moves);
        return {
          moves,
          average,
          low: average - half,
          high: average + half,
          envelope: moves > 3 ? 1.21 * Math.sqrt(Math.log(Math.log(moves)) / moves) : 0,
        };
      }),
    },
  };
}

function law(frequency: string[], rate: number): LawResult {
  return {
    torwend: "0.1.0",
    walk: "t",
    frequency,
    reached: { step: 19, reason: "invented" },
    decay: { rate: estimated(-Math.log(rate), 0.01), from: 10, to: 19, residual: 0.25 },
    normBound: { spectralRadius: estimated(0.7, 0.001), rate: estimated(0.35, 0.001), reading: "invented" },
    distance: {
      cutoff: 4,
      frequencies: 40,
      steps: Array.from({ length: 17 }, (_, step) => ({
        step,
        largest: estimated(rate ** step, 1e-9),
        frequency: [1, -step % 4],
        wasserstein: estimated(0.2, 0.1),
      })),
    },
    coefficients: Array.from({ length: 20 }, (_, step) => ({
      step,
      frequencies: 2 ** step,
      real: estimated(rate ** step * Math.cos(step), 1e-12),
      imag: estimated(rate ** step * Math.sin(step), 1e-12),
    })),
  };
}

function orbits(modulus: number): OrbitsResult {
  return {
    torwend: "0.1.0",
    walk: "t",
    modulus,
    points: modulus * modulus,
    symmetric: false,
    warnings: [],
    orbits: [
      {
        size: modulus * modulus - 1,
        count: 1,
        representative: [0, 1],
        denominators: [modulus],
        period: 1,
        secondEigenvalue: estimated(0.5 + 0.3 / modulus, 1e-9),
        gap: estimated(0.5 - 0.3 / modulus, 1e-9),
        residual: 3.2e-11,
      },
      {
        size: 1,
        count: 1,
        representative: [0, 0],
        denominators: [1],
        period: 1,
        secondEigenvalue: exact(0),
        gap: exact(1),
      },
    ],
  };
}

function trajectory(): DossierTrajectory {
  const next = sequence(5);
  const positions = Array.from({ length: 401 }, (_, step) => ({
    step,
    point: [next().toFixed(20), next().toFixed(20)],
  }));
  const distances = Array.from({ length: 121 }, (_, n) => Math.min(0.1 + 0.4 * next(), 1e-16 * Math.exp(1.1 * n)));
  const partedAt = distances.findIndex((d) => d > 0.01);
  return {
    moves: 400,
    positions,
    digits: 20,
    standing: "enclosed",
    bitsConsumed: 660,
    method: "invented",
    doubles: positions.slice(0, 121).map((p, i) => p.point.map((c) => (i < partedAt ? Number(c) : next()))),
    distances,
    partedAt,
    apart: 0.01,
  };
}

export interface Labels {
  readonly title: string;
  readonly move: string;
  readonly observable: string;
  readonly text: string;
}

export const TAME: Labels = {
  title: "Tray stirring, two strokes",
  move: "long stroke",
  observable: "east probe",
  text: "invented",
};

export function fixture(labels: Labels = TAME): Dossier {
  const common = { torwend: "0.1.0", walk: labels.title };
  return {
    ...common,
    seed: "1",
    effort: "quick",
    level: 0.95,
    document: {
      torwend: 1,
      title: labels.title,
      dimension: 2,
      moves: [
        {
          label: labels.move,
          weight: "1/2",
          matrix: [
            [2, 1],
            [1, 1],
          ],
        },
        {
          label: "short stroke",
          weight: "1/2",
          matrix: [
            [3, 1],
            [2, 1],
          ],
          translation: ["0", "sqrt(2)"],
        },
      ],
      start: ["sqrt(2)-1", "sqrt(3)-1"],
      observables: [
        { label: labels.observable, terms: [{ frequency: [1, 0], cos: "1" }] },
        { label: "corner cell", box: { low: ["0", "0"], high: ["1/2", "1/4"] } },
      ],
    },
    conditions: {
      ...common,
      stronglyIrreducible: holds(labels.text, {
        word: ["long stroke"],
        matrix: [
          [2, 1],
          [1, 1],
        ],
        trace: 3,
        form: { coefficients: [1, -1, -1], discriminant: 5 },
      }),
      proximal: holds(labels.text),
      exponentialMoment: holds("finitely many moves"),
      equidistribution: { verdict: "undecided", reason: labels.text, evidence: {} },
      centralLimit: { verdict: "fails", reason: labels.text, evidence: {} },
    },
    growth: {
      ...common,
      exponents: [estimated(1.1432, 0.0007), estimated(-1.1432, 0.0007)],
      logNormVariance: estimated(0.0312, 0.0015),
      pressure: [-1, 1, 2, 4].map((s) => ({ s, value: estimated(1.143 * s + 0.015 * s * s, 0.004) })),
      rate: [0.9, 1, 1.1, 1.2, 1.3].map((speed) => ({ speed, rate: estimated(16 * (speed - 1.143) ** 2, 0.02) })),
      curve: Array.from({ length: 14 }, (_, i) => {
        const moves = 2 ** i;
        const mean = 1.143 + 0.2 / moves;
        return { moves, mean, low: mean - 0.06 / Math.sqrt(moves), high: mean + 0.06 / Math.sqrt(moves) };
      }),
      replicates: 64,
      moves: 20000,
      warnings: [labels.text],
    },
    start: {
      ...common,
      kind: "algebraic",
      verdict: holds(labels.text),
      cost: {
        denominator: 590,
        numerators: [14, 15],
        orbitSize: 1234,
        moves: estimated(10.2, 0.3),
        observables: [{ label: labels.observable, sum: estimated(0.02, 0.001) }],
      },
      traps: Array.from({ length: 15 }, (_, i) => {
        const q = 2 + 3 * i * i;
        return {
          denominator: q,
          numerators: [i, i + 1],
          distance: estimated((0.4 + (i % 4) / 3) * q ** -1.5, q ** -1.5 * 1e-6),
          hold: estimated(1.6 * Math.log(q + 1), 0.3),
          excess: estimated(0.4 - i / 10, 0.1),
          ...(i % 2 === 0
            ? {
                sampledHold: {
                  replicates: 100,
                  low: i,
                  median: i + 2,
                  high: i + 5,
                  mean: estimated(i + 2.3, 0.4),
                  unfinished: 0,
                  exits: { first: i, counts: [10, 20, 40, 20, 10] },
                },
              }
            : {}),
        };
      }),
    },
    averages: {
      ...common,
      observables: [observable(labels.observable, 7), observable("corner cell", 8)],
      warnings: [labels.text],
    },
    law: { ...law(["1", "0"], 0.78), others: [law(["0", "1"], 0.7), law(["1", "-1"], 0.85), { stopped: labels.text }] },
    orbits: { ...orbits(2), others: [3, 4, 5, 6, 7].map(orbits) },
    trajectory: trajectory(),
    precision: { movesOfDouble: estimated(32.13, 0.02), movesPerDigit: estimated(2.0141, 0.0013) },
  };
}
