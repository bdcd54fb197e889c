/**
 * Numbers as a reader wants them: as many digits as their interval supports, the interval
 * rounded outward, a true minus sign, thin spaces between thousands.
 */
import { floorDiv, Rational } from "../exact/rational.js";
import { type Quantity, quantityNumber } from "../quantity/quantity.js";

const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";
/** Significant digits shown at most. */
const MOST_DIGITS = 13;
const NOT_FINITE = "not available";

/** An integer as superscript digits, for powers of ten in text and on axes. */
export function superscript(n: number): string {
  return String(n).replace(/[-\d]/g, (c) => (c === "-" ? "⁻" : (SUPERSCRIPTS[Number(c)] as string)));
}

/** Narrow no-break spaces between groups of three digits before the point, where there are five or more. */
function grouped(whole: string): string {
  return whole.length < 5 ? whole : whole.replace(/\B(?=(\d{3})+$)/g, "\u202f");
}

/** m 10^-places. */
function plain(m: bigint, places: number): string {
  const negative = m < 0n;
  let digits = (negative ? -m : m).toString();
  if (places <= 0) return `${negative ? "−" : ""}${grouped(m === 0n ? "0" : digits + "0".repeat(-places))}`;
  digits = digits.padStart(places + 1, "0");
  return `${negative ? "−" : ""}${grouped(digits.slice(0, -places))}.${digits.slice(-places)}`;
}

/** The decimal exponent of |x|, x finite and not 0. */
export function decade(x: number): number {
  return Number(x.toExponential().split("e")[1]);
}

type Direction = "near" | "down" | "up";

function scaled(x: Rational, places: number, direction: Direction): bigint {
  const num = places >= 0 ? x.num * 10n ** BigInt(places) : x.num;
  const den = places >= 0 ? x.den : x.den * 10n ** BigInt(-places);
  if (direction === "down") return floorDiv(num, den);
  if (direction === "up") return -floorDiv(-num, den);
  return floorDiv(2n * num + den, 2n * den);
}

/** The exact value of a decimal string such as "-1.25e-7"; undefined where it is none. */
export function decimalValue(text: string): Rational | undefined {
  const found = /^([+-]?)(\d*)\.?(\d*)(?:e([+-]?\d{1,4}))?$/i.exec(text.trim());
  if (found === null || `${found[2]}${found[3]}` === "") return undefined;
  const [, sign, whole = "", part = "", exponent = "0"] = found;
  const m = BigInt(`${whole}${part}`) * (sign === "-" ? -1n : 1n);
  const e = Number(exponent) - part.length;
  return e >= 0 ? Rational.of(m * 10n ** BigInt(e)) : Rational.of(m, 10n ** BigInt(-e));
}

/** x with `digits` significant digits. */
export function significant(x: number, digits = 4): string {
  if (!Number.isFinite(x)) return NOT_FINITE;
  if (x === 0) return "0";
  return fixed(Rational.fromNumber(x), digits - 1 - decade(x), decade(x), "near");
}

/** A double to `digits` significant digits without padding zeros: for parameters and counts. */
export function brief(x: number, digits = 4): string {
  if (!Number.isFinite(x)) return NOT_FINITE;
  if (Number.isInteger(x) && Math.abs(x) < 1e12) return plain(BigInt(x), 0);
  const text = significant(x, digits);
  const [mantissa = "", power] = text.split("×");
  const trimmed = mantissa.includes(".") ? mantissa.replace(/\.?0+(?=\u202f?$)/, "") : mantissa;
  return power === undefined ? trimmed : `${trimmed}×${power}`;
}

/** x rounded at `places` decimals, as a power of ten where x (of decimal exponent `e`) is far from 1. */
function fixed(x: Rational, places: number, e: number, direction: Direction): string {
  const m = scaled(x, places, direction);
  if (e >= -4 && e < 10 && places < 60) return plain(m, places);
  return `${plain(m, places + e)}\u202f×\u202f10${superscript(e)}`;
}

export interface Shown {
  /** The value, to the digits that the interval supports; `±` its half-width where that helps. */
  readonly value: string;
  /** "low to high", rounded outward; absent for exact numbers and where there is none. */
  readonly interval?: string;
  /** "exact", "proved to lie in", "estimated, 95 % interval", "estimated". */
  readonly standing: string;
}

export function percent(level: number): string {
  return `${brief(100 * level, 6)}\u202f%`;
}

/** An enclosed quantity to `digits` digits where its interval proves them all: both ends round to the same. */
export function settled(q: Quantity, digits = 6): string | undefined {
  if (q.standing !== "enclosed" || q.low === undefined || q.high === undefined) return undefined;
  const [low, high] = [decimalValue(q.low), decimalValue(q.high)];
  if (low === undefined || high === undefined || low.num === 0n || high.num === 0n) return undefined;
  const text = (x: Rational) => fixed(x, digits - 1 - decade(x.toNumber()), decade(x.toNumber()), "near");
  return text(low) === text(high) ? text(low) : undefined;
}

const decimals = (x: number) => (x === 0 || !Number.isFinite(x) ? 0 : decade(x));

/** How a quantity is shown; `whole` where it counts something, so that no decimals are wanted of a large one. */
export function shown(q: Quantity | null | undefined, whole = false): Shown {
  if (q === null || q === undefined || q.value === null) return { value: NOT_FINITE, standing: "not computed" };
  const number = quantityNumber(q);
  if (q.standing === "exact") {
    if (typeof q.value === "number") return { value: brief(q.value, 17), standing: "exact" };
    const about = q.approx !== undefined && Number.isFinite(q.approx) ? ` ≈ ${significant(q.approx, 6)}` : "";
    // A fraction of hundreds of digits is exact and unreadable: show the double beside it instead.
    if (q.value.length > 40) return { value: about.trim() === "" ? q.value : about.trim(), standing: "exact" };
    return { value: `${q.value.replace(/^-/, "−")}${about}`, standing: "exact" };
  }
  const words = q.standing === "enclosed" ? "proved to lie in" : "estimated";
  if (!Number.isFinite(number)) return { value: NOT_FINITE, standing: words };
  const low = q.low === undefined || q.low === null ? undefined : decimalValue(q.low);
  const high = q.high === undefined || q.high === null ? undefined : decimalValue(q.high);
  if (low === undefined || high === undefined) {
    // A count to four digits, too.
    const text = whole && Math.abs(number) >= 1 ? brief(Math.ceil(Number(number.toPrecision(4)))) : significant(number);
    return { value: text, standing: `${words}, no interval` };
  }
  const standing =
    q.standing === "estimated" && q.level !== undefined ? `${words}, ${percent(q.level)} interval` : words;
  const half = high.sub(low).toNumber() / 2;
  if (half === 0) return { value: significant(number, 6), interval: `${significant(number, 6)}`, standing };
  // Two digits of the half-width: common practice for a measured value. Of a proved value no
  // more than a reader takes in; dossier.json has them all.
  const size = Math.max(Math.abs(low.toNumber()), Math.abs(high.toNumber()));
  const e = decimals(size);
  const wanted = whole && size >= 100 ? Math.min(0, 1 - decade(half)) : 1 - decade(half);
  const places = Math.min(wanted, MOST_DIGITS - 1 - e);
  // A narrow enclosure says more of the number than the double does.
  const middle = q.standing === "enclosed" ? low.add(high).mul(Rational.of(1, 2)) : Rational.fromNumber(number);
  const value = fixed(middle, places, e, "near");
  const ends = `${fixed(low, places, e, "down")} to ${fixed(high, places, e, "up")}`;
  return { value: /^−0(\.0*)?$/.test(value) ? value.slice(1) : value, interval: ends, standing };
}
