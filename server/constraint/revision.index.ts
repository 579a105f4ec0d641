import type { EntityManager } from "typeorm";

import type { Citation } from "~server/citation/citation.entity";
import { digestOf } from "~server/event/eventLog";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { methodsOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { comparableDataName } from "~shared/dependence/dataName";

import { RevisionData, type Revision } from "./revision.entity";

type IndexColumns = Pick<
  Revision,
  | "quantity"
  | "kind"
  | "weighting"
  | "versionRead"
  | "zUsed"
  | "year"
  | "families"
  | "tags"
  | "alternativesKey"
  | "searchText"
>;

function wordList(words: Iterable<string>): string {
  return `,${[...new Set(words)].sort().join(",")},`;
}

/** Columns by which records are found, computed from what the revision says. */
export function indexColumns(
  number: number,
  fields: ConstraintFields,
  citation: Citation | null,
): IndexColumns {
  const used = asUsed(fields);
  return {
    quantity: fields.quantity,
    kind: fields.kind,
    weighting: fields.weighting,
    versionRead: fields.versionRead,
    zUsed: representativeRedshift(used),
    year: citation?.year ?? null,
    ...methodColumns(fields.methodTags),
    alternativesKey: alternativesKey(fields, citation?.id ?? null),
    searchText: [
      formatRecordNumber(number),
      citation?.key,
      citation?.title,
      ...(citation?.authors ?? []),
      citation?.year,
      fields.printedText,
      ...fields.dataUsed,
    ]
      .filter((part) => part !== null && part !== undefined && part !== "")
      .join("\n"),
  };
}

/** Columns that follow from the method vocabulary, by the tags in use. */
export function methodColumns(methodTags: readonly string[]): Pick<Revision, "families" | "tags"> {
  const known = methodsOf(methodTags);
  return {
    families: wordList(known.map(({ family }) => family)),
    tags: wordList(known.map(({ tag }) => tag)),
  };
}

function representativeRedshift(used: ReturnType<typeof asUsed>): number | null {
  if (!used) return null;
  if (used.z !== null) return used.z;
  if (used.zLow === null || used.zHigh === null) return null;
  // The middle of 5.42 and 5.64 is 5.53, also to a filter that ends there.
  return Number(((used.zLow + used.zHigh) / 2).toFixed(9));
}

/** Alternatives are several answers of one paper: the label counts within its citation. */
function alternativesKey(fields: ConstraintFields, citationId: string | null): string | null {
  const label = fields.alternativesGroup?.trim().toLowerCase();
  if (!label || citationId === null) return null;
  return `${citationId}:${digestOf(label).slice(0, 32)}`;
}

/** Rewrites the rows of named data of a revision. */
export async function writeDataNames(
  manager: EntityManager,
  revisionId: string,
  fields: ConstraintFields,
): Promise<void> {
  await manager.delete(RevisionData, { revisionId });
  const named = new Map(fields.dataUsed.map((name) => [comparableDataName(name), name] as const));
  named.delete("");
  for (const [comparable, name] of named) {
    await manager.insert(RevisionData, { revisionId, comparable: comparable.slice(0, 200), name });
  }
}
