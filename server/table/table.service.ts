import { In, IsNull, type EntityManager } from "typeorm";

import { User } from "~server/account/user.entity";
import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import {
  findApproved,
  MOST_ROWS,
  type ApprovedRow,
  type Asking,
} from "~server/constraint/constraint.query";
import { isDemonstration } from "~server/database/settings";
import { REGISTRY } from "~server/download/header";
import { change, type Acting } from "~server/event/acting";
import { lastEvent } from "~server/event/eventLog";
import { setNumbersReadBlind } from "~server/correlatedSet/readBlind";
import { recordsReadBlind } from "~server/review/blindness";
import { canonicalFilter } from "~shared/filter/address";
import { filterWords } from "~shared/filter/describe";
import type { ConstraintFilter } from "~shared/filter/filter";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { proposeRows } from "~shared/table/proposeRows";

import { newSlug } from "./slug";
import {
  snapshotConstraint,
  type SnapshotConstraint,
  type SnapshotRow,
  type TableSnapshot,
} from "./snapshot";
import { SavedTable } from "./table.entity";
import { findVersion } from "./table.view";
import { writeFiles } from "./tableFiles";
import { TableVersionRow, type TableVersion } from "./tableVersion.entity";

export interface TableInput {
  name: string;
  filter: ConstraintFilter;
  rows: readonly { number: string; included: boolean; reason?: string | null }[];
}

const LONGEST_NAME = 120;
const LONGEST_REASON = 500;
const MOST_TABLES = 500;

/**
 * Saves a table with all it will ever hand out: the approved revisions of its rows as they stand
 * now, their citations, what is in and out and why, and its files.
 *
 * The digest is SHA-256 over the RFC 8785 form of `content` in its JSON file. That holds no clock,
 * name or owner: the same choices over the same revisions have the same digest.
 */
export async function saveTable(who: Acting, input: TableInput): Promise<SavedTable | Refusal> {
  const name = input.name.replace(/\s+/g, " ").trim();
  if (name === "" || name.length > LONGEST_NAME) {
    return refuse("name", `Give the table a name of 1 to ${LONGEST_NAME} characters.`, "name");
  }
  const wrong = refuseRows(input.rows);
  if (wrong) return wrong;

  return change<SavedTable | Refusal>(who, async (here) => {
    const { manager } = here;
    const own = await manager.countBy(SavedTable, { ownerId: who.viewer.id, deletedAt: IsNull() });
    if (own >= MOST_TABLES) {
      return refuse("tooMany", `You have ${own} tables. Delete one first.`);
    }
    // Read through the transaction, so that rows and last event belong together.
    const filter = canonicalFilter(input.filter);
    const found = await findApproved(
      { database: { manager }, viewer: who.viewer },
      filter,
      "redshift",
    );
    const stale = refuseStale(found, input.rows);
    if (stale) return stale;
    const rows = chosenRows(found, input.rows);
    const wrongChoice = refuseQualitative(found, rows) ?? refuseWithoutReason(rows);
    if (wrongChoice) return wrongChoice;
    const last = await lastEvent(manager);
    if (!last) return refuse("empty", "There is nothing in the registry yet.");

    const slug = newSlug();
    const words = filterWords(filter);
    const constraints = await snapshotConstraints(manager, found);
    const { digest, files } = writeFiles({
      registry: REGISTRY,
      demonstration: await isDemonstration(manager),
      lastEvent: { ...last, at: last.at.toISOString() },
      filter: words,
      filterRecipe: filter,
      licence: who.licence,
      name,
      address: `${who.publicUrl}/tables/${slug}`,
      rows,
      constraints,
    });
    const snapshot: TableSnapshot = {
      format: 1,
      filter,
      filterWords: words,
      rows,
      constraints,
      files,
    };
    await manager.insert(SavedTable, {
      slug,
      name,
      ownerId: who.viewer.id,
      createdAt: who.now,
      deletedAt: null,
      digest,
      lastEventSequence: last.sequence,
      lastEventDigest: last.digest,
      lastEventAt: last.at,
      rowsIn: rows.filter((row) => row.included).length,
      rowsOut: rows.filter((row) => !row.included).length,
      filterWords: words.slice(0, 2000),
      snapshot,
    } as never);
    await here.event({
      kind: "table.saved",
      subject: `table:${slug}`,
      detail: { digest, rowsIn: rows.filter((row) => row.included).length },
    });
    return manager.findOneOrFail(SavedTable, { where: { slug }, relations: { owner: true } });
  });
}

/** Every row of the filter is in or out, and no other is named: else the person saw another list. */
function refuseStale(found: readonly ApprovedRow[], rows: TableInput["rows"]): Refusal | null {
  const given = new Map(rows.map((row) => [parseRecordNumber(row.number) ?? 0, row] as const));
  const unnamed = found.find((row) => !given.has(row.constraint.id));
  if (unnamed) {
    return refuse(
      "stale",
      `${formatRecordNumber(unnamed.constraint.id)} matches the filter too and is neither in nor out. Look at the rows again.`,
    );
  }
  const foundIds = new Set(found.map((row) => row.constraint.id));
  const strange = [...given.keys()].find((id) => !foundIds.has(id));
  if (strange === undefined) return null;
  return refuse(
    "stale",
    `${given.get(strange)?.number ?? "A row"} doesn't match the filter any more. Look at the rows again.`,
  );
}

/** Each row as a person chose it, beside what the program proposes. A reason for what needs none is not kept. */
function chosenRows(found: readonly ApprovedRow[], rows: TableInput["rows"]): SnapshotRow[] {
  const given = new Map(rows.map((row) => [parseRecordNumber(row.number), row] as const));
  const proposals = proposeRows(
    found.map(({ constraint, revision, citation }) => ({
      number: formatRecordNumber(constraint.id),
      fields: revision.fields,
      citation: citation.id,
      year: citation.year,
    })),
  );
  return proposals.map((proposal, index): SnapshotRow => {
    const { number } = proposal;
    const choice = given.get(found[index]?.constraint.id ?? 0);
    const isIn = choice?.included ?? false;
    const needsReason = !isIn || !proposal.included;
    const reason = needsReason ? (choice?.reason?.trim() ?? "") : null;
    return {
      number,
      included: isIn,
      reason,
      proposed: proposal.included === isIn && (isIn || proposal.reason === reason),
    };
  });
}

function refuseQualitative(
  found: readonly ApprovedRow[],
  rows: readonly SnapshotRow[],
): Refusal | null {
  const taken = rows.find(
    (row, index) => row.included && found[index]?.revision.fields.kind === "qualitative",
  );
  if (!taken) return null;
  return refuse("qualitative", `${taken.number} is qualitative: shown, never fitted.`, "rows");
}

function refuseWithoutReason(rows: readonly SnapshotRow[]): Refusal | null {
  const bare = rows.find((row) => row.reason === "");
  if (!bare) return null;
  return refuse(
    "reason",
    bare.included
      ? `${bare.number} is proposed to be left out: say why it is in all the same.`
      : `Say why ${bare.number} is left out.`,
    "rows",
  );
}

async function snapshotConstraints(
  manager: EntityManager,
  found: readonly ApprovedRow[],
): Promise<SnapshotConstraint[]> {
  const people = await manager.find(User, {
    select: { id: true, nameOnPapers: true },
    where: {
      id: In(
        found.flatMap(({ constraint, revision }) => [
          constraint.ownerId,
          ...(revision.decidedById === null ? [] : [revision.decidedById]),
        ]),
      ),
    },
  });
  const names = new Map(people.map((person) => [person.id, person.nameOnPapers]));
  return found.map((row) =>
    snapshotConstraint(row, {
      submittedBy: names.get(row.constraint.ownerId) ?? "a former member",
      readBy: names.get(row.revision.decidedById ?? "") ?? "a former member",
    }),
  );
}

function refuseRows(rows: TableInput["rows"]): Refusal | null {
  if (rows.length > MOST_ROWS) {
    return refuse("tooMany", `A table has at most ${MOST_ROWS} rows. Narrow the filter.`, "rows");
  }
  const numbers = rows.map((row) => parseRecordNumber(row.number));
  const bad = numbers.indexOf(null);
  if (bad >= 0) {
    return refuse("rows", `“${rows[bad]?.number.slice(0, 40)}” is no record number.`, "rows");
  }
  if (new Set(numbers).size !== numbers.length) {
    return refuse("rows", "A record stands in the rows twice.", "rows");
  }
  if (!rows.some((row) => row.included)) {
    return refuse("rows", "Take at least one row in.", "rows");
  }
  for (const row of rows) {
    const reason = row.reason?.trim() ?? "";
    if (reason.length > LONGEST_REASON) {
      return refuse(
        "reason",
        `The reason for ${row.number} has at most ${LONGEST_REASON} characters.`,
        "rows",
      );
    }
  }
  return null;
}

/** Public tables and this person's own, newest first. */
export async function findTables(ctx: Asking): Promise<SavedTable[]> {
  return ctx.database.manager
    .createQueryBuilder(SavedTable, "saved")
    .innerJoinAndSelect("saved.owner", "owner")
    .select([...LISTED.map((column) => `saved.${column}`), "owner.id", "owner.nameOnPapers"])
    .where("saved.deletedAt IS NULL AND (saved.visibility = 'public' OR saved.ownerId = :own)", {
      own: ctx.viewer?.id ?? "",
    })
    .orderBy("saved.createdAt", "DESC")
    .addOrderBy("saved.slug", "ASC")
    .getMany();
}

/** All columns but the content of old tables. */
const LISTED = [
  "slug",
  "name",
  "ownerId",
  "createdAt",
  "deletedAt",
  "digest",
  "lastEventSequence",
  "lastEventDigest",
  "lastEventAt",
  "visibility",
  "version",
  "adaptedFrom",
  "notify",
  "toldOfRelease",
  "rowsIn",
  "rowsOut",
  "filterWords",
  "releaseNumber",
] as const;

export type TableLookup =
  | { found: "table"; table: SavedTable; version: TableVersion | null }
  /** Never existed, or somebody else's private one. */
  | { found: "nothing" }
  /** Its owner deleted it: the address is not given again. */
  | { found: "deleted" }
  /** It holds a record that this viewer is reading blind: files open after the reading. */
  | { found: "blind"; numbers: string[] };

/**
 * A saved table for a download. A file is handed out whole or not at all, since its bytes never
 * change: while the viewer reads one of its records blind, not at all.
 *
 * @param version - Null for the newest.
 */
export async function loadTableFile(
  ctx: Asking,
  slug: string,
  version: number | null = null,
): Promise<TableLookup> {
  const { manager } = ctx.database;
  const table = await manager.findOne(SavedTable, { where: { slug }, relations: { owner: true } });
  if (!table || (table.visibility === "private" && table.ownerId !== ctx.viewer?.id)) {
    return { found: "nothing" };
  }
  if (table.deletedAt) return { found: "deleted" };
  const shown = await findVersion(manager, table, version);
  if (version !== null && !shown) return { found: "nothing" };
  const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
  const sets = await setNumbersReadBlind(manager, ctx.viewer, new Date());
  const numbers = [
    ...(blind.size === 0 ? [] : await heldNumbers(manager, table, shown, blind)),
    ...(shown?.sets ?? []).map(({ id }) => id).filter((id) => sets.has(id)),
  ];
  return numbers.length > 0
    ? { found: "blind", numbers }
    : { found: "table", table, version: shown };
}

async function heldNumbers(
  manager: EntityManager,
  table: SavedTable,
  shown: TableVersion | null,
  blind: ReadonlySet<number>,
): Promise<string[]> {
  if (!shown) {
    return (table.snapshot?.constraints ?? [])
      .filter((constraint) => blind.has(constraint.id))
      .map((constraint) => constraint.number);
  }
  const held = await manager.find(TableVersionRow, {
    select: { slug: true, version: true, position: true, constraintId: true },
    where: { slug: shown.slug, version: shown.version, constraintId: In([...blind]) },
    order: { constraintId: "ASC" },
  });
  return held.map((row) => formatRecordNumber(row.constraintId));
}

/** Takes a table of one's own from the public; its address answers that it is gone. */
export async function deleteTable(who: Acting, slug: string): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const result = await here.manager.update(
      SavedTable,
      { slug, ownerId: who.viewer.id, deletedAt: IsNull() },
      { deletedAt: who.now },
    );
    if (result.affected !== 1) {
      return refuse("notFound", "There is no such table among yours.");
    }
    await here.event({ kind: "table.deleted", subject: `table:${slug}` });
    return done("The table is deleted.");
  });
}
