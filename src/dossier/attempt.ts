/** Asking a question so that its limits do not sink the others. */
import { LimitError, OptionsError, StoppedError } from "../errors.js";
import type { Answer, Dossier } from "./result.js";

/**
 * The answer; `stopped` where the question met a limit, `skipped` where it says that it does
 * not fit this walk. A signal and a defect go on up.
 */
export async function attempt<T>(ask: () => Promise<T>): Promise<Answer<T>> {
  try {
    return await ask();
  } catch (error) {
    if (error instanceof LimitError) return { stopped: error.message };
    if (error instanceof OptionsError) return { skipped: error.faults.map((f) => f.message).join("; ") };
    throw error;
  }
}

/** The caller's signal stopped `assess`; what was finished by then is kept in `dossier`. */
export class AssessStopped extends StoppedError {
  /** Complete but for the questions that had not been answered: those are `{stopped}`. */
  constructor(
    readonly dossier: Dossier,
    readonly answered: readonly string[],
  ) {
    super(
      `stopped by the caller's signal; answered so far: ${answered.length === 0 ? "nothing" : answered.join(", ")}. The same command and seed, run again, give the same numbers and the rest`,
    );
  }
}
