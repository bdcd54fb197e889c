/** Exact elimination on integer vectors: spans, null spaces, without fractions. */
import { gcdBig } from "../exact/rational.js";

/** v over the gcd of its entries, the first nonzero entry positive. */
export function primitive(v: readonly bigint[]): bigint[] {
  const g = v.reduce(gcdBig, 0n);
  if (g === 0n) return [...v];
  const lead = v.find((x) => x !== 0n) as bigint;
  const by = lead < 0n ? -g : g;
  return by === 1n ? [...v] : v.map((x) => x / by);
}

/** A growing rational subspace of Q^n, held by integer rows in echelon form. */
export class Span {
  private readonly rows: { readonly pivot: number; readonly row: readonly bigint[] }[] = [];

  get dimension(): number {
    return this.rows.length;
  }

  /** A multiple of v plus an element of the span, primitive, without the pivots; zero exactly if v is in the span. */
  reduce(v: readonly bigint[]): bigint[] {
    let rest = primitive(v);
    for (const { pivot, row } of this.rows) {
      const x = rest[pivot];
      if (x === 0n) continue;
      const g = gcdBig(x, row[pivot]);
      const [keep, take] = [row[pivot] / g, x / g];
      rest = primitive(rest.map((e, i) => keep * e - take * row[i]));
    }
    return rest;
  }

  has(v: readonly bigint[]): boolean {
    return this.reduce(v).every((x) => x === 0n);
  }

  /** Adds v; false where it was in the span already. */
  add(v: readonly bigint[]): boolean {
    const row = this.reduce(v);
    const pivot = row.findIndex((x) => x !== 0n);
    if (pivot < 0) return false;
    this.rows.push({ pivot, row });
    return true;
  }

  /** The reduced echelon basis, primitive integer rows: the same for equal subspaces. */
  basis(): bigint[][] {
    const sorted = [...this.rows].sort((a, b) => a.pivot - b.pivot).map(({ pivot, row }) => ({ pivot, row: [...row] }));
    for (let i = sorted.length - 1; i >= 0; i--) {
      for (let j = i + 1; j < sorted.length; j++) {
        const { pivot, row } = sorted[j];
        const x = sorted[i].row[pivot];
        if (x === 0n) continue;
        sorted[i].row = primitive(sorted[i].row.map((e, k) => row[pivot] * e - x * row[k]));
      }
      sorted[i].row = primitive(sorted[i].row);
    }
    return sorted.map(({ row }) => row);
  }
}

export function spanOf(vectors: readonly (readonly bigint[])[]): Span {
  const span = new Span();
  for (const v of vectors) span.add(v);
  return span;
}

/** A basis of the integer vectors x with row.x = 0 for every row; primitive, of length n. */
export function nullSpace(equations: readonly (readonly bigint[])[], n: number): bigint[][] {
  const rows = spanOf(equations).basis();
  const pivots = rows.map((row) => row.findIndex((x) => x !== 0n));
  const free = Array.from({ length: n }, (_, j) => j).filter((j) => !pivots.includes(j));
  return free.map((j) => {
    // x_j = scale; each pivot's coordinate is then -row_j scale / row_pivot, whole by the choice of scale.
    let scale = 1n;
    rows.forEach((row, i) => {
      const lead = row[pivots[i]];
      const need = lead / gcdBig(lead, row[j]);
      scale *= need / gcdBig(scale, need);
    });
    const x = new Array<bigint>(n).fill(0n);
    x[j] = scale;
    rows.forEach((row, i) => {
      x[pivots[i]] = (-row[j] * scale) / row[pivots[i]];
    });
    return primitive(x);
  });
}
