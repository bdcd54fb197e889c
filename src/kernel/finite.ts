/** Points with denominator q, their orbits, and the averaged operator on one: the border of assembly/finite. */
import { LimitError } from "../errors.js";
import type { Kernel } from "./kernel.js";

/** An affine map of (Z/q)^d: residues in [0, q). */
export interface ResidueMap {
  readonly matrix: readonly (readonly number[])[];
  readonly translation: readonly number[];
}

/** (Z/q)^d with the moves as permutations; a point's index is the sum of x_i q^(d-1-i). */
export class FinitePoints {
  /** q^d */
  readonly points: number;
  /** First place in the queue of each orbit, and `points` after the last. */
  readonly starts: Uint32Array<ArrayBuffer>;
  private readonly table: number;
  private readonly queueAt: number;
  private readonly rank: number;
  private readonly local: number;
  private readonly number: number;
  private readonly order: number;
  private readonly queue: Uint32Array<ArrayBuffer>;

  /**
   * Tables and orbits at once.
   * @throws LimitError where q^d tables do not fit in the kernel's memory limit
   */
  constructor(
    private readonly kernel: Kernel,
    readonly dimension: number,
    readonly modulus: number,
    private readonly maps: readonly ResidueMap[],
  ) {
    const { raw } = kernel;
    const points = modulus ** dimension;
    const m = maps.length;
    const what = `the orbits of ${modulus}^${dimension} points under ${m} moves`;
    kernel.require(FinitePoints.bytes(points, m), what);
    if (points >= 2 ** 32) throw new LimitError(`${what}: indices have 32 bits; the limit is 2^32 points`);
    this.points = points;
    const moves = kernel.alloc(4 * m * dimension * (dimension + 1), what);
    const work = kernel.alloc(8 * dimension, what);
    this.table = kernel.alloc(4 * m * points, what);
    this.local = kernel.alloc(4 * m * points, what);
    this.queueAt = kernel.alloc(4 * points, what);
    this.rank = kernel.alloc(4 * points, what);
    this.number = kernel.alloc(4 * points, what);
    this.order = kernel.alloc(4 * points + 4, what);
    const rows = maps.flatMap((map) => map.matrix.flatMap((row, i) => [...row, map.translation[i] as number]));
    kernel.u32(moves, rows.length).set(rows);
    raw.orbitTables(dimension, modulus, moves, m, points, work, this.table);
    // The starts are copied out, and their place then serves the searches as `order`.
    const orbits = raw.orbitLabel(this.table, m, points, this.queueAt, this.rank, this.order);
    this.starts = kernel.u32(this.order, orbits + 1).slice();
    kernel.u32(this.number, points).fill(0xffffffff);
    this.queue = kernel.u32(this.queueAt, points);
  }

  /** Bytes that a space takes. */
  static bytes(points: number, moves: number): number {
    return points * (8 * moves + 16) + 4096;
  }

  get count(): number {
    return this.starts.length - 1;
  }

  sizeOf(orbit: number): number {
    return (this.starts[orbit + 1] as number) - (this.starts[orbit] as number);
  }

  /** The indices of an orbit's points, breadth first from its smallest; a view. */
  pointsOf(orbit: number): Uint32Array {
    return this.queue.subarray(this.starts[orbit] as number, this.starts[orbit + 1] as number);
  }

  /** The d numerators over q of the point with that index. */
  coordinates(index: number): number[] {
    const x = new Array<number>(this.dimension);
    for (let i = this.dimension - 1; i >= 0; i--) {
      x[i] = index % this.modulus;
      index = Math.floor(index / this.modulus);
    }
    return x;
  }

  /** An orbit's own table, size x moves: images of its points, numbered breadth first from the smallest. */
  tableOf(orbit: number): Uint32Array<ArrayBuffer> {
    const [start, size] = [this.starts[orbit] as number, this.sizeOf(orbit)];
    const m = this.maps.length;
    this.kernel.raw.orbitLocal(this.table, m, this.queueAt, this.rank, start, size, this.local);
    return this.kernel.u32(this.local, m * size).slice();
  }

  /** A matcher against one table: tells whether an orbit of the same size is it but for a renumbering. */
  matcher(table: Uint32Array): (orbit: number, budget: number) => { same: boolean | undefined; spent: number } {
    const { raw } = this.kernel;
    this.kernel.u32(this.local, table.length).set(table);
    return (orbit, budget) => {
      const [start, size] = [this.starts[orbit] as number, this.sizeOf(orbit)];
      const [m, left] = [this.maps.length, BigInt(budget)];
      const end = Number(
        raw.orbitMatch(this.table, m, this.queueAt, start, size, this.local, this.number, this.order, left),
      );
      return { same: end === 0 ? undefined : end > 0, spent: end === 0 ? budget : Math.abs(end) };
    };
  }
}

/** Coordinates of uniform starts end at 8; this one numbers the random vectors. */
const VECTOR_STREAM = 0xff0000;

/** The averaged operator on the functions of one orbit, and vectors for it. */
export class OrbitOperator {
  readonly moves: number;
  private readonly table: number;
  private readonly weights: number;
  private readonly vectorsAt: number;
  private readonly small: number;
  private readonly smallSize: number;

  /**
   * @param table size x moves, see `FinitePoints.tableOf`
   * @param vectors how many vectors to make room for, numbered from 0
   * @throws LimitError where they do not fit
   */
  constructor(
    private readonly kernel: Kernel,
    table: Uint32Array,
    weights: readonly number[],
    vectors: number,
  ) {
    this.moves = weights.length;
    this.size = table.length / this.moves;
    const what = `${vectors} vectors on an orbit of ${this.size} points`;
    kernel.require(OrbitOperator.bytes(this.size, this.moves, vectors), what);
    this.table = kernel.alloc(table.byteLength, what);
    this.weights = kernel.alloc(8 * weights.length, what);
    this.vectorsAt = kernel.alloc(8 * this.size * vectors, what);
    this.smallSize = vectors * (vectors + 2);
    this.small = kernel.alloc(8 * this.smallSize, what);
    kernel.u32(this.table, table.length).set(table);
    kernel.f64(this.weights, weights.length).set(weights);
  }

  /** Bytes that an operator with its vectors takes. */
  static bytes(size: number, moves: number, vectors: number): number {
    return 4 * size * moves + 8 * size * vectors + 8 * vectors * (vectors + 2) + 8 * moves + 4096;
  }

  readonly size: number;

  private at(vector: number): number {
    return this.vectorsAt + 8 * this.size * vector;
  }

  /** A copy of a vector. */
  read(vector: number): Float64Array<ArrayBuffer> {
    return this.kernel.f64(this.at(vector), this.size).slice();
  }

  write(vector: number, values: ArrayLike<number>): void {
    this.kernel.f64(this.at(vector), this.size).set(values);
  }

  clear(vector: number): void {
    this.kernel.f64(this.at(vector), this.size).fill(0);
  }

  copy(from: number, to: number): void {
    this.kernel.f64(this.at(to), this.size).set(this.kernel.f64(this.at(from), this.size));
  }

  /** A random function of mean zero and length 1, the same for the same seed. */
  random(vector: number, seed: bigint): void {
    const { raw } = this.kernel;
    raw.drawStart(this.at(vector), this.size, 0n, VECTOR_STREAM, 0, seed);
    raw.orbitSpread(this.size, this.at(vector));
    this.scale(vector, 1 / this.centre(vector));
  }

  /** to = P from. */
  apply(from: number, to: number): void {
    this.kernel.raw.orbitApply(this.table, this.moves, this.weights, this.size, this.at(from), this.at(to));
  }

  /** Takes the mean off; returns the length after. */
  centre(vector: number): number {
    return this.kernel.raw.orbitCentre(this.size, this.at(vector));
  }

  scale(vector: number, factor: number): void {
    this.kernel.raw.orbitScale(this.size, this.at(vector), factor);
  }

  /** to = to + factor from. */
  add(to: number, factor: number, from: number): void {
    this.kernel.raw.orbitAdd(this.size, this.at(to), factor, this.at(from));
  }

  /** next = P now - beta before - alpha now, less its mean; alpha and the length of `next`. */
  lanczos(before: number, beta: number, now: number, next: number): { alpha: number; length: number } {
    const { raw } = this.kernel;
    const [b, v, w] = [this.at(before), this.at(now), this.at(next)];
    raw.orbitLanczos(this.table, this.moves, this.weights, this.size, b, beta, v, w, this.small);
    const [alpha, length] = this.kernel.f64(this.small, 2) as unknown as [number, number];
    return { alpha, length };
  }

  /**
   * Makes `vector`, of length `before`, orthogonal to vectors 0, ..., count - 1: a second pass
   * where the first has taken off most of it (Daniel, Gragg, Kaufman, Stewart 1976). Returns
   * the coefficients taken off, and the length left.
   */
  orthogonalise(vector: number, count: number, before: number): { coefficients: Float64Array; length: number } {
    const { raw } = this.kernel;
    this.kernel.f64(this.small, count).fill(0);
    const pass = () => raw.orbitProject(this.vectorsAt, count, this.size, this.at(vector), this.small);
    let length = pass();
    if (length < 0.5 * before) length = pass();
    return { coefficients: this.kernel.f64(this.small, count).slice(), length };
  }

  /** Vectors 0, ..., count - 1 become `kept` combinations of them; `small` is count x kept. */
  rotate(count: number, small: readonly (readonly number[])[], kept: number): void {
    this.kernel.f64(this.small, count * kept).set(small.flat());
    const work = this.small + 8 * count * kept;
    this.kernel.raw.orbitRotate(this.vectorsAt, count, this.size, this.small, kept, work);
  }
}
