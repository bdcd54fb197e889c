/**
 * Elementary functions with the same bits in every engine: natural logarithm,
 * exponential, cosine, sine. Use these, never Math's, behind a reported number.
 * Error below one unit in the last place (musl's algorithms, from its sources' comments).
 */
import { loadKernel } from "./kernel.js";

export interface Real {
  log(x: number): number;
  log1p(x: number): number;
  exp(x: number): number;
  cos(x: number): number;
  sin(x: number): number;
  atan2(y: number, x: number): number;
  pow(x: number, y: number): number;
}

let loaded: Promise<Real> | undefined;

export function loadReal(): Promise<Real> {
  loaded ??= loadKernel({ memoryLimit: 2 ** 20 }).then(({ raw }) => ({
    log: (x) => raw.realLog(x),
    log1p: (x) => raw.realLog1p(x),
    exp: (x) => raw.realExp(x),
    cos: (x) => raw.realCos(x),
    sin: (x) => raw.realSin(x),
    atan2: (y, x) => raw.realAtan2(y, x),
    pow: (x, y) => raw.realPow(x, y),
  }));
  return loaded;
}
