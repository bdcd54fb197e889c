import { describe, expect, it } from "vitest";
import { loadKernel } from "../../src/kernel/kernel.js";

type Four = [number, number, number, number];

// Known-answer vectors published with the Random123 sources of the method's authors (kat_vectors; from memory).
const VECTORS: [Four, [number, number], number[]][] = [
  [
    [0, 0, 0, 0],
    [0, 0],
    [0x6627e8d5, 0xe169c58d, 0xbc57ac4c, 0x9b00dbd8],
  ],
  [
    [0xffffffff, 0xffffffff, 0xffffffff, 0xffffffff],
    [0xffffffff, 0xffffffff],
    [0x408f276d, 0x41c83b0e, 0xa20bc7c6, 0x6d5451fd],
  ],
  [
    [0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344],
    [0xa4093822, 0x299f31d0],
    [0xd16cfe09, 0x94fdcceb, 0x5001e420, 0x24126ea1],
  ],
];

describe("philoxBlock", () => {
  for (const target of ["simd", "plain"] as const) {
    it(`gives the published vectors (${target})`, async () => {
      const kernel = await loadKernel({ target });
      const out = kernel.alloc(16, "a block");
      for (const [[c0, c1, c2, c3], [k0, k1], expected] of VECTORS) {
        kernel.raw.philoxBlock(out, c0, c1, c2, c3, k0, k1);
        expect([...kernel.u32(out, 4)]).toEqual(expected);
      }
    });
  }
});
