import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { Rational } from "../../src/exact/rational.js";
import { asWalk, parseWalk } from "../../src/walk/parse.js";

const folder = new URL("../../examples/", import.meta.url);

describe("the example walk files", () => {
  it.each(readdirSync(folder).filter((name) => name.endsWith(".json")))(
    "%s parses, from text and from its document",
    (name) => {
      const walk = parseWalk(readFileSync(new URL(name, folder), "utf8"));
      const total = walk.moves.reduce((sum, move) => sum.add(move.probability), Rational.ZERO);
      expect(total.toString()).toBe("1");
      expect(asWalk(walk)).toBe(walk);
      const again = parseWalk(JSON.parse(JSON.stringify(walk.document)));
      expect(again.moves.map((m) => m.matrix)).toEqual(walk.moves.map((m) => m.matrix));
      expect(again.document).toEqual(walk.document);
    },
  );
});
