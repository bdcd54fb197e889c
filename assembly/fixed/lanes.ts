/**
 * Arithmetic on one double or on a pair, from one source: T is v128 in the SIMD build and
 * f64 in the plain one, so that both do the same operations in the same order.
 */
export function add<T>(a: T, b: T): T {
  if (isVector<T>()) return f64x2.add(a, b) as T;
  return ((a as f64) + (b as f64)) as T;
}
export function sub<T>(a: T, b: T): T {
  if (isVector<T>()) return f64x2.sub(a, b) as T;
  return ((a as f64) - (b as f64)) as T;
}
export function mul<T>(a: T, b: T): T {
  if (isVector<T>()) return f64x2.mul(a, b) as T;
  return ((a as f64) * (b as f64)) as T;
}
export function splat<T>(x: f64): T {
  if (isVector<T>()) return f64x2.splat(x) as T;
  return x as T;
}
