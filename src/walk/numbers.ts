/** Exact numbers inside a document whose shape is right: faults are placed, not thrown. */
import { ExactFault } from "../exact/fault.js";
import type { ExactNumber } from "../exact/number.js";
import type { PolynomialNumber } from "../exact/read.js";
import { readExact } from "../exact/read.js";
import { below, type Findings, shown } from "./findings.js";

/** A number as the file writes it, its shape checked by the schema. */
export type WrittenNumber = string | number | PolynomialNumber;

function at(value: WrittenNumber, path: string): unknown {
  return path
    .split("/")
    .slice(1)
    .reduce<unknown>((v, key) => (v as Record<string, unknown>)[key], value);
}

/** The exact number at the pointer; undefined, with a fault, where there is none. */
export function numberAt(value: WrittenNumber, pointer: string, findings: Findings): ExactNumber | undefined {
  if (!findings.clean(pointer)) return undefined;
  try {
    return readExact(value);
  } catch (error) {
    if (!(error instanceof ExactFault)) throw error;
    const found = typeof value === "object" && error.path === "" ? "found" : `found ${shown(at(value, error.path))}:`;
    findings.add(pointer + error.path, `${found} ${error.message}; accepted: ${error.accepted}`);
    return undefined;
  }
}

/**
 * A list of d exact numbers; `d` undefined: the dimension is wrong itself, sizes are not judged.
 */
export function numbersAt(
  values: readonly WrittenNumber[],
  pointer: string,
  d: number | undefined,
  findings: Findings,
): ExactNumber[] | undefined {
  if (findings.at(pointer)) return undefined;
  const numbers = values.map((value, i) => numberAt(value, below(pointer, i), findings));
  if (!sizeIs(values, pointer, d, "exact numbers, one for each coordinate", findings)) return undefined;
  return numbers.every((x) => x !== undefined) ? numbers : undefined;
}

/** Whether the list has d entries; a fault where not. */
export function sizeIs(
  values: readonly unknown[],
  pointer: string,
  d: number | undefined,
  what: string,
  findings: Findings,
): boolean {
  if (d === undefined || values.length === d) return true;
  findings.add(
    pointer,
    `found ${values.length === 1 ? "1 entry" : `${values.length} entries`}; accepted: ${d} ${what} (dimension ${d})`,
  );
  return false;
}
