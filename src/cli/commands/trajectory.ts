import { OptionsError } from "../../errors.js";
import { positionFile } from "../../output/file.js";
import { parseChoices } from "../../trajectory/choices.js";
import { trajectory } from "../../trajectory/trajectory.js";
import type { Question } from "../command.js";
import { prepareFile, readOptionFile } from "../files.js";
import { block, page, table } from "../render.js";
import { anyText, whole, wholeList, yes } from "../values.js";

interface Values {
  readonly steps?: number;
  readonly choices?: string;
  readonly at?: readonly number[];
  readonly digits?: number;
  readonly out?: string;
  readonly resume?: boolean;
}

export const trajectoryQuestion: Question<Values> = {
  name: "trajectory",
  summary: "where exactly the walk is",
  examples: [
    "torwend trajectory examples/tray.json --steps 1000 --at 10,100,1000",
    "torwend trajectory examples/tray.json --steps 100000 --out positions.npy",
    "torwend trajectory examples/tray.json --steps 100000 --out positions.npy --resume",
  ],
  options: [
    { flags: "--steps <n>", text: "number of moves; with --choices: as many as the file has", read: whole },
    { flags: "--choices <file>", text: "move indices from 0, one a line, in place of random draws", read: anyText },
    { flags: "--at <list>", text: "moves after which the position is shown, separated by commas", read: wholeList },
    { flags: "--digits <d>", text: "decimals of each coordinate (default: 15)", read: whole },
    { flags: "--out <file>", text: "write all positions to a file .npy, .csv or .arrow", read: anyText },
    { flags: "--resume", text: "go on with the unfinished walk of the same --out", read: yes },
  ],
  prepare: async ({ out, resume }) => {
    if (out === undefined) {
      if (resume !== true) return;
      throw new OptionsError([
        { pointer: "--resume", message: "found no --out; accepted: beside the --out to go on with" },
      ]);
    }
    positionFile(out);
    await prepareFile(out);
  },
  ask: async ({ walk, values, common }) => {
    const { choices, out, resume = false, ...rest } = values;
    const chosen =
      choices === undefined ? undefined : parseChoices(await readOptionFile("--choices", choices), walk.moves.length);
    const result = await trajectory(walk, {
      ...common,
      ...rest,
      ...(chosen === undefined ? {} : { choices: chosen }),
      ...(out === undefined ? {} : { out: positionFile(out, { resume }) }),
    });
    const exact = result.standing === "exact";
    const rows = result.positions.map((p) => [
      String(p.step),
      ...p.point,
      ...(p.fractions === undefined ? [] : [`(${p.fractions.join(", ")})`]),
    ]);
    const fractions = result.positions.some((p) => p.fractions !== undefined);
    const head = ["move", ...walk.moves[0]!.matrix.map((_, i) => `x_${i + 1}`), ...(fractions ? ["exactly"] : [])];
    const text = page(result.walk, [
      block(
        exact ? "Positions, exact" : `Positions, each coordinate proved right to ${result.digits} decimals`,
        table(head, rows),
      ),
      `Binary digits of the start that the moves use up, a coordinate: ${result.bitsConsumedKind === "bound" ? "at most " : ""}${result.bitsConsumed}.`,
      result.written && `Written to ${result.written.file}: ${result.written.rows} positions.`,
    ]);
    return { result, text };
  },
};
