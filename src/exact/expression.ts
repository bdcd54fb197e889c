/**
 * The expressions of the walk file: integers, terminating decimals, + - * / ^, parentheses,
 * sqrt( ), cbrt( ), pi, e. Read by recursive descent:
 *
 *   sum     = product { ("+" | "-") product }
 *   product = unary { ("*" | "/") unary }
 *   unary   = ("-" | "+") unary | power
 *   power   = primary [ "^" unary ]            so that -2^2 = -4 and 2^3^2 = 2^9
 *   primary = number | "pi" | "e" | ("sqrt" | "cbrt") "(" sum ")" | "(" sum ")"
 */
import { type Builder, POWER_LIMIT } from "./builder.js";
import { ExactFault } from "./fault.js";
import { Rational } from "./rational.js";
import type { Real } from "./real.js";

const LENGTH_LIMIT = 2000;
const DEPTH_LIMIT = 100;

interface Token {
  readonly type: "number" | "name" | "sign" | "end";
  readonly text: string;
  /** Characters before the token. */
  readonly at: number;
}

function tokens(text: string): Token[] {
  const found: Token[] = [];
  const pattern = /(\s+)|(\d+(?:\.\d+)?)|([A-Za-z]+)|([-+*/^()])/y;
  while (pattern.lastIndex < text.length) {
    const at = pattern.lastIndex;
    const match = pattern.exec(text);
    if (match === null) {
      throw new ExactFault(
        `at character ${at + 1}: ${JSON.stringify(String.fromCodePoint(text.codePointAt(at)!))} is not part of an expression`,
      );
    }
    const [, , number, name, sign] = match;
    if (number !== undefined) found.push({ type: "number", text: number, at });
    else if (name !== undefined) found.push({ type: "name", text: name, at });
    else if (sign !== undefined) found.push({ type: "sign", text: sign, at });
  }
  found.push({ type: "end", text: "", at: text.length });
  return found;
}

/** "0.125" as 1/8. */
function decimal(text: string): Rational {
  const [whole, part = ""] = text.split(".");
  return Rational.of(BigInt(whole + part), 10n ** BigInt(part.length));
}

class Parser {
  private readonly tokens: Token[];
  private next = 0;
  private depth = 0;

  constructor(
    text: string,
    private readonly builder: Builder,
  ) {
    this.tokens = tokens(text);
  }

  private get token(): Token {
    return this.tokens[this.next];
  }

  private fail(due: string): never {
    const { type, text, at } = this.token;
    const what = type === "end" ? "the text ends" : `found ${JSON.stringify(text)}`;
    throw new ExactFault(`at character ${at + 1}: ${what} where ${due} is due`);
  }

  private take(...signs: string[]): Token | undefined {
    const { token } = this;
    if (token.type !== "sign" || !signs.includes(token.text)) return undefined;
    this.next++;
    return token;
  }

  /** An operation whose fault is placed at the character of `token`. */
  private at(token: Token, operation: () => Real): Real {
    try {
      return operation();
    } catch (error) {
      if (error instanceof ExactFault && !error.message.startsWith("at character")) {
        throw new ExactFault(`at character ${token.at + 1}: ${error.message}`);
      }
      throw error;
    }
  }

  whole(): Real {
    const value = this.sum();
    if (this.token.type !== "end") this.fail("an operator or the end");
    return value;
  }

  private sum(): Real {
    let value = this.product();
    for (let sign = this.take("+", "-"); sign !== undefined; sign = this.take("+", "-")) {
      const left = value;
      const right = this.product();
      value = this.at(sign, () =>
        sign?.text === "+" ? this.builder.add(left, right) : this.builder.subtract(left, right),
      );
    }
    return value;
  }

  private product(): Real {
    let value = this.unary();
    for (let sign = this.take("*", "/"); sign !== undefined; sign = this.take("*", "/")) {
      const left = value;
      const right = this.unary();
      value = this.at(sign, () =>
        sign?.text === "*" ? this.builder.multiply(left, right) : this.builder.divide(left, right),
      );
    }
    return value;
  }

  private unary(): Real {
    if (++this.depth > DEPTH_LIMIT)
      throw new ExactFault(`at character ${this.token.at + 1}: nested more than ${DEPTH_LIMIT} deep`);
    const sign = this.take("-", "+");
    const value = sign === undefined ? this.power() : this.unary();
    this.depth--;
    return sign?.text === "-" ? this.builder.negate(value) : value;
  }

  private power(): Real {
    const base = this.primary();
    const sign = this.take("^");
    if (sign === undefined) return base;
    const from = this.token;
    const { rational } = this.builder.decide(this.unary());
    if (rational === undefined || !rational.isInteger() || rational.abs().compare(Rational.of(POWER_LIMIT)) > 0) {
      throw new ExactFault(
        `at character ${from.at + 1}: the power is not an integer from -${POWER_LIMIT} to ${POWER_LIMIT}`,
      );
    }
    return this.at(sign, () => this.builder.power(base, Number(rational.num)));
  }

  private primary(): Real {
    const { token, builder } = this;
    if (token.type === "number") {
      this.next++;
      return this.at(token, () => builder.constant(decimal(token.text)));
    }
    if (this.take("(")) return this.closed();
    if (token.type === "name" && (token.text === "pi" || token.text === "e")) {
      this.next++;
      return token.text === "pi" ? builder.pi() : builder.e();
    }
    if (token.type === "name" && (token.text === "sqrt" || token.text === "cbrt")) {
      this.next++;
      if (!this.take("(")) this.fail(`"(" after ${token.text}`);
      const inside = this.closed();
      return this.at(token, () => (token.text === "sqrt" ? builder.sqrt(inside) : builder.cbrt(inside)));
    }
    return this.fail('a number, "(", sqrt( ), cbrt( ), pi or e');
  }

  private closed(): Real {
    const value = this.sum();
    if (!this.take(")")) this.fail('an operator or ")"');
    return value;
  }
}

/** @throws ExactFault with the place and the reason where the text is not an expression. */
export function parseExpression(text: string, builder: Builder): Real {
  if (text.trim() === "") throw new ExactFault("the text is empty");
  if (text.length > LENGTH_LIMIT) throw new ExactFault(`an expression of more than ${LENGTH_LIMIT} characters`);
  return new Parser(text, builder).whole();
}
