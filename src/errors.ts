/**
 * Every error that a caller is meant to meet, and the exit status that goes with it.
 * Anything else that is thrown is a defect of the program.
 */

/** One fault of an input: where, what is wrong with what was found, what is accepted. */
export interface Fault {
  /** JSON Pointer into the walk file, or the name of an option (`--steps`). */
  readonly pointer: string;
  readonly message: string;
}

function describe(faults: readonly Fault[]): string {
  return faults.map((f) => `${f.pointer === "" ? "(whole file)" : f.pointer}: ${f.message}`).join("\n");
}

/** The walk file is wrong; `faults` lists everything that is, at once. */
export class WalkError extends Error {
  override readonly name = "WalkError";
  readonly exitStatus = 2;
  constructor(readonly faults: readonly Fault[]) {
    super(describe(faults));
  }
}

/** An option of a question is wrong, or does not fit the walk. */
export class OptionsError extends Error {
  override readonly name = "OptionsError";
  readonly exitStatus = 2;
  constructor(readonly faults: readonly Fault[]) {
    super(describe(faults));
  }
}

/** A stated limit (memory, 64-bit frequencies, a budget) was met before a result was reached. */
export class LimitError extends Error {
  override readonly name = "LimitError";
  readonly exitStatus = 3;
}

/** The caller's AbortSignal fired. What is finished is kept where the message says so. */
export class StoppedError extends Error {
  override readonly name = "AbortError";
  readonly exitStatus = 3;
  constructor(message = "stopped by the caller's signal") {
    super(message);
  }
}
