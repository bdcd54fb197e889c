/** From what was thrown to lines on standard error and an exit status. */
import { CommanderError } from "commander";
import { LimitError, OptionsError, StoppedError, WalkError } from "../errors.js";

export interface Failure {
  readonly status: 1 | 2 | 3;
  readonly lines: readonly string[];
}

/** A line never carries more than one line, whatever a file's text holds. */
function line(text: string): string {
  return text.replace(/[\r\n]+/g, " ");
}

/** Lines for the faults of a walk file or of options. */
export function faultLines(error: WalkError | OptionsError, file: string): string[] {
  return error.faults.map(({ pointer, message }) => {
    if (error instanceof OptionsError) return line(`${pointer}: ${message}`);
    return line(pointer === "" ? `${file}: ${message}` : `${file}: ${pointer}: ${message}`);
  });
}

/** @param file what to call the walk file */
export function failureOf(error: unknown, file: string): Failure {
  if (error instanceof WalkError || error instanceof OptionsError) {
    return { status: 2, lines: faultLines(error, file) };
  }
  if (error instanceof CommanderError) {
    return { status: 2, lines: [line(error.message.replace(/^error: /, ""))] };
  }
  if (error instanceof LimitError) {
    const how = /run again/.test(error.message)
      ? ""
      : " To go on: a smaller request, a lower --effort, or a higher --memory.";
    return { status: 3, lines: [`stopped by a limit: ${line(error.message)}.${how}`] };
  }
  if (error instanceof StoppedError) {
    const how = "To go on, run the same command again: the same seed gives the same numbers.";
    const message = line(error.message);
    return { status: 3, lines: [/run again/.test(message) ? message : `${message}. ${how}`] };
  }
  const stack = error instanceof Error ? (error.stack ?? error.message) : String(error);
  return {
    status: 1,
    lines: ["This is a defect of torwend, not of your input. Please report it with the text below.", stack],
  };
}
