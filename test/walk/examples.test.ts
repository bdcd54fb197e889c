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

  it("hold a move that reverses orientation, a translation, and starts of irrational coordinates", () => {
    const read = (name: string) => parseWalk(readFileSync(new URL(name, folder), "utf8"));
    expect(read("tray-3d.json").moves.map((m) => m.determinant)).toEqual([1, 1, -1]);
    const translations = read("tray-symmetric.json").moves.map((m) => m.translation?.map((x) => x.text));
    expect(translations).toEqual([["1/3", "0"], ["-1/3", "0"], undefined, undefined]);
    for (const name of ["tray.json", "tray-3d.json"]) {
      const { start } = read(name);
      expect(start.type === "point" && start.point.every((x) => x.kind === "algebraic")).toBe(true);
    }
  });
});
