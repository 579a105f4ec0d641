import type { ConstraintFields, RedshiftRole } from "~shared/statement/fields";

const RANGE_WORDS: Record<RedshiftRole, string> = {
  point: "from",
  binAverage: "bin",
  uncertain: "somewhere in",
  sampleRange: "sample",
};

/** Where a statement lies, in one line: "z = 7.2, bin 7.0 to 7.4". Empty while nothing is typed. */
export function redshiftLine(fields: ConstraintFields): string {
  switch (fields.quantity) {
    case "opticalDepthRange":
      return fields.rangeLow || fields.rangeHigh
        ? `from z = ${fields.rangeLow ?? "?"} to ${fields.rangeHigh ?? "?"}`
        : "";
    case "duration":
      return fields.fractionFrom || fields.fractionTo
        ? `from fraction ${fields.fractionFrom ?? "?"} to ${fields.fractionTo ?? "?"}`
        : "";
    case "redshiftAtFraction":
      return fields.fraction ? `at the fraction ${fields.fraction}` : "";
    case "opticalDepth":
      return "";
    default: {
      const parts: string[] = [];
      if (fields.z) parts.push(`z = ${fields.z}`);
      if (fields.zLow || fields.zHigh) {
        const word = fields.zRole ? RANGE_WORDS[fields.zRole] : "from";
        parts.push(`${word} ${fields.zLow ?? "?"} to ${fields.zHigh ?? "?"}`);
      }
      return parts.join(", ");
    }
  }
}
