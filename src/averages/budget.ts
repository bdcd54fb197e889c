/** What the exact part may spend, in work rather than time, so that answers are the same everywhere. */
import type { Effort } from "../session.js";

export interface ExactBudget {
  /** Frequencies that one table may hold. */
  readonly entries: number;
  /** Products of the dual walk, all observables together. */
  readonly products: number;
  /** Largest n of <f, P^n f>. */
  readonly last: number;
  /** States of a walk expanded letter by letter, in dimension 2: time grows with their cube. */
  readonly states: number;
  /** The same for the norms, which take some hundred times as long. */
  readonly normStates: number;
  /** Frequencies on which the Poisson equation is solved, in dimension 3 and more. */
  readonly poisson: number;
  /** Terms of a box's Fourier series; time grows with their square and more. */
  readonly boxTerms: number;
  /** Points of a finite orbit. */
  readonly points: number;
}

export const EXACT_BUDGET: Readonly<Record<Effort, ExactBudget>> = {
  quick: {
    entries: 2 ** 21,
    products: 6e6,
    last: 100,
    states: 160,
    normStates: 40,
    poisson: 5000,
    boxTerms: 40,
    points: 20_000,
  },
  standard: {
    entries: 2 ** 23,
    products: 5e7,
    last: 200,
    states: 320,
    normStates: 80,
    poisson: 50_000,
    boxTerms: 100,
    points: 100_000,
  },
  thorough: {
    entries: 2 ** 24,
    products: 4e8,
    last: 400,
    states: 600,
    normStates: 160,
    poisson: 300_000,
    boxTerms: 200,
    points: 500_000,
  },
};
