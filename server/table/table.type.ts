import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { citationType } from "~server/citation/citation.type";
import type { Citation } from "~server/citation/citation.entity";
import { Refusal } from "~server/common/outcomes";
import { ConstraintFilterInput, ConstraintType } from "~server/constraint/constraint.type";
import { fieldsType } from "~server/constraint/fields.type";
import { EventMark, eventMark } from "~server/event/event.type";
import { formatQuotable } from "~shared/identifiers/recordNumber";

import type { SnapshotConstraint } from "./snapshot";
import type { SavedTable } from "./table.entity";

@ObjectType()
export class TableRow {
  @Field(() => String) number!: string;
  @Field(() => Boolean) included!: boolean;
  @Field(() => String, { nullable: true }) reason!: string | null;
  @Field(() => Boolean) proposed!: boolean;
}

@ObjectType()
export class FittingTable {
  @Field(() => ID) slug!: string;
  @Field(() => String) name!: string;
  @Field(() => String) owner!: string;
  @Field(() => Boolean) ownedByMe!: boolean;
  @Field(() => Date) createdAt!: Date;
  @Field(() => String) filter!: string;
  @Field(() => String) digest!: string;
  @Field(() => Int) rowsIn!: number;
  @Field(() => Int) rowsOut!: number;
  @Field(() => EventMark) lastEvent!: EventMark;
  @Field(() => [TableRow]) rows!: TableRow[];
  @Field(() => [ConstraintType], {
    description: "The saved constraints, as they stood when the table was saved.",
  })
  constraints!: ConstraintType[];
}

@InputType()
export class TableRowInput {
  @Field(() => String) number!: string;
  @Field(() => Boolean) included!: boolean;
  @Field(() => String, { nullable: true }) reason?: string | null;
}

@InputType()
export class SaveTableInput {
  @Field(() => String) name!: string;
  @Field(() => ConstraintFilterInput) filter!: ConstraintFilterInput;
  @Field(() => [TableRowInput]) rows!: TableRowInput[];
}

export const FittingTableResult = createUnionType({
  name: "FittingTableResult",
  types: () => [FittingTable, Refusal] as const,
});

function savedConstraint(saved: SnapshotConstraint): ConstraintType {
  return Object.assign(new ConstraintType(), {
    number: saved.number,
    ordinal: saved.ordinal,
    quotable: formatQuotable(saved.id, saved.ordinal),
    state: saved.state,
    fields: fieldsType(saved.fields),
    citation: citationType(saved.citation as Citation),
    approvedAt: new Date(saved.approvedAt),
    constraintId: saved.id,
    submittedById: null,
    readById: null,
    names: { submittedBy: saved.submittedBy, readBy: saved.readBy },
  });
}

/**
 * A saved table for one viewer.
 *
 * @param readBlind - Records that the viewer is reading blind: their content and the reasons
 *   given for them are left out here until the reading is stored.
 */
export function fittingTableType(
  table: SavedTable,
  viewerId: string | null,
  readBlind: ReadonlySet<number>,
): FittingTable {
  const { rows, constraints, filterWords } = table.snapshot;
  const hidden = new Set(
    constraints.filter(({ id }) => readBlind.has(id)).map(({ number }) => number),
  );
  return Object.assign(new FittingTable(), {
    slug: table.slug,
    name: table.name,
    owner: table.owner.nameOnPapers,
    ownedByMe: table.ownerId === viewerId,
    createdAt: table.createdAt,
    filter: filterWords,
    digest: table.digest,
    rowsIn: rows.filter((row) => row.included).length,
    rowsOut: rows.filter((row) => !row.included).length,
    lastEvent: eventMark({
      sequence: table.lastEventSequence,
      digest: table.lastEventDigest,
      at: table.lastEventAt,
    }),
    rows: rows.map((row) =>
      Object.assign(new TableRow(), row, hidden.has(row.number) ? { reason: null } : {}),
    ),
    constraints: constraints.filter(({ number }) => !hidden.has(number)).map(savedConstraint),
  });
}
