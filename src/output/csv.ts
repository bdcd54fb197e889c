/** Positions as comma-separated text: a line of names, then a line a step. */
import { type EncoderFactory, NOTHING } from "./encoder.js";

/** `step,x1,...,xd`, then one line a position, each coordinate with the digits that are proved. */
export const csvEncoder: EncoderFactory = ({ dimension, digits }) => {
  const utf8 = new TextEncoder();
  return {
    header: () => utf8.encode(`step,${Array.from({ length: dimension }, (_, j) => `x${j + 1}`).join(",")}\n`),
    rows: (block) => {
      let text = "";
      for (let row = 0; row < block.rows; row++) {
        text += `${block.first + row},${block.decimals(row, digits).join(",")}\n`;
      }
      return utf8.encode(text);
    },
    footer: () => NOTHING,
    state: {},
  };
};
