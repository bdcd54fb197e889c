/** The command line as a function: arguments and surroundings in, exit status out. */
import { Command, CommanderError } from "commander";
import { OptionsError, WalkError } from "../errors.js";
import type { CommonOptions } from "../session.js";
import { VERSION } from "../version.js";
import { COMMON, keyOf, type Question } from "./command.js";
import { QUESTIONS } from "./commands/index.js";
import { failureOf, faultLines } from "./failure.js";
import type { Host } from "./host.js";
import { nameOf, readValues, readWalk } from "./input.js";
import { jsonText } from "./json.js";
import { openProgress } from "./progress.js";

export type Status = 0 | 1 | 2 | 3;

interface Given extends Readonly<Record<string, unknown>> {
  readonly json?: boolean;
  readonly progress?: boolean;
}

function say(host: Host, line: string): void {
  host.stderr.write(`torwend: ${line}\n`);
}

/** Runs one question and prints its answer. */
async function answer(question: Question, file: string, given: Given, host: Host): Promise<Status> {
  const faults: string[] = [];
  const collect = <T>(error: unknown): T | undefined => {
    if (!(error instanceof WalkError || error instanceof OptionsError)) throw error;
    faults.push(...faultLines(error, nameOf(file)));
    return undefined;
  };
  let all: Record<string, unknown> | undefined;
  try {
    all = readValues([...question.options, ...COMMON], given);
  } catch (error) {
    collect(error);
  }
  const own = new Set(question.options.map((o) => keyOf(o.flags)));
  const values = Object.fromEntries(Object.entries(all ?? {}).filter(([key]) => own.has(key)));
  if (all !== undefined) await question.prepare?.(values).catch(collect);
  const walk = await readWalk(file, host).catch((error) => collect<never>(error));
  if (faults.length > 0 || walk === undefined || all === undefined) {
    for (const fault of faults) say(host, fault);
    return 2;
  }
  const view = openProgress(host.stderr, given.progress === true);
  const { memory, ...rest } = Object.fromEntries(Object.entries(all).filter(([key]) => !own.has(key)));
  const common: CommonOptions = {
    ...rest,
    ...(memory === undefined ? {} : { memoryLimit: memory as number }),
    ...(host.signal === undefined ? {} : { signal: host.signal }),
    ...(view.show === undefined ? {} : { onProgress: view.show }),
  };
  try {
    const outcome = await question.ask({ walk, values, common, host });
    view.end();
    host.stdout.write(given.json === true ? jsonText(outcome.result) : outcome.text);
    for (const warning of outcome.warnings ?? []) say(host, `warning: ${warning}`);
    if (outcome.stopped !== undefined) say(host, outcome.stopped);
    return outcome.stopped === undefined ? 0 : 3;
  } finally {
    view.end();
  }
}

function build(host: Host, done: (status: Promise<Status>) => void): Command {
  const program = new Command("torwend")
    .description(
      "Random walks on the torus by integer matrices: every number exact, enclosed or estimated, and said so.",
    )
    .version(VERSION, "--version", "print the version")
    .helpOption("--help", "print this help")
    .helpCommand(false)
    .addHelpText(
      "after",
      "\nExamples:\n  torwend growth examples/tray.json\n  torwend trajectory - --steps 100 --json < examples/tray.json\n\nExit status: 0 done; 2 wrong input or options; 3 stopped by a limit or a signal; 1 a defect.",
    )
    .exitOverride()
    .configureOutput({ writeOut: (text) => host.stdout.write(text), writeErr: () => undefined });
  for (const question of QUESTIONS) {
    const command = program
      .command(question.name)
      .summary(question.summary)
      .description(`Answers: ${question.summary}.`)
      .argument("<walk>", "the walk file, or - for standard input")
      .helpOption("--help", "print this help");
    for (const { flags, text, required } of question.options) {
      command.option(flags, required ? `${text} (needed)` : text);
    }
    for (const { flags, text } of COMMON) command.option(flags, text);
    command
      .option("--json", "print one JSON document on standard output, and nothing else there")
      .option("--progress", "show progress on standard error even where it is no terminal")
      .option("--version", "print the version")
      .addHelpText("after", `\nExample${question.examples.length > 1 ? "s" : ""}:\n  ${question.examples.join("\n  ")}`)
      .action((file: string, given: Given) => done(answer(question, file, given, host)));
  }
  return program;
}

/**
 * Runs a command line.
 * @param argv the arguments after the program's name
 */
export async function run(argv: readonly string[], host: Host): Promise<Status> {
  let file = "";
  try {
    // `torwend COMMAND --version` needs no walk.
    if (argv.includes("--version")) {
      host.stdout.write(`${VERSION}\n`);
      return 0;
    }
    if (argv.length === 0) {
      say(host, "no command is given; torwend --help lists them");
      return 2;
    }
    let status: Promise<Status> = Promise.resolve(0);
    const program = build(host, (s) => {
      status = s;
    });
    file = argv[1] ?? "";
    program.parse([...argv], { from: "user" });
    return await status;
  } catch (error) {
    if (error instanceof CommanderError && error.exitCode === 0) return 0;
    const failure = failureOf(error, nameOf(file));
    for (const line of failure.lines) say(host, line);
    return failure.status;
  }
}
