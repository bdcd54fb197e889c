/** What a command is: a question, its options, and how its answer reads. One file each in commands/. */
import type { CommonOptions } from "../session.js";
import type { Walk } from "../walk/walk.js";
import type { Host } from "./host.js";
import { effort, level, memory, type Reader, seed, workers } from "./values.js";

export interface OptionSpec {
  /** As commander takes it, such as `--steps <n>`. */
  readonly flags: string;
  readonly text: string;
  readonly read: Reader<unknown>;
  readonly required?: boolean;
}

export interface Task<Values> {
  readonly walk: Walk;
  readonly values: Values;
  /** Options for the question: seed, workers, signal, progress. */
  readonly common: CommonOptions;
  readonly host: Host;
}

export interface Outcome {
  /** The document that `--json` prints. */
  readonly result: object;
  /** What is printed otherwise. */
  readonly text: string;
  readonly warnings?: readonly string[] | undefined;
  /** Present where a stated limit ended the work early: exit status 3, and how to go on. */
  readonly stopped?: string | undefined;
}

export interface Question<Values = Record<string, unknown>> {
  readonly name: string;
  /** The question it answers. */
  readonly summary: string;
  readonly examples: readonly string[];
  readonly options: readonly OptionSpec[];
  /** Before anything long: what can be refused early. */
  readonly prepare?: (values: Values) => Promise<void>;
  readonly ask: (task: Task<Values>) => Promise<Outcome>;
}

/** Options of every command. */
export const COMMON: readonly OptionSpec[] = [
  { flags: "--seed <n>", text: "fixes all randomness, 0 to 2^64 - 1 (default: 1)", read: seed },
  { flags: "--workers <n>", text: "worker threads; 0: none (default: the processors)", read: workers },
  { flags: "--effort <e>", text: "quick, standard or thorough (default: standard)", read: effort },
  { flags: "--level <p>", text: "confidence level of estimated intervals (default: 0.95)", read: level },
  { flags: "--memory <mib>", text: "memory that one computation may take, in MiB (default: 1024)", read: memory },
];

/** The name under which a flag's value is kept: `--memory <mib>` is `memory`. */
export function keyOf(flags: string): string {
  return (flags.split(" ")[0] as string).slice(2);
}
