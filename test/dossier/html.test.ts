import { describe, expect, it } from "vitest";
import { escapeText, html, joined } from "../../src/dossier/html.js";

describe("html", () => {
  it("escapes what is put into text and attributes", () => {
    const hostile = `</p><script>alert("x")</script>&amp;'`;
    expect(html`<p title="${hostile}">${hostile}</p>`.markup).toBe(
      `<p title="${escapeText(hostile)}">${escapeText(hostile)}</p>`,
    );
    expect(escapeText(hostile)).not.toMatch(/[<>"']/);
  });
  it("keeps markup made by itself, one level of escaping only", () => {
    expect(html`<p>${html`<b>${"<"}</b>`}</p>`.markup).toBe("<p><b>&lt;</b></p>");
  });
  it("writes nothing for undefined and false, and lists one after the other", () => {
    expect(html`a${undefined}b${false}c${[1, "<", html`<i>2</i>`]}`.markup).toBe("abc1&lt;<i>2</i>");
    expect(joined(["a", "&"], html`<br>`).markup).toBe("a<br>&amp;");
  });
  it("replaces control characters and those that turn the direction of text", () => {
    expect(escapeText("a\u0000b\u202ec\td\n")).toBe("a\ufffdb\ufffdc\td\n");
  });
});
