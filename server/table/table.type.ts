import { createUnionType, Field, ID, Int, ObjectType } from "type-graphql";

import { citationType } from "~server/citation/citation.type";
import type { Citation } from "~server/citation/citation.entity";
import { Refusal } from "~server/common/outcomes";
import { ConstraintType } from "~server/constraint/constraint.type";
import { fieldsType } from "~server/constraint/fields.type";
import { EventMark, eventMark } from "~server/event/event.type";
import { formatQuotable } from "~shared/identifiers/recordNumber";

import { VisibilityEnum } from "./recipe.type";
import type { SnapshotConstraint } from "./snapshot";
import type { SavedTable, Visibility } from "./table.entity";
import type { TableVersion } from "./tableVersion.entity";

@ObjectType()
export class FittingTable {
  @Field(() => ID) slug!: string;
  @Field(() => String) name!: string;
  @Field(() => String) owner!: string;
  @Field(() => Boolean) ownedByMe!: boolean;
  @Field(() => VisibilityEnum) visibility!: Visibility;
  @Field(() => Boolean, {
    description: "Whether its owner is told when a release would change it.",
  })
  notify!: boolean;
  @Field(() => Int, { description: "The version shown." })
  version!: number;
  @Field(() => Int, {
    nullable: true,
    description: "Release it pins; null for the latest of its day.",
  })
  release!: number | null;
  @Field(() => ID, { nullable: true, description: "The table that it began as a copy of." })
  adaptedFrom!: string | null;
  @Field(() => Date, { description: "When the version shown was saved." }) createdAt!: Date;
  @Field(() => String) filter!: string;
  @Field(() => String) digest!: string;
  @Field(() => Int) rowsIn!: number;
  @Field(() => Int) rowsOut!: number;
  @Field(() => EventMark) lastEvent!: EventMark;

  // Not in the API: what its resolvers need.
  saved!: SavedTable;
  shown!: TableVersion | null;
}

export const FittingTableResult = createUnionType({
  name: "FittingTableResult",
  types: () => [FittingTable, Refusal] as const,
});

/** A record as it stood when it was saved. */
export function savedConstraint(saved: SnapshotConstraint): ConstraintType {
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
 * A saved table for one viewer, without its rows.
 *
 * @param shown - The version asked for; null for the newest, whose facts stand with the table.
 */
export function fittingTableType(
  table: SavedTable,
  shown: TableVersion | null,
  viewerId: string | null,
): FittingTable {
  const facts = shown ?? table;
  return Object.assign(new FittingTable(), {
    slug: table.slug,
    name: table.name,
    owner: table.owner.nameOnPapers,
    ownedByMe: table.ownerId === viewerId,
    visibility: table.visibility,
    notify: table.ownerId === viewerId && table.notify,
    version: facts.version,
    release: facts.releaseNumber,
    adaptedFrom: table.adaptedFrom,
    createdAt: facts.createdAt,
    filter: facts.filterWords,
    digest: facts.digest,
    rowsIn: facts.rowsIn,
    rowsOut: facts.rowsOut,
    lastEvent: eventMark({
      sequence: facts.lastEventSequence,
      digest: facts.lastEventDigest,
      at: facts.lastEventAt,
    }),
    saved: table,
    shown,
  });
}
