import { describe, expect, it } from "vitest";
import { evidence } from "../../src/dossier/sections/evidence.js";
import { prose } from "../../src/dossier/sections/prose.js";

describe("prose", () => {
  it("sets formulas", () => {
    expect(prose("A_i A_j^-1 and A_1^T").markup).toBe(
      "A<sub>i</sub> A<sub>j</sub><sup>−1</sup> and A<sub>1</sub><sup>T</sup>",
    );
    expect(prose("<f, P^n f> - 1 >= +-2").markup).toBe("⟨f, P<sup>n</sup> f⟩ − 1 ≥ ±2");
    expect(prose("|c_(d-1)| r^{d-1}").markup).toBe("|c<sub>d-1</sub>| r<sup>d-1</sup>");
    expect(prose("ln 10 / lambda_1").markup).toBe("ln 10 / λ<sub>1</sub>");
  });
  it("leaves labels as they are, escaped", () => {
    expect(prose('the move "a_1 <b>" keeps x_n').markup).toBe("the move “a_1 &lt;b&gt;” keeps x<sub>n</sub>");
  });
  it("escapes all else", () => {
    expect(prose("<img src=x onerror=alert(1)> & x_<b>").markup).not.toMatch(/<(?!\/?su[bp]>)/);
  });
});

describe("evidence", () => {
  it("shows numbers, words, matrices and lists of words", () => {
    const found = evidence({
      fixedLine: [1, -2],
      basis: [[0], [0, 1]],
      matrix: [
        ["2", "1"],
        ["1", "1"],
      ],
      none: null,
      big: "-12/5",
    });
    const text = found?.markup ?? "";
    expect(text).toContain("<dt>fixed line</dt><dd>(1, −2)</dd>");
    expect(text).toContain("<dd>(0), (0, 1)</dd>");
    expect(text).toContain("matrix with rows 2 1; 1 1");
    expect(text).toContain("<dd>−12/5</dd>");
    expect(evidence({})).toBeUndefined();
  });
});
