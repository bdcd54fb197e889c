/** The one JSON document of `--json`. */

/** JSON text, indented by two, ending in a newline. BigInts become integers where a reader keeps them exact, else strings; what is not finite becomes null. */
export function jsonText(result: object): string {
  const replace = (_: string, value: unknown): unknown => {
    if (typeof value === "bigint") {
      const x = Number(value);
      return Number.isSafeInteger(x) ? x : value.toString();
    }
    if (typeof value === "number") return Number.isFinite(value) ? value + 0 : null;
    if (ArrayBuffer.isView(value)) return Array.from(value as unknown as ArrayLike<unknown>);
    return value;
  };
  return `${JSON.stringify(result, replace, 2)}\n`;
}
