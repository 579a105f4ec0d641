import type { EntityManager } from "typeorm";

import { CorrelatedSet } from "~server/correlatedSet/correlatedSet.entity";
import { contentOfSet } from "~server/correlatedSet/store";
import { keptMethods } from "~server/method/vocabulary";
import { keptData } from "~server/namedData/register";
import { correlations, usedCorrelations } from "~shared/correlatedSet/matrix";
import { conditionChains, conditionsIn } from "~shared/dependence/conditions";
import { DataRegister, overlapsAmong, type NamedThing } from "~shared/dependence/sharedData";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { formatSetNumber } from "~shared/identifiers/setNumber";
import { START_VOCABULARY } from "~shared/methods/startVocabulary";
import { withVocabulary, type MethodTag } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import { emptyFields } from "~shared/statement/fields";
import type { ConditionPath, TableSet, TableSurroundings } from "~shared/table/decision";
import { atSeparateRedshifts } from "~shared/table/separateRedshifts";

import type { SnapshotConstraint } from "./snapshot";

/** What a registry knows of its records beside their own content, as plain data. */
export interface KeptSurroundings {
  readonly things: readonly NamedThing[];
  readonly sets: readonly KeptSet[];
  /** Conditions of every record, by number: kinds of data and record numbers. */
  readonly conditions: Readonly<Record<string, readonly string[]>>;
  /** The method vocabulary; missing in releases older than it. */
  readonly methods?: readonly MethodTag[];
}

/** An approved set as printed. */
export interface KeptSet {
  readonly id: string;
  readonly label: string;
  readonly members: readonly string[];
  /** Correlations as printed, [n, n]. */
  readonly rho: readonly (readonly number[])[];
}

/** Surroundings as they stand in this transaction. */
export async function presentSurroundings(manager: EntityManager): Promise<KeptSurroundings> {
  const [{ register }, sets, conditions, rows] = [
    await keptData(manager),
    await presentSets(manager),
    await presentConditions(manager),
    await keptMethods(manager),
  ];
  const methods = rows.map(({ position: _place, version: _version, ...method }) => method);
  return { things: register.things, sets, conditions, methods };
}

/**
 * Does something in the words that the registry had for methods then: what a release says of a record, and
 * how a recipe over it is followed, doesn't change with the vocabulary.
 *
 * @param work - Must not wait for anything.
 */
export function inWordsOf<T>({ methods }: Pick<KeptSurroundings, "methods">, work: () => T): T {
  return withVocabulary(methods ?? START_VOCABULARY, work);
}

async function presentSets(manager: EntityManager): Promise<KeptSet[]> {
  const sets = await manager.find(CorrelatedSet, {
    where: { state: "approved" },
    order: { id: "ASC" },
  });
  return sets.flatMap((set): KeptSet[] => {
    const rho = correlations(contentOfSet(set), set.members.length);
    const id = formatSetNumber(set.id);
    return rho === null ? [] : [{ id, label: set.label ?? id, members: set.members, rho }];
  });
}

async function presentConditions(manager: EntityManager): Promise<Record<string, string[]>> {
  // The driver reads JSON columns by itself, where the server says that one is JSON.
  const rows: { id: number; words: string | string[] }[] = await manager.query(
    `SELECT record.id AS id, JSON_EXTRACT(revision.fields, '$.conditionedOn') AS words
       FROM constraint_record record
       JOIN revision ON revision.id = record.approvedRevisionId
      WHERE record.state <> 'withdrawn' AND JSON_LENGTH(revision.fields, '$.conditionedOn') > 0
      ORDER BY record.id`,
  );
  return Object.fromEntries(
    rows.map(({ id, words }) => [
      formatRecordNumber(Number(id)),
      conditionsIn(typeof words === "string" ? (JSON.parse(words) as string[]) : words),
    ]),
  );
}

/** What surroundings say about these records. */
export function surroundingsOf(
  kept: KeptSurroundings,
  records: readonly SnapshotConstraint[],
): TableSurroundings {
  const byNumber = new Map(records.map((record) => [record.number, record]));
  return {
    overlaps: overlapsAmong(records, new DataRegister(kept.things)).filter(
      ({ a, b }) => !areBinsOfOnePaper(byNumber.get(a), byNumber.get(b)),
    ),
    conditions: new Map(
      records.map(({ number }): [string, ConditionPath[]] => [
        number,
        conditionChains(number, (other) => kept.conditions[other]),
      ]),
    ),
    sets: kept.sets.flatMap((set) => setAmong(set, byNumber)),
  };
}

function areBinsOfOnePaper(
  a: SnapshotConstraint | undefined,
  b: SnapshotConstraint | undefined,
): boolean {
  return (
    a !== undefined &&
    b !== undefined &&
    a.citation.id === b.citation.id &&
    atSeparateRedshifts(asUsed(a.fields), asUsed(b.fields))
  );
}

function setAmong(
  { id, label, members, rho }: KeptSet,
  byNumber: ReadonlyMap<string, SnapshotConstraint>,
): TableSet[] {
  if (!members.some((number) => byNumber.has(number))) return [];
  // How an absent member is turned does not matter: its row and column are dropped.
  const turned = members.map((number) => byNumber.get(number) ?? { fields: emptyFields() });
  return [{ id, label, members, rho: usedCorrelations(rho, turned) }];
}
