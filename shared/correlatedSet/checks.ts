/** What is wrong or odd about a correlated set, in sentences. */
import { decimalPlaces, parseDecimal } from "~shared/statement/decimal";
import type { FindingGrade } from "~shared/statement/finding";

import { LONGEST_SET_LABEL, MATRIX_KIND_WORDS, MOST_MEMBERS, type SetContent } from "./content";
import { correlations, isPositiveDefinite, matrixNumbers, smallestEigenvalue } from "./matrix";
import { isFlipped, printedSigma, whyNotMember, type SetMember } from "./members";

export interface SetFinding {
  /** Unique within one list. */
  readonly code: string;
  readonly grade: FindingGrade;
  /** Parts of the content: "label", "members", "matrixKind", "place", or "entry.2.1" (row, column from 1). */
  readonly fields: readonly string[];
  readonly message: string;
}

/** Name of an entry in findings; row and column count from 0 here. */
export function entryField(row: number, column: number): string {
  return `entry.${row + 1}.${column + 1}`;
}

/**
 * Everything to say about a set.
 *
 * @param members - The records that its member numbers name and this person may use; a number
 *   without one is said to be none of them.
 * @param citation - The paper of the set.
 */
export function setFindings(
  content: SetContent,
  members: readonly SetMember[],
  citation: string | null,
): SetFinding[] {
  const found: SetFinding[] = [];
  const error = (code: string, fields: string[], message: string): void => {
    found.push({ code, grade: "error", fields, message });
  };
  if (citation === null) error("citation", ["citation"], "Name the paper this is printed in.");
  const label = content.label?.trim() ?? "";
  if (label === "") error("label", ["label"], "Give the set a label, as a paper would name it.");
  else if (label.length > LONGEST_SET_LABEL) {
    error("label", ["label"], `The label has at most ${LONGEST_SET_LABEL} characters.`);
  }
  if ((content.place?.trim() ?? "") === "") {
    error(
      "place",
      ["place"],
      "Say where in the paper the matrix is printed: table, figure, section.",
    );
  }
  if (content.matrixKind === null) {
    error(
      "matrixKind",
      ["matrixKind"],
      "Say whether the paper prints covariances or correlations.",
    );
  }
  const known = checkMembers(content, members, citation, error);
  checkEntries(content, error);
  const wrong = found.some(({ fields }) =>
    fields.some((field) => field.startsWith("entry") || field === "matrixKind"),
  );
  if (!wrong && content.members.length > 0) {
    checkMatrix(content, error, (finding) => found.push(finding));
    found.push(...diagonalFindings(content, known), ...memberNotes(content, known));
  }
  return found;
}

type Say = (code: string, fields: string[], message: string) => void;

function checkMembers(
  content: SetContent,
  members: readonly SetMember[],
  citation: string | null,
  error: Say,
): (SetMember | null)[] {
  const { members: numbers } = content;
  if (numbers.length < 2) {
    error("tooFew", ["members"], "A set has at least two records.");
  } else if (numbers.length > MOST_MEMBERS) {
    error("tooMany", ["members"], `A set has at most ${MOST_MEMBERS} records.`);
  }
  if (new Set(numbers).size !== numbers.length) {
    error("twice", ["members"], "A record stands in the set twice.");
  }
  const byNumber = new Map(members.map((member) => [member.number, member]));
  return numbers.map((number) => {
    const member = byNumber.get(number) ?? null;
    if (member === null) {
      error(
        `unknown.${number}`,
        ["members"],
        `${number} is neither approved nor a submission of yours: it can't be part of a set yet.`,
      );
      return null;
    }
    if (member.citation !== citation) {
      error(
        `otherPaper.${number}`,
        ["members"],
        `${number} is from another paper. All records of a set are from one paper, which prints their matrix.`,
      );
    }
    const because = whyNotMember(member.fields);
    if (because !== null) error(`cannot.${number}`, ["members"], `${number} ${because}.`);
    return member;
  });
}

function checkEntries(content: SetContent, error: Say): void {
  const size = content.members.length;
  const { triangle, matrixKind } = content;
  if (triangle.length !== size || triangle.some((row, at) => row.length !== at + 1)) {
    error(
      "shape",
      ["entry"],
      `The lower triangle of ${size} records has ${size} rows of 1 to ${size} entries.`,
    );
    return;
  }
  const open: string[] = [];
  triangle.forEach((row, i) =>
    row.forEach((text, j) => {
      const field = entryField(i, j);
      const place = `Row ${i + 1}, column ${j + 1}`;
      if (text.trim() === "") {
        open.push(field);
        return;
      }
      const value = parseDecimal(text);
      if (value === null) {
        error(`number.${field}`, [field], `${place}: “${text.slice(0, 40)}” is not a number.`);
      } else if (matrixKind === "correlation" && i === j && !value.eq(1)) {
        error(`diagonal.${field}`, [field], `${place}: the diagonal of a correlation matrix is 1.`);
      } else if (matrixKind === "correlation" && value.abs().gt(1)) {
        error(`beyond.${field}`, [field], `${place}: a correlation lies between −1 and 1.`);
      } else if (matrixKind === "covariance" && i === j && value.lte(0)) {
        error(`variance.${field}`, [field], `${place}: a variance is above 0.`);
      }
    }),
  );
  if (open.length > 0) {
    error(
      "open",
      open,
      open.length === 1
        ? "One entry of the lower triangle is open."
        : `${open.length} entries of the lower triangle are open.`,
    );
  }
}

function checkMatrix(content: SetContent, error: Say, add: (finding: SetFinding) => void): void {
  const size = content.members.length;
  const printed = matrixNumbers(content.triangle, size);
  const rho = correlations(content, size);
  if (printed === null || rho === null || content.matrixKind === null) return;
  if (!isPositiveDefinite(printed)) {
    error(
      "positiveDefinite",
      ["entry"],
      `${MATRIX_KIND_WORDS[content.matrixKind]} is not positive definite: some combination of the records would have no error or an imaginary one. Look for a wrong digit or sign.`,
    );
    return;
  }
  // Rounding by half a unit shifts an eigenvalue by at most as many half units as a row has entries
  // that were rounded (Weyl, Gershgorin); the ones of a correlation matrix are exact.
  const rounded = content.matrixKind === "correlation" ? size - 1 : size;
  const slack = rounded * roundingOf(content, rho);
  if (size > 1 && smallestEigenvalue(rho) < slack) {
    add({
      code: "nearlySingular",
      grade: "note",
      fields: ["entry"],
      message:
        "Rounding of the printed digits could make this matrix singular: what it says about the best constrained combination is not to be trusted.",
    });
  }
}

/** Half a unit in the last place of the coarsest entry, in terms of correlations. */
function roundingOf(content: SetContent, rho: readonly (readonly number[])[]): number {
  let coarsest = 0;
  content.triangle.forEach((row, i) =>
    row.forEach((text, j) => {
      if (i === j) return;
      const half = 0.5 * 10 ** -decimalPlaces(text);
      const value = Math.abs(Number(parseDecimal(text) ?? 0));
      const scale =
        content.matrixKind === "correlation" || value === 0
          ? 1
          : Math.abs(rho[i]?.[j] ?? 0) / value;
      coarsest = Math.max(coarsest, half * scale);
    }),
  );
  return coarsest;
}

/** Variances that are no squares of the members' errors, within the printed digits of both. */
function diagonalFindings(
  content: SetContent,
  members: readonly (SetMember | null)[],
): SetFinding[] {
  if (content.matrixKind !== "covariance") return [];
  return members.flatMap((member, at): SetFinding[] => {
    const sigma = member && printedSigma(member.fields);
    const text = content.triangle[at]?.[at] ?? "";
    const variance = parseDecimal(text)?.toNumber() ?? null;
    if (!member || !sigma || variance === null) return [];
    const half = 0.5 * 10 ** -decimalPlaces(text);
    const [low, high] = [
      Math.max(0, sigma.sigma - sigma.slack) ** 2,
      (sigma.sigma + sigma.slack) ** 2,
    ];
    if (variance + half >= low - 1e-12 && variance - half <= high + 1e-12) return [];
    return [
      {
        code: `variance.${member.number}`,
        grade: "mustAnswer",
        fields: [entryField(at, at)],
        message: `The variance of ${member.number} is ${text}, yet its errors give ${(sigma.sigma ** 2).toPrecision(3)} (one sigma ${sigma.sigma.toPrecision(3)}, the average of minus and plus). Look whether the matrix is of another level, another scale or another statement.`,
      },
    ];
  });
}

function memberNotes(content: SetContent, members: readonly (SetMember | null)[]): SetFinding[] {
  const known = members.filter((member): member is SetMember => member !== null);
  const notes: SetFinding[] = [];
  const note = (code: string, fields: string[], message: string): void => {
    notes.push({ code, grade: "note", fields, message });
  };
  const flipped = known.filter(({ fields }) => isFlipped(fields));
  if (flipped.length > 0) {
    const numbers = flipped.map(({ number }) => number).join(", ");
    note(
      "flipped",
      ["members"],
      flipped.length === known.length
        ? "Every record is printed as an ionized or electron fraction: as used both of a pair are turned round, and the correlations stay as printed."
        : `${numbers} ${flipped.length === 1 ? "is" : "are"} printed as ionized or electron fraction: as used ${flipped.length === 1 ? "it is" : "they are"} turned round, and the correlations with the others change their sign.`,
    );
  }
  for (const { number, fields } of known) {
    if (printedSigma(fields) === null) {
      note(
        `level.${number}`,
        ["members"],
        `${number} states no level: it counts in the set once a table has decided on one.`,
      );
    }
    if (fields.scale === "log10" && isFlipped(fields)) {
      note(
        `log.${number}`,
        ["members"],
        `${number} is printed as a logarithm and used as a fraction: its correlations are those of the logarithm, which holds for small errors only.`,
      );
    }
  }
  return notes;
}
