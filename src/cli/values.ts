/** Option values: from the text on the command line to a number, or to what is wrong with it. */

/** Thrown by a reader; becomes one fault of its option. */
export class ValueFault extends Error {}

export type Reader<T> = (text: string) => T;

function refuse(text: string, accepted: string): never {
  throw new ValueFault(`found ${JSON.stringify(text)}; accepted: ${accepted}`);
}

/** A whole number, plain or such as 1e6. Ranges are the questions' business. */
export const whole: Reader<number> = (text) => {
  const x = /^[+-]?\d+(e\+?\d{1,2})?$/i.test(text) ? Number(text) : Number.NaN;
  return Number.isSafeInteger(x) ? x : refuse(text, "a whole number");
};

export const real: Reader<number> = (text) => {
  const x = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i.test(text) ? Number(text) : Number.NaN;
  return Number.isFinite(x) ? x : refuse(text, "a number");
};

/** Whole numbers of any size, separated by commas, kept as text. */
export const bigList: Reader<string[]> = (text) => {
  const parts = text.split(",").map((part) => part.trim());
  return parts.every((part) => /^[+-]?\d+$/.test(part)) ? parts : refuse(text, "whole numbers separated by commas");
};

function listOf(reader: Reader<number>, accepted: string): Reader<number[]> {
  return (text) => {
    try {
      return text.split(",").map((part) => reader(part.trim()));
    } catch {
      return refuse(text, accepted);
    }
  };
}

export const wholeList = listOf(whole, "whole numbers separated by commas");
export const realList = listOf(real, "numbers separated by commas");

export const seed: Reader<bigint> = (text) => {
  const x = /^\d+$/.test(text) ? BigInt(text) : -1n;
  return x >= 0n && x < 1n << 64n ? x : refuse(text, "a whole number from 0 to 2^64 - 1");
};

export const effort: Reader<"quick" | "standard" | "thorough"> = (text) =>
  text === "quick" || text === "standard" || text === "thorough" ? text : refuse(text, "quick, standard or thorough");

/** MiB on the command line, bytes inside. */
export const memory: Reader<number> = (text) => {
  const x = /^\d+$/.test(text) ? Number(text) : 0;
  return x >= 1 && x <= 4095 ? x * 2 ** 20 : refuse(text, "a whole number of MiB from 1 to 4095");
};

export const level: Reader<number> = (text) => {
  const x = real(text);
  return x > 0 && x < 1 ? x : refuse(text, "a number between 0 and 1, such as 0.95");
};

export const workers: Reader<number> = (text) => {
  const x = whole(text);
  return x >= 0 && x <= 256 ? x : refuse(text, "a whole number from 0 to 256");
};

export const anyText: Reader<string> = (text) => text;

/** A flag without a value. */
export const yes: Reader<boolean> = () => true;
