/** The typed walk: what a valid walk file says, in exact terms. Made by `parseWalk`. */
import type { ExactNumber } from "../exact/number.js";
import type { Rational } from "../exact/rational.js";

export interface Move {
  readonly label: string;
  /** As written, positive. */
  readonly weight: Rational;
  /** weight / (sum of weights). */
  readonly probability: Rational;
  /** Rows of a d x d integer matrix, acting on column vectors. */
  readonly matrix: readonly (readonly bigint[])[];
  readonly determinant: 1 | -1;
  /** d exact numbers; absent where the move has no translation (or an exact zero one). */
  readonly translation?: readonly ExactNumber[];
}

/** One term c cos(2 pi k.x) + s sin(2 pi k.x). */
export interface Term {
  readonly frequency: readonly bigint[];
  readonly cos: ExactNumber;
  readonly sin: ExactNumber;
}

export type Observable =
  | { readonly type: "terms"; readonly label: string; readonly terms: readonly Term[] }
  /** The indicator of the box of x with low_i <= x_i < high_i for all i; 0 <= low_i < high_i <= 1. */
  | {
      readonly type: "box";
      readonly label: string;
      readonly low: readonly ExactNumber[];
      readonly high: readonly ExactNumber[];
    };

export type Start =
  | { readonly type: "point"; readonly point: readonly ExactNumber[] }
  | { readonly type: "uniform" }
  | { readonly type: "density"; readonly terms: readonly Term[] };

export interface Walk {
  readonly title: string;
  /** 2 to 8. */
  readonly dimension: number;
  readonly moves: readonly Move[];
  readonly start: Start;
  /** The default observables are filled in where the file has none. */
  readonly observables: readonly Observable[];
  /** The document as read, for reports and for handing to workers. */
  readonly document: unknown;
}
