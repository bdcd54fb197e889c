import { Decimal } from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ExactFault } from "../../src/exact/fault.js";
import { exactFromText } from "../../src/exact/read.js";

const Wide = Decimal.clone({ precision: 420 });
const PI = Wide.acos(-1);
const E = Wide.exp(1);

interface Sample {
  readonly text: string;
  readonly value: Decimal;
}

const leaf: fc.Arbitrary<Sample> = fc.oneof(
  fc.integer({ min: 0, max: 30 }).map((n) => ({ text: String(n), value: new Wide(n) })),
  fc.tuple(fc.integer({ min: 0, max: 99 }), fc.integer({ min: 0, max: 999 })).map(([a, b]) => {
    const text = `${a}.${String(b).padStart(3, "0")}`;
    return { text, value: new Wide(text) };
  }),
  fc.integer({ min: 1, max: 12 }).map((n) => ({ text: `sqrt(${n})`, value: new Wide(n).sqrt() })),
  fc.constantFrom({ text: "pi", value: PI }, { text: "e", value: E }, { text: "cbrt(2)", value: new Wide(2).cbrt() }),
);

const sample: fc.Arbitrary<Sample> = fc.letrec<{ sample: Sample }>((tie) => ({
  sample: fc.oneof(
    { maxDepth: 4, withCrossShrink: true },
    leaf,
    fc.tuple(tie("sample"), fc.constantFrom("+", "-", "*", "/"), tie("sample")).map(([x, sign, y]) => ({
      text: `(${x.text}) ${sign} (${y.text})`,
      value: {
        "+": x.value.plus(y.value),
        "-": x.value.minus(y.value),
        "*": x.value.times(y.value),
        "/": x.value.div(y.value),
      }[sign] as Decimal,
    })),
    fc.tuple(tie("sample"), fc.integer({ min: -3, max: 5 })).map(([x, n]) => ({
      text: `(${x.text})^${n}`,
      value: x.value.pow(n),
    })),
    tie("sample").map((x) => ({ text: `-(${x.text})`, value: x.value.neg() })),
    tie("sample").map((x) => ({ text: `cbrt(${x.text})`, value: x.value.cbrt() })),
    tie("sample").map((x) => ({ text: `sqrt((${x.text})^2)`, value: x.value.abs() })),
  ),
})).sample;

describe("expressions", () => {
  it("agrees with an independent arbitrary-precision library at any number of bits", () => {
    let compared = 0;
    fc.assert(
      fc.property(
        sample,
        fc.integer({ min: 0, max: 600 }),
        fc.integer({ min: 0, max: 600 }),
        ({ text, value }, first, second) => {
          // Near 0 and near a pole the library's own cancellation would be in the way.
          fc.pre(value.isFinite() && (value.isZero() || (value.abs().gt("1e-40") && value.abs().lt("1e40"))));
          let x: ReturnType<typeof exactFromText>;
          try {
            x = exactFromText(text);
          } catch (error) {
            if (!(error instanceof ExactFault) || !/0/.test(error.message)) throw error;
            return;
          }
          for (const bits of [first, second]) {
            const scaled = value.times(new Wide(2).pow(bits));
            const off = scaled.minus(new Wide(x.toFixed(bits).toString())).abs();
            expect(off.lte(1.0001), `${text} at ${bits} bits is off by ${off}`).toBe(true);
          }
          if (!value.isZero()) expect(Math.abs(x.toNumber() / value.toNumber() - 1)).toBeLessThan(4.5e-16);
          compared++;
        },
      ),
      { numRuns: 400 },
    );
    expect(compared).toBeGreaterThan(200);
  });

  it("narrower values are the leading digits of wider ones, in any order of asking", () => {
    const [up, down] = [exactFromText("sqrt(3)/pi"), exactFromText("sqrt(3)/pi")];
    const bits = [1, 64, 65, 1000, 5000];
    const rising = bits.map((b) => up.toFixed(b));
    const falling = [...bits].reverse().map((b) => down.toFixed(b));
    bits.forEach((b, i) => {
      const wide = falling[0] >> BigInt(5000 - b);
      for (const m of [rising[i], falling[bits.length - 1 - i]]) expect([-1n, 0n, 1n, 2n]).toContain(m - wide);
    });
    expect(() => up.toFixed(-1)).toThrow("toFixed: -1 is not a number of bits");
  });

  it.each([
    ["-2^2", "-4"],
    ["2^3^2", "512"],
    ["2^-3", "1/8"],
    ["1 - 2 - 3", "-4"],
    ["12/3/2", "2"],
    ["+3", "3"],
    ["--3", "3"],
    ["0.125", "1/8"],
    ["2^sqrt(4)", "4"],
    ["0^0", "1"],
    [" ( 1/3 ) ", "1/3"],
  ])("%s is %s", (text, value) => {
    expect(exactFromText(text).rational?.toString()).toBe(value);
  });

  it.each([
    ["", "the text is empty"],
    ["2+", 'at character 3: the text ends where a number, "(", sqrt( ), cbrt( ), pi or e is due'],
    ["3 4", 'at character 3: found "4" where an operator or the end is due'],
    ["sqrt 2", 'at character 6: found "2" where "(" after sqrt is due'],
    ["sqrt(2", 'at character 7: the text ends where an operator or ")" is due'],
    ["sin(1)", 'at character 1: found "sin" where'],
    ["1,5", 'at character 2: "," is not part of an expression'],
    [".5", 'at character 1: "." is not part of an expression'],
    ["1e3", 'at character 2: found "e" where an operator or the end is due'],
    ["1/0", "at character 2: the divisor is exactly 0"],
    ["1/(sqrt(6)-sqrt(2)*sqrt(3))", "at character 2: the divisor is exactly 0"],
    ["1/(pi-pi)", "the divisor is exactly 0"],
    ["1/((pi+1)-1-pi)", "cannot be told from 0"],
    ["sqrt(1-sqrt(2))", "at character 1: the square root of a negative number (about -0.414214)"],
    ["sqrt(-1/4)", "the square root of a negative number (-1/4)"],
    ["sqrt(3-pi)", "the square root of a negative number"],
    ["2^(1/2)", "at character 3: the power is not an integer from -1000 to 1000"],
    ["2^pi", "the power is not an integer"],
    ["2^1001", "the power is not an integer from -1000 to 1000"],
    ["0^-1", "the divisor is exactly 0"],
    ["((2^1000)^1000)^1000", "a number of more than 65536 bits comes up"],
    ["(pi^1000)^1000", "a number of more than 65536 bits comes up"],
    ["(".repeat(200), "nested more than 100 deep"],
    ["1+".repeat(2000), "an expression of more than 2000 characters"],
  ])("refuses %j, saying where and why", (text, message) => {
    let error: unknown;
    try {
      exactFromText(text);
    } catch (thrown) {
      error = thrown;
    }
    expect(error).toBeInstanceOf(ExactFault);
    expect((error as ExactFault).message).toContain(message);
    expect((error as ExactFault).accepted).toContain("sqrt( )");
  });
});
