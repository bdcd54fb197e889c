import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { brief, decimalValue, settled, shown, significant, superscript } from "../../src/dossier/numbers.js";
import { Rational } from "../../src/exact/rational.js";
import { enclosedQuantity, estimatedQuantity, exactQuantity } from "../../src/quantity/quantity.js";

/** What a reader would make of a shown number. */
function read(text: string): Rational {
  const digits = "⁰¹²³⁴⁵⁶⁷⁸⁹";
  const plain = text
    .replace(/\s/g, "")
    .replace(/−/g, "-")
    .replace(
      /×10([⁻⁰-⁹¹²³]+)$/,
      (_, e: string) => `e${e.replace(/./g, (c) => (c === "⁻" ? "-" : digits.indexOf(c)).toString())}`,
    );
  const value = decimalValue(plain);
  if (value === undefined) throw new Error(`cannot read ${text}`);
  return value;
}

describe("shown", () => {
  it("shows the digits that the interval supports", () => {
    expect(shown(estimatedQuantity(1.14331, "m", { low: 1.14261, high: 1.14401 }))).toEqual({
      value: "1.14331",
      interval: "1.14261 to 1.14401",
      standing: "estimated, 95\u202f% interval",
    });
    expect(shown(estimatedQuantity(28123.4, "m", { low: 27000, high: 29300 })).value).toBe("28\u202f100");
    expect(shown(estimatedQuantity(281.4, "m", { low: 280.1, high: 282.9 }, 0.9), true)).toEqual({
      value: "281",
      interval: "280 to 283",
      standing: "estimated, 90\u202f% interval",
    });
    expect(shown(estimatedQuantity(-3.2e-9, "m", { low: -3.3e-9, high: -3.1e-9 })).value).toBe(
      "−3.20\u202f×\u202f10⁻⁹",
    );
  });
  it("says how far a number can be relied on", () => {
    expect(shown(exactQuantity(Rational.of(5, 2), "m"))).toEqual({ value: "5/2 ≈ 2.50000", standing: "exact" });
    expect(shown(exactQuantity(12n, "m"))).toEqual({ value: "12", standing: "exact" });
    // A narrow enclosure: its middle, to 13 digits, and ends that still enclose.
    const narrow = { ...enclosedQuantity(1, 1.5, "m"), low: "0.12345678901234567", high: "0.12345678901234568" };
    expect(shown(narrow)).toEqual({
      value: "0.1234567890123",
      interval: "0.1234567890123 to 0.1234567890124",
      standing: "proved to lie in",
    });
    expect(shown(enclosedQuantity(1, 1.5, "m")).standing).toBe("proved to lie in");
    expect(shown(estimatedQuantity(0.123456, "m"))).toEqual({ value: "0.1235", standing: "estimated, no interval" });
  });
  it("never writes NaN, null or undefined", () => {
    for (const value of [Number.NaN, Number.POSITIVE_INFINITY, null as unknown as number]) {
      const text = JSON.stringify(shown({ value, standing: "estimated", low: "NaN", high: "Infinity", method: "m" }));
      expect(text).not.toMatch(/NaN|null|undefined|Infinity/);
    }
  });
  it("rounds an interval outward, narrowly, and the value to the nearest", () => {
    const finite = fc.double({ min: -1e12, max: 1e12, noNaN: true });
    fc.assert(
      fc.property(finite, fc.double({ min: 1e-14, max: 1e6, noNaN: true }), (middle, half) => {
        const [low, high] = [middle - half, middle + half];
        // Beyond 13 digits a report rounds further out.
        fc.pre(high - low > 1e-9 * Math.abs(middle));
        const q = estimatedQuantity(middle, "m", { low, high });
        const found = shown(q);
        const [from, to] = (found.interval as string).split(" to ").map(read) as [Rational, Rational];
        const ends = [q.low, q.high].map((end) => read(end as string)) as [Rational, Rational];
        const width = ends[1].sub(ends[0]);
        expect(from.compare(ends[0])).toBeLessThanOrEqual(0);
        expect(to.compare(ends[1])).toBeGreaterThanOrEqual(0);
        expect(to.sub(from).compare(width.mul(Rational.of(13, 10)))).toBeLessThanOrEqual(0);
        expect(
          read(found.value)
            .sub(Rational.fromNumber(middle))
            .abs()
            .compare(width.mul(Rational.of(1, 20))),
        ).toBeLessThanOrEqual(0);
      }),
    );
  });
});

describe("plain numbers", () => {
  it("are written for readers", () => {
    expect(significant(0.00012345, 3)).toBe("0.000123");
    expect(significant(1.5e-12, 2)).toBe("1.5\u202f×\u202f10⁻¹²");
    expect(brief(0.25)).toBe("0.25");
    expect(brief(1234567)).toBe("1\u202f234\u202f567");
    expect(brief(-3)).toBe("−3");
    expect(superscript(-120)).toBe("⁻¹²⁰");
  });
  it("are read back from decimal strings", () => {
    expect(decimalValue("-1.25e-3")?.toString()).toBe("-1/800");
    expect(decimalValue(".5")?.toString()).toBe("1/2");
    expect(decimalValue("NaN")).toBeUndefined();
    expect(decimalValue("")).toBeUndefined();
  });
});

describe("settled", () => {
  it("gives the digits that an enclosure proves, and nothing where it does not", () => {
    expect(settled(enclosedQuantity(0.4999999999999, 0.5000000000001, "m"))).toBe("0.500000");
    expect(settled(enclosedQuantity(2.3456784, 2.3456785, "m"))).toBe("2.34568");
    // The ends round to different digits.
    expect(settled(enclosedQuantity(2.3456749, 2.3456751, "m"))).toBeUndefined();
    expect(settled(enclosedQuantity(2.488, 2.5001, "m"))).toBeUndefined();
    expect(settled(estimatedQuantity(1, "m"))).toBeUndefined();
  });
});
