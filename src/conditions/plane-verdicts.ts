/** The findings of dimension 2 in words, with the evidence that a reader checks by hand. */
import { gcdBig } from "../exact/rational.js";
import type { Move } from "../walk/walk.js";
import { fails, type GroupFinding, holds } from "./finding.js";
import { plain, plainMatrix, plainVector, trace } from "./matrix.js";
import { decidePlane, type Form, type PlaneFinding } from "./plane.js";
import { type Word, wordEvidence } from "./words.js";

function formEvidence([a, b, c]: Form): Record<string, unknown> {
  return { coefficients: plainVector([a, b, c]), of: ["x^2", "x y", "y^2"], discriminant: plain(b * b - 4n * a * c) };
}

/** The slopes y / x of the two zeros of a x^2 + b x y + c y^2, as text; c is not 0 where they are irrational. */
function slopes([a, b, c]: Form): string[] {
  const g = gcdBig(gcdBig(a, b), c) * (c < 0n ? -1n : 1n);
  const [p, q, r] = [a / g, b / g, c / g];
  const root = `sqrt(${q * q - 4n * p * r})`;
  return [`(${-q} + ${root}) / ${2n * r}`, `(${-q} - ${root}) / ${2n * r}`];
}

function names(indices: readonly number[], moves: readonly Move[]): string {
  return indices.map((i) => `"${moves[i].label}"`).join(", ");
}

function wordText(word: Word, moves: readonly Move[]): string {
  const several = word.indices.length > 1;
  return `${several ? "the product of the moves" : "the move"} ${names(word.indices, moves)}`;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

function dominantRoot(word: Word, moves: readonly Move[]) {
  const t = plain(trace(word.matrix));
  return holds(
    `${capital(wordText(word, moves))} has determinant ${word.determinant} and trace ${t}, hence two real eigenvalues of different modulus.`,
    {
      word: wordEvidence(word, moves),
      rule: word.determinant === 1 ? "determinant 1 and |trace| > 2" : "determinant -1 and trace not 0",
    },
  );
}

function verdictsOf(finding: PlaneFinding, moves: readonly Move[]): GroupFinding {
  switch (finding.type) {
    case "finite": {
      const evidence = {
        order: finding.elements.length,
        elements: finding.elements.map((word) => ({ moves: word.indices, matrix: plainMatrix(word.matrix) })),
      };
      const group = `The moves generate a finite group of order ${finding.elements.length}`;
      return {
        stronglyIrreducible: fails(`${group}, so the images of any line are finitely many lines.`, evidence),
        proximal: fails(`${group}, so every eigenvalue of every product has modulus 1.`, evidence),
        obstruction: { type: "finite group" },
        slow: true,
      };
    }
    case "rational line": {
      const evidence = { line: plainVector(finding.line), unipotent: wordEvidence(finding.word, moves) };
      const line = `Every move maps the rational line through (${finding.line.join(", ")}) to itself`;
      return {
        stronglyIrreducible: fails(`${line}.`, evidence),
        proximal: fails(`${line}, so both eigenvalues of every product are 1 or -1.`, evidence),
        obstruction: { type: "rational subspaces" },
        slow: true,
      };
    }
    case "irrational lines": {
      const swap = finding.exchanging.length > 0;
      const evidence = {
        word: wordEvidence(finding.word, moves),
        form: formEvidence(finding.form),
        slopes: slopes(finding.form),
        exchanging: finding.exchanging,
        check: "Q(v) = det(v, h v) vanishes on the eigenlines of h; Q(A v) is Q(v) or -Q(v) for every move A.",
      };
      const reason = swap
        ? `Every move keeps or exchanges the two irrational eigenlines of ${wordText(finding.word, moves)}; ${names(finding.exchanging, moves)} exchange${finding.exchanging.length === 1 ? "s" : ""} them.`
        : `Every move keeps both irrational eigenlines of ${wordText(finding.word, moves)}.`;
      return {
        stronglyIrreducible: fails(reason, evidence),
        proximal: dominantRoot(finding.word, moves),
        obstruction: { type: "irrational lines" },
        slow: false,
      };
    }
    case "strongly irreducible": {
      const mover = moves[finding.mover];
      const reason =
        `A finite union of lines kept by the moves could only be made of the eigenlines of h, ${wordText(finding.word, moves)}, ` +
        `which are the zeros of Q(v) = det(v, h v); but Q(A v) is neither Q(v) nor -Q(v) for A = "${mover.label}".`;
      return {
        stronglyIrreducible: holds(reason, {
          word: wordEvidence(finding.word, moves),
          form: formEvidence(finding.form),
          mover: { move: finding.mover, label: mover.label, matrix: plainMatrix(mover.matrix) },
          image: formEvidence(finding.image),
        }),
        proximal: dominantRoot(finding.word, moves),
        slow: false,
      };
    }
  }
}

export function planeVerdicts(moves: readonly Move[]): GroupFinding {
  return verdictsOf(decidePlane(moves), moves);
}
