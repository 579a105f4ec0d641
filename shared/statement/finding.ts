/** What the rules say: graded, coded, tied to fields. */
import type { FieldName } from "./fields";

/** An error can't be submitted; what must be answered goes to the editor with the answer; a note is read. */
export const FINDING_GRADES = ["error", "mustAnswer", "note"] as const;
export type FindingGrade = (typeof FINDING_GRADES)[number];

export interface Finding {
  /** Stable word; unique within one list, with the field behind a point where a rule can strike several. */
  code: string;
  grade: FindingGrade;
  fields: FieldName[];
  message: string;
}

/** Errors first, then what must be answered, then notes; one finding per code. */
export function sortFindings(findings: readonly Finding[]): Finding[] {
  const seen = new Set<string>();
  const unique = findings.map((finding) => {
    let code = finding.code;
    for (let n = 2; seen.has(code); n++) code = `${finding.code}.${n}`;
    seen.add(code);
    return { ...finding, code };
  });
  return FINDING_GRADES.flatMap((grade) => unique.filter((finding) => finding.grade === grade));
}

/** Whether any finding refuses the record. */
export function hasErrors(findings: readonly Finding[]): boolean {
  return findings.some((finding) => finding.grade === "error");
}

export function error(code: string, fields: FieldName[], message: string): Finding {
  return { code, grade: "error", fields, message };
}

export function mustAnswer(code: string, fields: FieldName[], message: string): Finding {
  return { code, grade: "mustAnswer", fields, message };
}

export function note(code: string, fields: FieldName[], message: string): Finding {
  return { code, grade: "note", fields, message };
}
