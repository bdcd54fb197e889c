/**
 * The algebra Q[r1, ..., rk] with r_i^2 = a_i or r_i^3 = a_i, a_i integral over the radicals
 * before it: where sums, products and quotients of nested square and cube roots are
 * computed exactly. It need not be a field (r1 = sqrt(2), r2 = sqrt(8) is allowed); what it
 * proves about a real number is drawn from an integer polynomial that vanishes there.
 */
import { isSquareFree, multiplyPolynomials, type Polynomial, squareFreePart, trimmed } from "./polynomial.js";
import { bitLength, gcdBig, Rational } from "./rational.js";

/** Beyond this dimension over Q an expression's kind is left unproved. */
export const TOWER_LIMIT = 64;

/** Degree times bits up to which the square-free part of a characteristic polynomial is sought. */
const GCD_LIMIT = 1 << 16;

/**
 * sum num[i] m_i / den over the monomials m_i in the radicals: the first radical's power
 * runs fastest, so that an element stays the same, padded by zeros, when a radical is added.
 */
export interface Element {
  readonly num: readonly bigint[];
  readonly den: bigint;
}

interface Radical {
  readonly degree: 2 | 3;
  /** r^degree, integral, over the radicals before this one. */
  readonly value: readonly bigint[];
}

/** Coordinates over Z[t]: products and norms are written once, for numbers and for t - v alike. */
type Vector = readonly Polynomial[];

const constant = (c: bigint): Polynomial => (c === 0n ? [] : [c]);
const vector = (num: readonly bigint[], length: number): Vector =>
  Array.from({ length }, (_, i) => constant(num[i] ?? 0n));

const isZero = (x: Vector) => x.every((f) => f.length === 0);

function addPolynomials(f: Polynomial, g: Polynomial): Polynomial {
  if (f.length < g.length) return addPolynomials(g, f);
  return g.length === 0 ? f : trimmed(f.map((c, i) => (i < g.length ? c + g[i] : c)));
}

const sum = (x: Vector, y: Vector): Vector => x.map((f, i) => addPolynomials(f, y[i]));
const times = (c: bigint, x: Vector): Vector => x.map((f) => multiplyPolynomials([c], f));

function reduced(num: readonly bigint[], den: bigint): Element {
  const g = num.reduce(gcdBig, den);
  return g === 1n ? { num, den } : { num: num.map((c) => c / g), den: den / g };
}

export function addElements(a: Element, b: Element): Element {
  const length = Math.max(a.num.length, b.num.length);
  const num = Array.from({ length }, (_, i) => (a.num[i] ?? 0n) * b.den + (b.num[i] ?? 0n) * a.den);
  return reduced(num, a.den * b.den);
}

export function scaleElement(a: Element, by: Rational): Element {
  return reduced(
    a.num.map((c) => c * by.num),
    a.den * by.den,
  );
}

export class Tower {
  private readonly radicals: Radical[] = [];
  /** dims[k]: dimension over Q with the first k radicals. */
  private readonly dims: number[] = [1];

  private level(length: number): number {
    return this.dims.findIndex((d) => d >= length);
  }

  /**
   * The element of a root of `value`, which has denominator 1: of a radical that is there
   * already, or of a new one; undefined where that would pass the limit on the dimension.
   */
  adjoin(degree: 2 | 3, value: Element): Element | undefined {
    const num = value.num.slice(0, value.num.findLastIndex((c) => c !== 0n) + 1);
    const same = (r: Radical) =>
      r.degree === degree && r.value.length === num.length && r.value.every((c, i) => c === num[i]);
    let index = this.radicals.findIndex(same);
    if (index < 0) {
      const dimension = this.dims[this.dims.length - 1] * degree;
      if (dimension > TOWER_LIMIT) return undefined;
      index = this.radicals.length;
      this.radicals.push({ degree, value: num });
      this.dims.push(dimension);
    }
    const root = new Array<bigint>(2 * this.dims[index]).fill(0n);
    root[this.dims[index]] = 1n;
    return { num: root, den: 1n };
  }

  /** The integers N whose square (or cube) root was adjoined. */
  rationalRadicands(degree: 2 | 3): bigint[] {
    return this.radicals.filter((r) => r.degree === degree && r.value.length === 1).map((r) => r.value[0]);
  }

  multiply(a: Element, b: Element): Element {
    const level = this.level(Math.max(a.num.length, b.num.length));
    const length = this.dims[level];
    const product = this.product(vector(a.num, length), vector(b.num, length), level);
    return reduced(
      product.map((f) => f[0] ?? 0n),
      a.den * b.den,
    );
  }

  private parts(x: Vector, level: number): Vector[] {
    const below = this.dims[level - 1];
    return Array.from({ length: this.radicals[level - 1].degree }, (_, i) => x.slice(i * below, (i + 1) * below));
  }

  private product(x: Vector, y: Vector, level: number): Vector {
    if (level === 0) return [multiplyPolynomials(x[0], y[0])];
    const { degree, value } = this.radicals[level - 1];
    const below = this.dims[level - 1];
    const [xs, ys] = [this.parts(x, level), this.parts(y, level)];
    const slots: Vector[] = Array.from({ length: 2 * degree - 1 }, () => vector([], below));
    xs.forEach((u, i) => {
      if (isZero(u)) return;
      ys.forEach((v, j) => {
        if (!isZero(v)) slots[i + j] = sum(slots[i + j], this.product(u, v, level - 1));
      });
    });
    // r^(degree + i) = value r^i.
    const relation = vector(value, below);
    for (let i = degree; i < slots.length; i++) {
      slots[i - degree] = sum(slots[i - degree], this.product(slots[i], relation, level - 1));
    }
    return slots.slice(0, degree).flat();
  }

  /** x^2 - a y^2, or x^3 + a y^3 + a^2 z^3 - 3 a x y z: the norm over the radicals below. */
  private norm(x: Vector, level: number): Polynomial {
    if (level === 0) return x[0];
    const { degree, value } = this.radicals[level - 1];
    const below = level - 1;
    const a = vector(value, this.dims[below]);
    const mul = (...factors: Vector[]) => factors.reduce((u, v) => this.product(u, v, below));
    const [u, v, w] = this.parts(x, level);
    if (degree === 2) return this.norm(sum(mul(u, u), times(-1n, mul(a, v, v))), below);
    const cubes = sum(mul(u, u, u), mul(a, sum(mul(v, v, v), mul(a, w, w, w))));
    return this.norm(sum(cubes, times(-3n, mul(a, u, v, w))), below);
  }

  /**
   * A monic square-free integer polynomial that vanishes at den times the number: the
   * square-free part of the characteristic polynomial, norm(t - v), of the multiplication
   * by v = den times the element (v is integral, so the coefficients are integers).
   * Undefined where that part would take too long to find.
   */
  annihilator(a: Element): Polynomial | undefined {
    const level = this.level(a.num.length);
    const v = vector(a.num, this.dims[level]).map((f) => multiplyPolynomials([-1n], f));
    const f = this.norm(sum(v, [[0n, 1n], ...vector([], v.length - 1)]), level);
    if (isSquareFree(f)) return f;
    return f.length * Math.max(...f.map(bitLength)) > GCD_LIMIT ? undefined : squareFreePart(f);
  }

  /**
   * An element whose value is the reciprocal of the (non-zero) value y of the integral
   * element v: f(y) = 0 with f(0) = c not 0 gives 1/y = -((f - c)/t)(y) / c.
   */
  reciprocal(v: Element, annihilator: Polynomial): Element {
    // A simple root of f at 0 belongs to another point of the algebra's spectrum than y.
    const f = annihilator[0] === 0n ? annihilator.slice(1) : annihilator;
    let value: Element = { num: [f[f.length - 1]], den: 1n };
    for (let i = f.length - 2; i >= 1; i--) value = addElements(this.multiply(value, v), { num: [f[i]], den: 1n });
    return scaleElement(value, Rational.of(1n, -f[0]));
  }
}
