/** Strict checks of a document's markup, which a lenient parser would repair in silence. */

const VOID = new Set(["meta", "br", "hr", "link", "img", "input"]);

/** Every fault of nesting or quoting. */
export function faults(markup: string): string[] {
  const found: string[] = [];
  const open: string[] = [];
  const body = markup.replace(/<!DOCTYPE html>/i, "").replace(/<style>[\s\S]*?<\/style>/g, "");
  const token = /<(\/?)([a-zA-Z][a-zA-Z0-9]*)((?:\s+[a-zA-Z_:][-a-zA-Z0-9_:.]*(?:="[^"<>]*")?)*)\s*(\/?)>/g;
  let end = 0;
  for (const match of body.matchAll(token)) {
    const between = body.slice(end, match.index);
    if (/[<>]/.test(between)) found.push(`bare angle bracket in: ${between.slice(0, 60)}`);
    end = match.index + match[0].length;
    const [, closing, name = "", attributes = "", self] = match;
    const names = [...attributes.matchAll(/\s([-a-zA-Z_:]+)=/g)].map((m) => m[1]);
    if (new Set(names).size !== names.length) found.push(`an attribute twice: ${match[0].slice(0, 80)}`);
    if (closing === "/") {
      const expected = open.pop();
      if (expected !== name) found.push(`</${name}> where </${expected}> was expected`);
    } else if (self !== "/" && !VOID.has(name)) open.push(name);
  }
  if (open.length > 0) found.push(`left open: ${open.join(", ")}`);
  const stray = body.match(/&(?!(?:amp|lt|gt|quot|#39|nbsp|#160);)/g);
  if (stray !== null) found.push(`${stray.length} bare ampersands`);
  return found;
}
