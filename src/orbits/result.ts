import type { Quantity } from "../quantity/quantity.js";

export interface OrbitKind {
  /** Number of points. */
  readonly size: number;
  /** Number of orbits of this kind. */
  readonly count: number;
  /** Numerators over the modulus of one point. */
  readonly representative: readonly number[];
  /** Largest modulus among the averaged operator's eigenvalues but the constant's. */
  readonly secondEigenvalue: Quantity;
  /** 1 - secondEigenvalue. */
  readonly gap: Quantity;
  readonly residual?: number;
}

/** Answer of `orbits`. */
export interface OrbitsResult {
  readonly torwend: string;
  readonly walk: string;
  readonly modulus: number;
  readonly orbits: readonly OrbitKind[];
}
