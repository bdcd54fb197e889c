/**
 * Whole products of big integers by the transform, for tests, benches and callers that
 * have one product to do; the tree of moves shares transforms instead.
 */
import { alloc, mark, release } from "../memory";
import { CHECK_FAILED, FULL, OK } from "../status";
import { digitsOf, limbsOf } from "./digits";
import { lengthFor, makePlan, planBytes, planLength } from "./plan";
import { addResidueProduct, coefficientResidues, digitResidues } from "./residue";
import { errorFactor, forward, inverse, product, transformBytes } from "./transform";

/** The bound that a coefficient's error must stay below. */
export const ERROR_LIMIT: f64 = 0.4375;

/** A plan for products of `bits` bits in digits of `width` bits: 2 M digits hold the product and its carry. */
export function productPlan(bits: u32, width: u32): usize {
  return makePlan(lengthFor((bits / width + 3) >> 1), 0);
}

/** Bytes of arena that `multiply` takes beside its plan. */
export function multiplyBytes(bits: u32, width: u32): u32 {
  const m = lengthFor((bits / width + 3) >> 1);
  return planBytes(m) + 2 * ((m << 4) + 64);
}

/**
 * r = a b, na + nb limbs, two's complement. Returns OK, FULL (arena), or CHECK_FAILED
 * (the product fails its residues, or the error bound asks for smaller digits).
 */
export function multiply(r: usize, a: usize, na: u32, b: usize, nb: u32, plan: usize, width: u32): i32 {
  const before = mark();
  const bytes = <u32>transformBytes(plan);
  const x = alloc(bytes);
  const y = alloc(bytes);
  if (x == 0 || y == 0) return FULL;
  const nx = digitsOf(plan, x, a, na, width);
  const ny = digitsOf(plan, y, b, nb, width);
  let status = OK;
  if (errorFactor(planLength(plan), 1) * Math.sqrt(nx) * Math.sqrt(ny) < ERROR_LIMIT) {
    const expected = addResidueProduct(0, digitResidues(plan, x), digitResidues(plan, y));
    forward(plan, x);
    forward(plan, y);
    product(plan, x, x, y);
    inverse(plan, x);
    if (coefficientResidues(plan, x) != expected) status = CHECK_FAILED;
    limbsOf(plan, r, x, na + nb, 0, width);
  } else status = CHECK_FAILED;
  release(before);
  return status;
}
