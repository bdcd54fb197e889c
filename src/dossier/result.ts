/** The dossier: what `assess` finds, as it is written to dossier.json. */
import type { AveragesResult } from "../averages/result.js";
import type { ConditionsResult } from "../conditions/result.js";
import type { GrowthResult } from "../growth/result.js";
import type { LawResult } from "../law/result.js";
import type { OrbitsResult } from "../orbits/result.js";
import type { Quantity } from "../quantity/quantity.js";
import type { CommonOptions, Effort } from "../session.js";
import type { StartResult } from "../start/result.js";

/** In a question's place: it met a stated limit before it had a result, and the others went on. */
export interface Stopped {
  readonly stopped: string;
}

/** In a question's place: it does not apply to this walk, and why. */
export interface Skipped {
  readonly skipped: string;
}

export type Answer<T> = T | Stopped | Skipped;

export function isAnswered<T extends object>(answer: Answer<T>): answer is T {
  return !("stopped" in answer) && !("skipped" in answer);
}

/** The first moves of the walk, exact, with the same moves in double precision beside them. */
export interface DossierTrajectory {
  /** Moves made; `positions` holds moves 0 to `moves`. */
  readonly moves: number;
  readonly positions: readonly {
    readonly step: number;
    /** Coordinates, right to `digits` digits after the point. */
    readonly point: readonly string[];
  }[];
  readonly digits: number;
  readonly standing: "exact" | "enclosed";
  /** Binary digits of the start, a coordinate, that the last position needed beyond its own. */
  readonly bitsConsumed: number;
  readonly method: string;
  /** The same moves in double precision, from the double nearest to the start: moves 0 to doubles.length - 1. */
  readonly doubles: readonly (readonly number[])[];
  /** Distance on the torus (largest coordinate difference) between the two, move by move. */
  readonly distances: readonly number[];
  /** The first move after which the two are further apart than `apart`; absent where they never are. */
  readonly partedAt?: number;
  readonly apart: number;
}

/** How far double precision can be trusted. */
export interface PrecisionResult {
  /** Moves after which a start stored to 53 binary digits determines no digit: 53 ln 2 / lambda_1. */
  readonly movesOfDouble: Quantity;
  /** Moves for which one decimal digit of the start lasts: ln 10 / lambda_1. */
  readonly movesPerDigit: Quantity;
}

export interface Dossier {
  readonly torwend: string;
  /** The walk's title. */
  readonly walk: string;
  readonly seed: string;
  readonly effort: Effort;
  readonly level: number;
  /** The walk file's content. */
  readonly document: object;
  readonly conditions: Answer<ConditionsResult>;
  readonly growth: Answer<GrowthResult>;
  readonly start: Answer<StartResult>;
  readonly averages: Answer<AveragesResult>;
  /** The law at the first frequency asked for; `others` at the rest. */
  readonly law: Answer<LawResult & { readonly others: readonly Answer<LawResult>[] }>;
  /** The orbits at the first modulus (the start's denominator, where it has one); `others` at the rest. */
  readonly orbits: Answer<OrbitsResult & { readonly others: readonly Answer<OrbitsResult>[] }>;
  readonly trajectory: Answer<DossierTrajectory>;
  readonly precision: Answer<PrecisionResult>;
}

export interface AssessOptions extends CommonOptions {}
