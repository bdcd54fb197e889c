/**
 * What every question is given beside its walk: the options that all questions share, and
 * the session made of them (pool, progress, stop signal). `assess` makes one session and
 * hands it to every question.
 */
import { LimitError, OptionsError, StoppedError } from "./errors.js";
import { DEFAULT_MEMORY_LIMIT } from "./kernel/kernel.js";
import { Pool } from "./kernel/pool.js";
import { Remaining } from "./remaining.js";

export type Effort = "quick" | "standard" | "thorough";

export interface Progress {
  /** What is being done, in a few words. */
  readonly stage: string;
  readonly done: number;
  readonly total: number;
  /** What the stage will still take at the pace it has shown, in seconds; absent while that cannot be told. */
  readonly secondsLeft?: number;
}

/** Options of every question. */
export interface CommonOptions {
  /** Unsigned 64-bit; default 1. The same seed gives the same result for any number of workers. */
  readonly seed?: bigint | number;
  /** Number of worker threads; 0 or 1: the calling thread. Default: the processors. */
  readonly workers?: number;
  readonly signal?: AbortSignal;
  readonly onProgress?: (progress: Progress) => void;
  readonly effort?: Effort;
  /** Confidence level of estimated intervals, in (0, 1); default 0.95. */
  readonly level?: number;
  /** Bytes that one kernel's memory may reach; default 1 GiB. */
  readonly memoryLimit?: number;
}

export interface Session {
  readonly seed: bigint;
  readonly effort: Effort;
  readonly level: number;
  readonly memoryLimit: number;
  readonly pool: Pool;
  readonly signal: AbortSignal | undefined;
  /** @param secondsLeft where the pieces of work are uneven, null for unknown; default: told from those that are done */
  progress(stage: string, done: number, total: number, secondsLeft?: number | null): void;
  /** @throws StoppedError once the signal has fired. Call between pieces of long in-thread work. */
  checkStop(): void;
}

/** The options under this key carry a session that is already open: for `assess`. */
export const SESSION: unique symbol = Symbol("torwend session");
export interface SharedSession {
  readonly [SESSION]?: Session;
}

export function openSession(options: CommonOptions): Session {
  const faults: { pointer: string; message: string }[] = [];
  let seed = 1n;
  if (options.seed !== undefined) {
    const given = options.seed;
    const whole = typeof given === "bigint" || Number.isSafeInteger(given);
    if (!whole || BigInt(given) < 0n || BigInt(given) >= 1n << 64n) {
      faults.push({ pointer: "--seed", message: `found ${given}; accepted: a whole number from 0 to 2^64 - 1` });
    } else seed = BigInt(given);
  }
  const { workers, effort = "standard", level = 0.95, memoryLimit = DEFAULT_MEMORY_LIMIT } = options;
  if (workers !== undefined && !(Number.isInteger(workers) && workers >= 0 && workers <= 256)) {
    faults.push({ pointer: "--workers", message: `found ${workers}; accepted: a whole number from 0 to 256` });
  }
  if (!["quick", "standard", "thorough"].includes(effort)) {
    faults.push({ pointer: "--effort", message: `found ${effort}; accepted: quick, standard or thorough` });
  }
  if (!(level > 0 && level < 1)) {
    faults.push({ pointer: "--level", message: `found ${level}; accepted: a number between 0 and 1` });
  }
  if (faults.length > 0) throw new OptionsError(faults);
  const known = new Map<string, new (message: string) => Error>([
    ["LimitError", LimitError],
    ["AbortError", StoppedError],
  ]);
  const { signal, onProgress } = options;
  const remaining = new Remaining();
  return {
    seed,
    effort,
    level,
    memoryLimit,
    pool: new Pool(workers, known),
    signal,
    progress: (stage, done, total, secondsLeft = remaining.left(stage, done, total)) =>
      onProgress?.({ stage, done, total, ...(typeof secondsLeft === "number" ? { secondsLeft } : {}) }),
    checkStop: () => {
      if (signal?.aborted) throw new StoppedError();
    },
  };
}

/** Runs `body` with a session made of `options`, or with the one they carry, and closes what it opened. */
export async function withSession<T>(
  options: CommonOptions & SharedSession,
  body: (session: Session) => Promise<T>,
): Promise<T> {
  const shared = options[SESSION];
  if (shared !== undefined) return body(shared);
  const session = openSession(options);
  try {
    session.checkStop();
    return await body(session);
  } finally {
    session.pool.close();
  }
}
