/**
 * Elementary functions compiled into the kernel. JavaScript engines are free to
 * round Math.log and its kin as they like; these (musl's algorithms, below one unit
 * in the last place) give the same bits everywhere.
 */
export function realLog(x: f64): f64 {
  return NativeMath.log(x);
}
export function realLog1p(x: f64): f64 {
  return NativeMath.log1p(x);
}
export function realExp(x: f64): f64 {
  return NativeMath.exp(x);
}
export function realCos(x: f64): f64 {
  return NativeMath.cos(x);
}
export function realSin(x: f64): f64 {
  return NativeMath.sin(x);
}
export function realAtan2(y: f64, x: f64): f64 {
  return NativeMath.atan2(y, x);
}
export function realPow(x: f64, y: f64): f64 {
  return NativeMath.pow(x, y);
}
