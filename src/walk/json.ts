/**
 * The JSON document behind a walk, from text or from an object; what JSON readers pass over
 * in silence is found here: duplicate keys, and numbers that do not survive being read.
 */
import { type Node, type ParseError, parseTree, printParseErrorCode } from "jsonc-parser";
import { WalkError } from "../errors.js";
import { Rational } from "../exact/rational.js";
import { below, type Findings, shown } from "./findings.js";

/** Levels of nesting; a walk file needs six. */
const DEPTH_LIMIT = 64;

export interface Document {
  readonly value: unknown;
  /** Pointers of numbers that were rounded, with the number as it was written. */
  readonly rounded: ReadonlyMap<string, string>;
}

function lineAndColumn(text: string, offset: number): string {
  const lines = text.slice(0, offset).split(/\r\n|\r|\n/);
  return `line ${lines.length}, column ${lines[lines.length - 1].length + 1}`;
}

const DUE: Readonly<Record<string, string>> = {
  InvalidSymbol: "not a JSON value",
  InvalidNumberFormat: "not a JSON number",
  PropertyNameExpected: 'a property name in quotes, or "}", is due',
  ValueExpected: "a value is due",
  ColonExpected: '":" is due',
  CommaExpected: '"," or the end of the list or object is due',
  CloseBraceExpected: '"}" is due',
  CloseBracketExpected: '"]" is due',
  EndOfFileExpected: "the end is due",
  InvalidCommentToken: "comments are no part of JSON",
  UnexpectedEndOfComment: "comments are no part of JSON",
  UnexpectedEndOfString: "the text in quotes does not end on its line",
  UnexpectedEndOfNumber: "the number is not complete",
  InvalidUnicode: "four hexadecimal digits are due after \\u",
  InvalidEscapeCharacter: "not an escape that JSON knows",
  InvalidCharacter: "a control character, which JSON wants escaped",
};

function invalid(text: string, error: ParseError): WalkError {
  const { offset, length } = error;
  const found =
    offset >= text.length ? "the text ends" : `found ${shown(text.slice(offset, offset + Math.max(1, length)))}`;
  const due = DUE[printParseErrorCode(error.error)] ?? "this is not JSON";
  return new WalkError([{ pointer: "", message: `${lineAndColumn(text, offset)}: ${found}: ${due}; accepted: JSON` }]);
}

const tooDeep = () =>
  new WalkError([{ pointer: "", message: `found more than ${DEPTH_LIMIT} levels of nesting; accepted: a walk file` }]);

/** The exact value of a JSON number, where its exponent is not absurd. */
function exactNumber(text: string): Rational | undefined {
  const [, sign, whole, part = "", exponent = "0"] = /^(-?)(\d+)(?:\.(\d+))?(?:[eE]([-+]?\d+))?$/.exec(text) ?? [];
  const power = Number(exponent) - part.length;
  if (whole === undefined || Math.abs(power) > 400 + part.length) return undefined;
  const digits = BigInt(sign + whole + part);
  return power >= 0 ? Rational.of(digits * 10n ** BigInt(power)) : Rational.of(digits, 10n ** BigInt(-power));
}

function survives(text: string, value: number): boolean {
  return Number.isSafeInteger(value) && exactNumber(text)?.equals(Rational.of(value)) === true;
}

/** @throws WalkError where the text is not JSON: line, column, what is due. */
export function documentFromText(given: string, findings: Findings): Document {
  const text = given.startsWith("\uFEFF") ? given.slice(1) : given;
  const errors: ParseError[] = [];
  let tree: Node | undefined;
  let value: unknown;
  try {
    tree = parseTree(text, errors, { disallowComments: true, allowTrailingComma: false, allowEmptyContent: false });
    if (errors.length > 0) throw invalid(text, errors[0]);
    value = JSON.parse(text);
  } catch (error) {
    if (error instanceof RangeError) throw tooDeep();
    if (!(error instanceof SyntaxError)) throw error;
    throw new WalkError([{ pointer: "", message: `${error.message}; accepted: JSON` }]);
  }
  const rounded = new Map<string, string>();
  const visit = (node: Node, pointer: string, depth: number) => {
    if (depth > DEPTH_LIMIT) throw tooDeep();
    const children = node.children ?? [];
    if (node.type === "number") {
      const written = text.slice(node.offset, node.offset + node.length);
      if (!survives(written, node.value)) rounded.set(pointer, written);
    } else if (node.type === "array") {
      children.forEach((child, i) => {
        visit(child, below(pointer, i), depth + 1);
      });
    } else if (node.type === "object") {
      const places = new Map<string, Node[]>();
      for (const property of children) {
        const [key, item] = property.children as [Node, Node];
        places.set(key.value, [...(places.get(key.value) ?? []), key]);
        visit(item, below(pointer, key.value), depth + 1);
      }
      for (const [key, nodes] of places) {
        if (nodes.length === 1) continue;
        const where = nodes.map((n) => lineAndColumn(text, n.offset)).join("; ");
        findings.add(
          below(pointer, key),
          `found the key ${shown(key)} ${nodes.length} times (${where}); accepted: each key once`,
        );
      }
    }
  };
  visit(tree as Node, "", 0);
  return { value, rounded };
}

/** A copy of the object as a JSON document; BigInts become texts of digits. */
export function documentFromObject(given: object, findings: Findings): Document {
  const rounded = new Map<string, string>();
  const copy = (value: unknown, pointer: string, depth: number): unknown => {
    if (depth > DEPTH_LIMIT) throw tooDeep();
    if (typeof value === "bigint") return value.toString();
    if (typeof value === "number" && !Number.isSafeInteger(value)) rounded.set(pointer, String(value));
    if (value === null || typeof value === "string" || typeof value === "number" || typeof value === "boolean")
      return value;
    if (Array.isArray(value)) return value.map((item, i) => copy(item, below(pointer, i), depth + 1));
    if (typeof value !== "object") {
      findings.add(pointer, `found a ${typeof value}; accepted: what JSON can hold`);
      return null;
    }
    const entries = Object.entries(value).filter(([, item]) => item !== undefined);
    return Object.fromEntries(entries.map(([key, item]) => [key, copy(item, below(pointer, key), depth + 1)]));
  };
  return { value: copy(given, "", 0), rounded };
}
