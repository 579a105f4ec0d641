import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { CitationType, citationType } from "~server/citation/citation.type";
import { ReportOutcomeEnum, ReportStateEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { ReportOutcome, ReportState } from "~shared/review/errorReport";

import type { ErrorReport } from "./errorReport.entity";

@ObjectType()
export class ErrorReported {
  @Field(() => String) message!: string;
  @Field(() => String, { description: "Opens the page where the answer will stand: /report/…" })
  token!: string;
}

export const ReportErrorResult = createUnionType({
  name: "ReportErrorResult",
  types: () => [ErrorReported, Refusal] as const,
});

@ObjectType()
export class ErrorReportEntry {
  @Field(() => ID) id!: string;
  @Field(() => String, { nullable: true, description: "Null for whoever reported it." })
  by!: string | null;
  @Field(() => String) text!: string;
  @Field(() => Date) at!: Date;
}

/** What the page of a reporter's link shows. */
@ObjectType()
export class ReportedError {
  @Field(() => String) number!: string;
  @Field(() => String) quotable!: string;
  @Field(() => CitationType, { nullable: true }) citation!: CitationType | null;
  @Field(() => String) text!: string;
  @Field(() => Date) reportedAt!: Date;
  @Field(() => ReportStateEnum) state!: ReportState;
  @Field(() => ReportOutcomeEnum, { nullable: true }) outcome!: ReportOutcome | null;
  @Field(() => String, { nullable: true }) correctedBy!: string | null;
  @Field(() => [ErrorReportEntry]) entries!: ErrorReportEntry[];
  @Field(() => Boolean, { description: "Whether the one reply is still to be given." })
  mayReply!: boolean;
}

export const ReplyResult = createUnionType({
  name: "ReplyResult",
  types: () => [ReportedError, Refusal] as const,
});

/** A report as the desk sees it. The reporter's address is shown to nobody. */
@ObjectType("ErrorReport")
export class ErrorReportType {
  @Field(() => ID) id!: string;
  @Field(() => Int) version!: number;
  @Field(() => String) number!: string;
  @Field(() => String) quotable!: string;
  @Field(() => CitationType, { nullable: true }) citation!: CitationType | null;
  @Field(() => String) text!: string;
  @Field(() => Date) reportedAt!: Date;
  @Field(() => ReportStateEnum) state!: ReportState;
  @Field(() => ReportOutcomeEnum, { nullable: true }) outcome!: ReportOutcome | null;
  @Field(() => String, { nullable: true }) correctedBy!: string | null;
  @Field(() => Date, { nullable: true }) closedAt!: Date | null;
  @Field(() => Boolean, { description: "Whether answers reach the reporter by mail." })
  mailed!: boolean;
  @Field(() => String, { nullable: true, description: "Why the viewer can't answer, in words." })
  barredBecause!: string | null;
}

export const ErrorReportResult = createUnionType({
  name: "ErrorReportResult",
  types: () => [ErrorReportType, Refusal] as const,
});

@InputType()
export class CloseReportInput {
  @Field(() => ID) id!: string;
  @Field(() => Int) version!: number;
  @Field(() => ReportOutcomeEnum) outcome!: ReportOutcome;
  @Field(() => String, { nullable: true, description: "FL-0042.3, where it was corrected." })
  correctedBy?: string | null;
  @Field(() => String, { nullable: true }) text?: string | null;
}

@ObjectType()
export class ErrorReportCount {
  @Field(() => Int) open!: number;
  @Field(() => Int) answered!: number;
}

/** What both pages of a report show of it. */
export function reportHead(report: ErrorReport) {
  const { constraintId, revision } = report;
  return {
    number: formatRecordNumber(constraintId),
    quotable: formatQuotable(constraintId, revision.ordinal),
    citation: revision.citation && citationType(revision.citation),
    text: report.text,
    reportedAt: report.createdAt,
    state: report.state,
    outcome: report.outcome,
    correctedBy: report.correctedBy,
  };
}
