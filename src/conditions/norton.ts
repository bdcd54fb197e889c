/**
 * Irreducibility of a group of integer matrices by Norton's criterion modulo a prime: let X
 * lie in the algebra of the generators, with a null space of dimension 1. If its null
 * vector spins to the whole space under the generators, and the null vector of its transpose
 * under their transposes, the representation modulo p is irreducible. Its endomorphisms act
 * on that null space, so they are scalars, and by Burnside the algebra is the whole matrix
 * algebra modulo p; hence its dimension over Q is n^2 as well. (Parker 1984; Holt and Rees
 * 1994.)
 */
import type { IntegerMatrix } from "../dual/matrix.js";
import {
  eigenvalue,
  type Field,
  fieldOf,
  type ModularMatrix,
  multiplyModular,
  nullVector,
  PRIMES,
  spinDimension,
  transposeModular,
} from "./modular.js";

function modular(a: IntegerMatrix, p: number): ModularMatrix {
  const modulus = BigInt(p);
  return Float64Array.from(a.flat(), (x) => Number(((x % modulus) + modulus) % modulus));
}

/** A fixed sequence of small numbers: the search is the same in every run. */
function* sequence(p: number): Generator<number, never> {
  for (let x = 12345; ; ) {
    x = (Math.imul(x, 1103515245) + 12345) >>> 0;
    yield (x >>> 8) % p;
  }
}

const TRIES = 24;

function certified(matrices: readonly ModularMatrix[], n: number, field: Field): boolean {
  const { p } = field;
  const numbers = sequence(p);
  const draw = () => numbers.next().value;
  const transposed = matrices.map((m) => transposeModular(m, n));
  const pool = [...matrices];
  for (let attempt = 0; attempt < TRIES; attempt++) {
    // Products of what is there make longer and longer words; X is a random combination of them.
    const [a, b] = [pool[draw() % pool.length], matrices[draw() % matrices.length]];
    pool.push(multiplyModular(a, b, n, p));
    const y = new Float64Array(n * n);
    for (const m of pool) {
      const c = draw();
      for (let i = 0; i < y.length; i++) y[i] = (y[i] + c * m[i]) % p;
    }
    const root = eigenvalue(y, n, field);
    if (root === undefined) continue;
    for (let i = 0; i < n; i++) y[i * n + i] = (y[i * n + i] + p - root) % p;
    const { vector } = nullVector(y, n, field);
    if (vector === undefined) continue;
    if (spinDimension(vector, matrices, n, field) < n) return false;
    const left = nullVector(transposeModular(y, n), n, field).vector as Float64Array;
    return spinDimension(left, transposed, n, field) === n;
  }
  return false;
}

/**
 * A prime modulo which the n x n integer matrices span the whole matrix algebra, so that
 * they do over Q; undefined where none is found.
 */
export function fullAlgebraPrime(matrices: readonly IntegerMatrix[]): number | undefined {
  const n = matrices[0].length;
  return PRIMES.find((p) =>
    certified(
      matrices.map((m) => modular(m, p)),
      n,
      fieldOf(p),
    ),
  );
}
