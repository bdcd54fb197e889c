/** Decimal strings of exact values, rounded in a stated direction. */
import { floorDiv, Rational } from "../exact/rational.js";

function pow10(n: number): bigint {
  return 10n ** BigInt(n);
}

/** The decimal exponent e with 10^e <= |x| < 10^(e+1), x not 0. */
function decimalExponent(x: Rational): number {
  const n = x.num < 0n ? -x.num : x.num;
  let e = n.toString().length - x.den.toString().length;
  const atLeast = (k: number) => (k >= 0 ? n >= x.den * pow10(k) : n * pow10(-k) >= x.den);
  while (!atLeast(e)) e--;
  while (atLeast(e + 1)) e++;
  return e;
}

/** Writes m 10^-places plainly, or with an exponent where that would be long. */
function write(m: bigint, places: number): string {
  const negative = m < 0n;
  let digits = (negative ? -m : m).toString();
  let exponent = "";
  if (places - digits.length > 23 || places < 0) {
    const e = digits.length - 1 - places;
    exponent = `e${e}`;
    places = digits.length - 1;
  }
  digits = digits.padStart(places + 1, "0");
  const whole = digits.slice(0, digits.length - places);
  const part = places === 0 ? "" : digits.slice(digits.length - places).replace(/0+$/, "");
  return `${negative ? "-" : ""}${whole}${part === "" ? "" : `.${part}`}${exponent}`;
}

function rounded(x: Rational, digits: number, up: boolean): string {
  if (x.num === 0n) return "0";
  const places = digits - 1 - decimalExponent(x);
  const num = places >= 0 ? x.num * pow10(places) : x.num;
  const den = places >= 0 ? x.den : x.den * pow10(-places);
  const m = up ? -floorDiv(-num, den) : floorDiv(num, den);
  return write(m, places);
}

/** A decimal of `digits` significant digits that is at most x. */
export function decimalDown(x: number | Rational, digits = 17): string {
  return rounded(typeof x === "number" ? Rational.fromNumber(x) : x, digits, false);
}

/** A decimal of `digits` significant digits that is at least x. */
export function decimalUp(x: number | Rational, digits = 17): string {
  return rounded(typeof x === "number" ? Rational.fromNumber(x) : x, digits, true);
}
