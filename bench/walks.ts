/** Walks that several benches share. */
import { parseWalk } from "../src/walk/parse.js";
import type { Walk } from "../src/walk/walk.js";

/** {[[2,1],[1,1]], [[3,1],[2,1]]}, half each. */
export function trayWalk(start: readonly string[] | { readonly uniform: true }): Walk {
  const moves = [
    [2, 1, 1, 1],
    [3, 1, 2, 1],
  ].map(([a, b, c, d]) => ({
    matrix: [
      [a, b],
      [c, d],
    ],
  }));
  return parseWalk({ torwend: 1, title: "tray", dimension: 2, moves, start });
}
