/** The file of `--choices`: one move index a line, in place of random draws. */
import { type Fault, OptionsError } from "../errors.js";

/** Faults shown at most; the last line says how many there are in all. */
const SHOWN = 20;

/**
 * Reads move indices, 0-based, one a line. Spaces around an index, empty lines at the end
 * and lines that begin with `#` are passed over.
 * @param moves the number of moves of the walk
 * @throws OptionsError with the line of each fault
 */
export function parseChoices(text: string, moves: number): Uint16Array<ArrayBuffer> {
  const lines = text.replace(/^\uFEFF/, "").split(/\r\n|\n|\r/);
  while (lines.length > 0 && (lines[lines.length - 1] as string).trim() === "") lines.pop();
  const choices = new Uint16Array(lines.length);
  const faults: Fault[] = [];
  let count = 0;
  let wrong = 0;
  for (const [i, line] of lines.entries()) {
    const found = line.trim();
    if (found.startsWith("#")) continue;
    if (/^\d+$/.test(found) && Number(found) < moves) choices[count++] = Number(found);
    else if (wrong++ < SHOWN) {
      const what = found === "" ? "an empty line" : JSON.stringify(found.slice(0, 40));
      faults.push({ pointer: "--choices", message: `line ${i + 1}: found ${what}; accepted: ${accepted(moves)}` });
    }
  }
  if (wrong > SHOWN) {
    faults.push({ pointer: "--choices", message: `${wrong} lines are wrong in all; the first ${SHOWN} are shown` });
  }
  if (faults.length > 0) throw new OptionsError(faults);
  return choices.slice(0, count);
}

function accepted(moves: number): string {
  return moves === 1 ? "the move index 0" : `a move index from 0 to ${moves - 1}`;
}

/**
 * The same checks for choices given as numbers.
 * @throws OptionsError naming the first fault
 */
export function checkChoices(choices: ArrayLike<number>, moves: number): Uint16Array<ArrayBuffer> {
  const out = new Uint16Array(choices.length);
  for (let i = 0; i < choices.length; i++) {
    const c = choices[i] as number;
    if (!(Number.isInteger(c) && c >= 0 && c < moves)) {
      throw new OptionsError([
        { pointer: "--choices", message: `entry ${i}: found ${c}; accepted: ${accepted(moves)}` },
      ]);
    }
    out[i] = c;
  }
  return out;
}
