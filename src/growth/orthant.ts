/**
 * Signs that make moves non-negative: D with entries +-1 on the diagonal and a sign for each
 * move such that no entry of +-D A D is negative. Products are then comparable with products
 * of the absolute values, entry by entry. Each entry not 0 is an equation between signs,
 * e_j e_k s_i = sign of A_jk: linear modulo 2, solved exactly.
 */
import type { Walk } from "../walk/walk.js";

type Matrix = readonly (readonly bigint[])[];

/** The moves' absolute values where such signs exist, else undefined. */
export function nonNegativeMoves(walk: Walk): Matrix[] | undefined {
  const d = walk.dimension;
  const right = 1n << BigInt(d + walk.moves.length);
  // Reduced equations by their leading unknown: bits of the unknowns, and the right side above them.
  const rows = new Map<number, bigint>();
  for (const [i, { matrix }] of walk.moves.entries()) {
    for (let j = 0; j < d; j++) {
      for (let k = 0; k < d; k++) {
        const x = matrix[j][k];
        if (x === 0n) continue;
        let equation = (1n << BigInt(j)) ^ (1n << BigInt(k)) ^ (1n << BigInt(d + i)) ^ (x < 0n ? right : 0n);
        for (let bit = 0; bit < d + walk.moves.length; bit++) {
          if (((equation >> BigInt(bit)) & 1n) === 0n) continue;
          const known = rows.get(bit);
          if (known === undefined) {
            rows.set(bit, equation);
            equation = 0n;
            break;
          }
          equation ^= known;
        }
        if (equation !== 0n) return undefined; // 0 = 1
      }
    }
  }
  return walk.moves.map(({ matrix }) => matrix.map((row) => row.map((x) => (x < 0n ? -x : x))));
}
