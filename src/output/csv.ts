/** Positions as comma-separated text: a line of names, then a line a step. */
import type { PositionBlock } from "../trajectory/block.js";

/** `step,x1,...,xd` */
export function csvHeader(dimension: number): string {
  return `step,${Array.from({ length: dimension }, (_, j) => `x${j + 1}`).join(",")}\n`;
}

/** One line a position, each coordinate with `digits` decimals. */
export function csvRows(block: PositionBlock, digits: number): string {
  let text = "";
  for (let row = 0; row < block.rows; row++) {
    text += `${block.first + row},${block.decimals(row, digits).join(",")}\n`;
  }
  return text;
}
