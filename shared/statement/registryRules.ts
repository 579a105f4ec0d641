/** Rules that compare a record with the registry. */
import { currentTags } from "~shared/methods/vocabulary";

import { asUsed } from "./asUsed";
import type { AsUsed } from "./asUsed";
import type { ConstraintFields } from "./fields";
import { mustAnswer, note, sortFindings } from "./finding";
import type { Finding } from "./finding";
import { tagName } from "./words";

/** An approved or submitted record close to the one being checked; the record itself is left out by the caller. */
export interface Neighbour {
  /** FL-0042 */
  number: string;
  sameCitation: boolean;
  fields: ConstraintFields;
}

/** Near-duplicates, records that answer the same question, and 95 % widths that look like 68 % ones. */
export function registryFindings(
  fields: ConstraintFields,
  neighbours: readonly Neighbour[],
): Finding[] {
  const used = asUsed(fields);
  if (used === null) return [];
  const found: Finding[] = [];
  for (const neighbour of neighbours) {
    const other = asUsed(neighbour.fields);
    if (other === null || !samePlace(used, other)) continue;
    if (areAlternatives(fields, neighbour)) continue;
    if (isNearDuplicate(fields, used, neighbour, other)) {
      found.push(
        mustAnswer(
          `nearDuplicate.${neighbour.number}`,
          ["value", "z"],
          `${neighbour.number} says nearly the same${neighbour.sameCitation ? " from the same paper" : " with the same method"}. Look whether it is the same result, and say what sets this one apart.`,
        ),
      );
    } else if (neighbour.sameCitation && sharesTag(fields, neighbour.fields)) {
      found.push(
        note(
          `sameQuestion.${neighbour.number}`,
          ["alternativesGroup"],
          `${neighbour.number} of the same paper states the same quantity there. If both answer one question, put them in one alternatives group.`,
        ),
      );
    }
  }
  const wide = widthLikeOneSigma(fields, used, neighbours);
  return sortFindings(wide === null ? found : [...found, wide]);
}

/**
 * Notes about what the same person has sent and no editor has decided yet. For that person's eyes only, and
 * never kept with a submission: an editor who reads it would learn numbers of another one that is still to
 * be read blind.
 */
export function sentAlready(
  fields: ConstraintFields,
  ownSubmissions: readonly Neighbour[],
): Finding[] {
  const used = asUsed(fields);
  if (used === null) return [];
  return ownSubmissions.flatMap((own) => {
    const other = asUsed(own.fields);
    if (other === null || !samePlace(used, other) || areAlternatives(fields, own)) return [];
    if (!isNearDuplicate(fields, used, own, other)) return [];
    const words = own.sameCitation ? "from the same paper" : "with the same method";
    return [
      note(
        `sentAlready.${own.number}`,
        ["value", "z"],
        `You have sent ${own.number}, which says nearly the same ${words}. Look whether this is a second copy of it.`,
      ),
    ];
  });
}

function areAlternatives(fields: ConstraintFields, neighbour: Neighbour): boolean {
  return (
    neighbour.sameCitation &&
    fields.alternativesGroup !== null &&
    fields.alternativesGroup === neighbour.fields.alternativesGroup
  );
}

function isNearDuplicate(
  fields: ConstraintFields,
  used: AsUsed,
  neighbour: Neighbour,
  other: AsUsed,
): boolean {
  const related = neighbour.sameCitation || sharesTag(fields, neighbour.fields);
  return related && sameNumbers(used, other);
}

function sharesTag(a: ConstraintFields, b: ConstraintFields): boolean {
  const tags = currentTags(b.methodTags);
  return currentTags(a.methodTags).some((tag) => tags.includes(tag));
}

/** Redshift a statement stands at: its own, else the middle of its ends. */
function redshiftOf(used: AsUsed): number | null {
  if (used.z !== null) return used.z;
  return used.zLow !== null && used.zHigh !== null ? (used.zLow + used.zHigh) / 2 : null;
}

function close(a: number | null, b: number | null, within: number): boolean {
  if (a === null || b === null) return a === b;
  return Math.abs(a - b) <= within + 1e-12;
}

function samePlace(a: AsUsed, b: AsUsed): boolean {
  return (
    a.quantity === b.quantity &&
    (a.quantity !== "neutralFraction" || close(redshiftOf(a), redshiftOf(b), 0.05)) &&
    close(a.rangeLow, b.rangeLow, 0.05) &&
    close(a.rangeHigh, b.rangeHigh, 0.05) &&
    close(a.fraction, b.fraction, 0.005) &&
    close(a.fractionFrom, b.fractionFrom, 0.005) &&
    close(a.fractionTo, b.fractionTo, 0.005) &&
    a.durationUnit === b.durationUnit
  );
}

const STATED_USED = ["value", "plus", "minus", "limitBase", "limitSigma", "low", "high"] as const;

/** Within two per cent of each other in every number, or within 0.005 for small fractions. */
function sameNumbers(a: AsUsed, b: AsUsed): boolean {
  if (a.kind !== b.kind || a.evaluatedIn !== b.evaluatedIn) return false;
  if (a.kind === "curve" || a.kind === "qualitative") return false;
  return STATED_USED.every((name) => {
    const [left, right] = [a[name], b[name]];
    if (left === null || right === null) return left === right;
    const size = Math.max(Math.abs(Number(left)), Math.abs(Number(right)));
    const absolute = a.quantity === "neutralFraction" ? 0.005 : 0;
    return Math.abs(Number(left) - Number(right)) <= Math.max(absolute, 0.02 * size) + 1e-12;
  });
}

function halfWidth(used: AsUsed): number | null {
  if (used.kind !== "twoSided" || used.plus === null || used.minus === null) return null;
  return (Number(used.plus) + Number(used.minus)) / 2;
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  const upper = sorted[middle] ?? 0;
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? 0) + upper) / 2;
}

function widthLikeOneSigma(
  fields: ConstraintFields,
  used: AsUsed,
  neighbours: readonly Neighbour[],
): Finding | null {
  const own = halfWidth(used);
  if (own === null || used.level === null || Math.abs(used.level - 0.95) > 0.006) return null;
  for (const tag of currentTags(fields.methodTags)) {
    const compared = neighbours.flatMap((neighbour) => {
      const other = asUsed(neighbour.fields);
      const width = other && halfWidth(other);
      if (!other || width === null || other.level === null) return [];
      const fits =
        currentTags(neighbour.fields.methodTags).includes(tag) &&
        other.quantity === used.quantity &&
        other.evaluatedIn === used.evaluatedIn &&
        Math.abs(other.level - 0.68) < 0.006 &&
        (used.quantity !== "neutralFraction" || close(redshiftOf(used), redshiftOf(other), 1));
      return fits ? [{ width, number: neighbour.number }] : [];
    });
    if (compared.length < 2) continue;
    const usual = median(compared.map((entry) => entry.width));
    if (usual > 0 && Math.abs(own - usual) <= 0.3 * usual + 1e-12) {
      const numbers = compared
        .slice(0, 3)
        .map((entry) => entry.number)
        .join(", ");
      return mustAnswer(
        "widthLikeOneSigma",
        ["level", "plus", "minus"],
        `The half-width ${own.toPrecision(3)} is entered at 95 %, yet the 68 % half-widths of ${tagName(tag)} nearby have a median of ${usual.toPrecision(3)} (${numbers}). Look whether the paper's level is 68 %.`,
      );
    }
  }
  return null;
}
