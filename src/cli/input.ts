/** The walk and the option values of a command line; every fault of both at once. */
import { readFile } from "node:fs/promises";
import { type Fault, OptionsError, WalkError } from "../errors.js";
import { reason } from "../output/reason.js";
import { parseWalk } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { keyOf, type OptionSpec } from "./command.js";
import { decodeText } from "./files.js";
import type { Host } from "./host.js";
import { ValueFault } from "./values.js";

/** What messages call the walk file. */
export function nameOf(file: string): string {
  return file === "-" ? "standard input" : file;
}

/** @throws WalkError */
export async function readWalk(file: string, host: Host): Promise<Walk> {
  const refuse = (message: string): never => {
    throw new WalkError([{ pointer: "", message }]);
  };
  let bytes: Uint8Array;
  try {
    bytes = file === "-" ? await host.stdin() : await readFile(file);
  } catch (error) {
    return refuse(`cannot be read: ${reason(error)}`);
  }
  const text = decodeText(bytes);
  return parseWalk(text ?? refuse("found bytes that are not UTF-8; accepted: the JSON text of a walk file"));
}

/** @throws OptionsError with the fault of each value that is wrong */
export function readValues(
  specs: readonly OptionSpec[],
  given: Readonly<Record<string, unknown>>,
): Record<string, unknown> {
  const faults: Fault[] = [];
  const values: Record<string, unknown> = {};
  for (const { flags, text: accepted, read, required } of specs) {
    const key = keyOf(flags);
    const text = given[key];
    if (text === undefined) {
      if (required) faults.push({ pointer: `--${key}`, message: `found nothing; accepted: ${accepted}` });
      continue;
    }
    try {
      values[key] = read(text as string);
    } catch (error) {
      if (!(error instanceof ValueFault)) throw error;
      faults.push({ pointer: `--${key}`, message: error.message });
    }
  }
  if (faults.length > 0) throw new OptionsError(faults);
  return values;
}
