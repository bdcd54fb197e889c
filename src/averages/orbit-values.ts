/** An observable on the points of a finite orbit: values with a bound on their error, and the mean. */
import { encloseAround, formQuantity } from "../dual/enclose.js";
import { ExactForm } from "../dual/form.js";
import { polynomialOf } from "../dual/polynomial.js";
import { LimitError } from "../errors.js";
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { DualTables } from "../kernel/dual.js";
import { U } from "../kernel/dual-rounding.js";
import { loadKernel } from "../kernel/kernel.js";
import { exactQuantity, type Quantity, quantityNumber } from "../quantity/quantity.js";
import type { Observable } from "../walk/walk.js";
import { evenSums } from "./even-sums.js";
import type { FiniteOrbit } from "./orbit.js";

export interface OrbitValues {
  readonly mean: Quantity;
  /** f - mean at each point, each off by at most `error`. */
  readonly centred: Float64Array<ArrayBuffer>;
  readonly error: number;
  /** size (f - mean), whole numbers; for boxes, where they are exact. */
  readonly scaled?: Float64Array<ArrayBuffer>;
  /** Proved constant on the orbit. */
  readonly constant: boolean;
}

/** The least integer at least q x. @throws LimitError where 256 bits do not decide it. */
function ceilTimes(x: ExactNumber, q: number): number {
  const { low, high } = ExactForm.of(x).scale(Rational.of(q)).enclose();
  const up = (r: Rational) => -r.neg().floor();
  if (up(low) !== up(high))
    throw new LimitError(`256 bits do not tell ${x.text} from a fraction with denominator ${q}`);
  return Number(up(low));
}

function boxValues(orbit: FiniteOrbit, box: Observable & { type: "box" }): OrbitValues {
  const { size, dimension: d, denominator: q, points } = orbit;
  const low = box.low.map((x) => ceilTimes(x, q));
  const high = box.high.map((x) => ceilTimes(x, q));
  const inside = new Float64Array(size);
  let count = 0;
  for (let s = 0; s < size; s++) {
    let is = 1;
    for (let j = 0; j < d; j++) {
      const x = points[s * d + j]!;
      if (x < low[j]! || x >= high[j]!) is = 0;
    }
    inside[s] = is;
    count += is;
  }
  const mean = Rational.of(count, size);
  return {
    mean: exactQuantity(mean, `share of the orbit's ${size} points`),
    centred: inside.map((x) => (size * x - count) / size),
    error: U,
    scaled: inside.map((x) => size * x - count),
    constant: count === 0 || count === size,
  };
}

/** cos and sin of 2 pi r / q by the kernel's phases, each off by less than 8 u. */
async function turns(q: number): Promise<(r: number) => { re: number; im: number }> {
  const tables = new DualTables(await loadKernel(), { dimension: 1, width: 2, fold: "none" }, 16, 1);
  const unit = [(1n << 128n) / BigInt(q)];
  const known = new Map<number, { re: number; im: number }>();
  return (r) => {
    let e = known.get(r);
    if (e === undefined) {
      e = tables.phase([BigInt(r)], unit);
      known.set(r, e);
    }
    return e;
  };
}

/** sum_j k_j x_j mod q at every point. */
function residues(orbit: FiniteOrbit, frequency: readonly bigint[]): Int32Array {
  const { size, dimension: d, denominator: q, points } = orbit;
  const k = frequency.map((x) => Number(((x % BigInt(q)) + BigInt(q)) % BigInt(q)));
  const out = new Int32Array(size);
  for (let s = 0; s < size; s++) {
    let sum = 0;
    for (let j = 0; j < d; j++) sum = (sum + k[j]! * points[s * d + j]!) % q;
    out[s] = sum;
  }
  return out;
}

async function termValues(orbit: FiniteOrbit, f: Observable & { type: "terms" }): Promise<OrbitValues> {
  const { size, denominator: q } = orbit;
  const { constant, harmonics } = polynomialOf(f.terms);
  const phase = await turns(q);
  const values = new Float64Array(size);
  let absolute = 0;
  let error = 0;
  let exactMean: ExactForm | undefined = constant;
  for (const { frequency, cos, sin } of harmonics) {
    const r = residues(orbit, frequency);
    const [c, s] = [cos.toDouble(), sin.toDouble()];
    for (let i = 0; i < size; i++) {
      const e = phase(r[i]!);
      values[i] = values[i]! + (c.value * e.re + s.value * e.im);
    }
    absolute += Math.abs(c.value) + Math.abs(s.value);
    error += c.error + s.error;
    const sums = evenSums(r, q);
    if (exactMean === undefined) continue;
    if ((sums.cos === undefined && !cos.isZero) || (sums.sin === undefined && !sin.isZero)) {
      exactMean = undefined;
      continue;
    }
    exactMean = exactMean
      .add(cos.scale((sums.cos ?? Rational.ZERO).div(Rational.of(size))))
      .add(sin.scale((sums.sin ?? Rational.ZERO).div(Rational.of(size))));
  }
  // A value: phases 8 u, products u, sums (2 terms each) at most 2 harmonics u of the absolute sum.
  error = (error + (10 + 2 * harmonics.length) * U * absolute) * (1 + 2 ** -40);
  // The mean of the oscillating part, by compensated summation: u of itself, and of the division.
  let sum = 0;
  let lost = 0;
  for (const x of values) {
    const t = sum + x;
    const z = t - sum;
    lost += sum - (t - z) + (x - z);
    sum = t;
  }
  const oscillating = (sum + lost) / size;
  const oscillatingError = error + 4 * U * absolute;
  const shift = constant.toDouble();
  const method = `mean over the orbit's ${size} points`;
  const mean =
    exactMean === undefined
      ? encloseAround(
          oscillating + shift.value,
          oscillatingError + shift.error + U * (Math.abs(oscillating) + Math.abs(shift.value)),
          method,
        )
      : formQuantity(exactMean, method);
  const known = exactMean?.add(constant.neg()).toDouble();
  const centre = known?.value ?? oscillating;
  const centreError = known?.error ?? oscillatingError;
  return {
    mean,
    centred: values.map((x) => x - centre),
    error: error + centreError + 4 * U * absolute,
    constant: harmonics.length === 0 || size === 1,
  };
}

export async function orbitValues(orbit: FiniteOrbit, observable: Observable): Promise<OrbitValues> {
  const values = observable.type === "box" ? boxValues(orbit, observable) : await termValues(orbit, observable);
  return values.constant ? { ...values, centred: new Float64Array(orbit.size), error: 0 } : values;
}

/** The mean as a double, for what is estimated further on. */
export const meanNumber = (values: OrbitValues): number => quantityNumber(values.mean);
