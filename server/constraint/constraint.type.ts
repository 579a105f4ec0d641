import { Field, Float, ID, InputType, Int, ObjectType } from "type-graphql";

import { CitationType, citationType } from "~server/citation/citation.type";
import * as enums from "~server/common/enums";
import { EventMark } from "~server/event/event.type";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { MethodFamily } from "~shared/methods/vocabulary";
import { diffFields } from "~shared/review/reading";
import type { RecordState, RevisionState } from "~shared/review/states";
import type {
  ConstraintFields,
  FieldName,
  Quantity,
  StatementKind,
  VersionRead,
  Weighting,
} from "~shared/statement/fields";
import { fieldText } from "~shared/statement/words";

import type { ApprovedRow } from "./constraint.query";
import { ConstraintFieldsType, fieldsType } from "./fields.type";
import type { Revision } from "./revision.entity";

@ObjectType()
export class FieldChange {
  @Field(() => String) field!: string;
  @Field(() => String, { nullable: true }) before!: string | null;
  @Field(() => String, { nullable: true }) after!: string | null;
}

@ObjectType()
export class PublicRevision {
  @Field(() => Int) ordinal!: number;
  @Field(() => enums.RevisionStateEnum) state!: RevisionState;
  @Field(() => Date) at!: Date;
  @Field(() => [FieldChange]) changes!: FieldChange[];

  // Not in the API: credits are made of them (server/credit).
  enteredById!: string | null;
  readById!: string | null;
}

@ObjectType()
export class RecordLink {
  @Field(() => String) number!: string;
  @Field(() => String) shortName!: string;
  @Field(() => String) via!: string;
  @Field(() => Boolean, {
    nullable: true,
    description: "Whether the authors prefer this one of several alternatives; null elsewhere.",
  })
  preferred!: boolean | null;
}

@ObjectType("Constraint", {
  description: "A constraint as the public sees it: its last approved revision.",
})
export class ConstraintType {
  @Field(() => String, { description: "FL-0042" }) number!: string;
  @Field(() => Int) ordinal!: number;
  @Field(() => String, { description: "FL-0042.3" }) quotable!: string;
  @Field(() => enums.RecordStateEnum) state!: RecordState;
  @Field(() => ConstraintFieldsType) fields!: ConstraintFieldsType;
  @Field(() => CitationType) citation!: CitationType;
  @Field(() => Date) approvedAt!: Date;

  // Not in the API: what its resolvers need.
  constraintId!: number;
  submittedById!: string | null;
  readById!: string | null;
  /** Names as they stood when a table was saved; they go before those of today. */
  names?: { submittedBy: string; readBy: string };
}

@ObjectType()
export class ConstraintPage {
  @Field(() => [ConstraintType]) constraints!: ConstraintType[];
  @Field(() => Int) total!: number;
  @Field(() => Int) registryTotal!: number;
  @Field(() => EventMark, { nullable: true }) lastEvent!: EventMark | null;
}

@InputType("ConstraintFilter")
export class ConstraintFilterInput {
  @Field(() => String, {
    nullable: true,
    description: "Free text over authors, title, key, number, printed text, data used.",
  })
  text?: string | null;
  @Field(() => [enums.MethodFamilyEnum], { nullable: true }) families?: MethodFamily[] | null;
  @Field(() => [String], { nullable: true }) tags?: string[] | null;
  @Field(() => [enums.QuantityEnum], { nullable: true }) quantities?: Quantity[] | null;
  @Field(() => [enums.StatementKindEnum], { nullable: true }) kinds?: StatementKind[] | null;
  @Field(() => [enums.WeightingEnum], { nullable: true }) weightings?: Weighting[] | null;
  @Field(() => [enums.VersionReadEnum], { nullable: true }) versions?: VersionRead[] | null;
  @Field(() => [enums.RecordStateEnum], {
    nullable: true,
    description: "Current and superseded records unless said.",
  })
  states?: RecordState[] | null;
  @Field(() => Float, { nullable: true }) zFrom?: number | null;
  @Field(() => Float, { nullable: true }) zTo?: number | null;
  @Field(() => Int, { nullable: true }) yearFrom?: number | null;
  @Field(() => Int, { nullable: true }) yearTo?: number | null;
}

@ObjectType("Finding")
export class FindingType {
  @Field(() => String) code!: string;
  @Field(() => enums.FindingGradeEnum) grade!: "error" | "mustAnswer" | "note";
  @Field(() => [String]) fields!: string[];
  @Field(() => String) message!: string;
}

@ObjectType()
export class FindingAnswer {
  @Field(() => String) code!: string;
  @Field(() => String) answer!: string;
  @Field(() => Boolean) accepted!: boolean;
}

@ObjectType({ description: "What was written below a comment after its first answer." })
export class ThreadMessage {
  @Field(() => ID) id!: string;
  @Field(() => String) by!: string;
  @Field(() => Boolean, { description: "Whether the viewer wrote it." }) mine!: boolean;
  @Field(() => String) text!: string;
  @Field(() => Date) at!: Date;
}

@ObjectType()
export class FieldComment {
  @Field(() => ID) id!: string;
  @Field(() => String) field!: string;
  @Field(() => String) text!: string;
  @Field(() => String) by!: string;
  @Field(() => Date) at!: Date;
  @Field(() => String, { nullable: true }) answer!: string | null;
  @Field(() => [ThreadMessage], { description: "What followed the answer, oldest first." })
  messages!: ThreadMessage[];
}

/** An approved record as the API shows it. */
export function constraintType({ constraint, revision, citation }: ApprovedRow): ConstraintType {
  return Object.assign(new ConstraintType(), {
    number: formatRecordNumber(constraint.id),
    ordinal: revision.ordinal,
    quotable: formatQuotable(constraint.id, revision.ordinal),
    state: constraint.state,
    fields: fieldsType(revision.fields),
    citation: citationType(citation),
    approvedAt: revision.decidedAt ?? revision.updatedAt,
    constraintId: constraint.id,
    submittedById: constraint.ownerId,
    readById: revision.decidedById,
  });
}

/** How two contents differ, field by field, in words. */
export function fieldChanges(before: ConstraintFields, after: ConstraintFields): FieldChange[] {
  return diffFields(before, after).map((field: FieldName) =>
    Object.assign(new FieldChange(), {
      field,
      before: fieldText(field, before) || null,
      after: fieldText(field, after) || null,
    }),
  );
}

/** When a revision came into the state in which it is. */
export function stateSince(revision: Revision): Date {
  return revision.decidedAt ?? revision.submittedAt ?? revision.updatedAt;
}
