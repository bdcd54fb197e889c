import type { Quantity } from "../quantity/quantity.js";

/**
 * Orbits of one kind: some bijection between any two of them carries each move to itself,
 * so that everything about the walk on them agrees.
 */
export interface OrbitKind {
  /** Number of points. */
  readonly size: number;
  /** Number of orbits of this kind. */
  readonly count: number;
  /** Numerators over the modulus of one point. */
  readonly representative: readonly number[];
  /** Exact denominators of the points in these orbits, ascending. */
  readonly denominators: readonly number[];
  /**
   * Period of the walk on the orbit (greatest common divisor of its return times), exact.
   * From 2 on the averaged operator has another eigenvalue of modulus 1.
   */
  readonly period: number;
  /** Largest modulus among the averaged operator's eigenvalues but the constant's; 0 for one point. */
  readonly secondEigenvalue: Quantity;
  /** 1 - secondEigenvalue. */
  readonly gap: Quantity;
  /** The eigenvalue found, real and imaginary part; absent where its modulus is exact. */
  readonly eigenvalue?: { readonly re: number; readonly im: number };
  /**
   * |P f - eigenvalue f| for the function f of length 1 found. Where the average is
   * symmetric, SOME eigenvalue lies within it; nothing more is proved.
   */
  readonly residual?: number;
}

/** Answer of `orbits`. */
export interface OrbitsResult {
  readonly torwend: string;
  readonly walk: string;
  /** The points are those whose multiple by the modulus is whole: all denominators that divide it. */
  readonly modulus: number;
  readonly points: number;
  /** Whether the moves, as maps of these points, are closed under inverse with equal weights: then the average is symmetric. */
  readonly symmetric: boolean;
  /** One row a kind, largest size first. */
  readonly orbits: readonly OrbitKind[];
  readonly warnings: readonly string[];
}
