import {
  Arg,
  Authorized,
  Ctx,
  FieldResolver,
  ID,
  Int,
  Mutation,
  Query,
  Resolver,
  Root,
} from "type-graphql";

import { requireViewer, type RequestContext } from "~server/common/context";
import { ReportStateEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { ClosedToTokens, Requires } from "~server/common/requires";
import { ConstraintType } from "~server/constraint/constraint.type";
import { nameOf } from "~server/constraint/names";
import { acting } from "~server/event/acting";
import type { ReportState } from "~shared/review/errorReport";

import { answerReport, barredFromAnswering, closeReport, deskReport } from "./answer.service";
import type { ErrorReport } from "./errorReport.entity";
import { findReports, hasEditorsMessage, messagesOf, reportCounts } from "./errorReport.query";
import {
  CloseReportInput,
  ErrorReportCount,
  ErrorReported,
  ErrorReportEntry,
  ErrorReportResult,
  ErrorReportType,
  ReplyResult,
  ReportedError,
  ReportErrorResult,
  reportHead,
} from "./errorReport.type";
import { replyToReport, reportByToken, reportError } from "./report.service";

async function entriesOf(ctx: RequestContext, reportId: string): Promise<ErrorReportEntry[]> {
  const messages = await messagesOf(ctx.database.manager, reportId);
  return Promise.all(
    messages.map(async ({ id, byId, text, at }) =>
      Object.assign(new ErrorReportEntry(), {
        id: String(id),
        by: byId === null ? null : await nameOf(ctx)(byId),
        text,
        at,
      }),
    ),
  );
}

async function forReporter(ctx: RequestContext, report: ErrorReport): Promise<ReportedError> {
  const answered = await hasEditorsMessage(ctx.database.manager, report.id);
  return Object.assign(new ReportedError(), {
    ...reportHead(report),
    entries: await entriesOf(ctx, report.id),
    mayReply: answered && report.repliedAt === null,
  });
}

function forDesk(ctx: RequestContext, report: ErrorReport): ErrorReportType {
  return Object.assign(new ErrorReportType(), {
    ...reportHead(report),
    id: report.id,
    version: report.version,
    closedAt: report.closedAt,
    mailed: report.reporterEmail !== null,
    barredBecause: barredFromAnswering(report, requireViewer(ctx)),
  });
}

@Resolver(() => ErrorReportType)
export class ErrorReportResolver {
  @Mutation(() => ReportErrorResult, {
    description: "Tells the editors what is wrong with a record; anybody may, without an account.",
  })
  async reportError(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("text", () => String) text: string,
    @Arg("email", () => String, { nullable: true }) email: string | null = null,
  ): Promise<typeof ReportErrorResult> {
    const outcome = await reportError(ctx, { number, text, email });
    if (outcome instanceof Refusal) return outcome;
    const message = "Thank you. The editors have your report.";
    return Object.assign(new ErrorReported(), { message, token: outcome.token });
  }

  @Query(() => ReportedError, { nullable: true, description: "By the token of a reporter's link." })
  async reportedError(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
  ): Promise<ReportedError | null> {
    const report = await reportByToken(ctx, token);
    return report && forReporter(ctx, report);
  }

  @Mutation(() => ReplyResult)
  async replyToReport(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
    @Arg("text", () => String) text: string,
  ): Promise<typeof ReplyResult> {
    const outcome = await replyToReport(ctx, token, text);
    return outcome instanceof Refusal ? outcome : forReporter(ctx, outcome);
  }

  @Requires("readErrorReports")
  @Query(() => [ErrorReportType], {
    description: "Open ones first, the oldest of them on top; then the others, newest first.",
  })
  async errorReports(
    @Ctx() ctx: RequestContext,
    @Arg("text", () => String, { nullable: true }) text: string | null = null,
    @Arg("state", () => ReportStateEnum, { nullable: true }) state: ReportState | null = null,
  ): Promise<ErrorReportType[]> {
    const reports = await findReports(ctx, (text ?? "").slice(0, 500), state);
    return reports.map((report) => forDesk(ctx, report));
  }

  @Authorized()
  @ClosedToTokens()
  @Query(() => ErrorReportType, {
    nullable: true,
    description: "For editors, maintainers and the contributor of the record.",
  })
  async errorReport(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<ErrorReportType | null> {
    const report = await deskReport(ctx, id);
    return report && forDesk(ctx, report);
  }

  @Requires("answerErrorReport")
  @Mutation(() => ErrorReportResult)
  async answerErrorReport(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
    @Arg("text", () => String) text: string,
  ): Promise<typeof ErrorReportResult> {
    const outcome = await answerReport(acting(ctx), id, version, text);
    return outcome instanceof Refusal ? outcome : forDesk(ctx, outcome);
  }

  @Requires("answerErrorReport")
  @Mutation(() => ErrorReportResult)
  async closeErrorReport(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => CloseReportInput) input: CloseReportInput,
  ): Promise<typeof ErrorReportResult> {
    const { id, version, outcome, correctedBy = null, text = null } = input;
    const closed = await closeReport(acting(ctx), id, { version, outcome, correctedBy, text });
    return closed instanceof Refusal ? closed : forDesk(ctx, closed);
  }

  @FieldResolver(() => [ErrorReportEntry], { description: "The answer trail, oldest first." })
  entries(@Ctx() ctx: RequestContext, @Root() root: ErrorReportType): Promise<ErrorReportEntry[]> {
    return entriesOf(ctx, root.id);
  }
}

@Resolver(() => ConstraintType)
export class ErrorReportCountResolver {
  @FieldResolver(() => ErrorReportCount, {
    description: "Readers' reports of errors in this record; their words are not public.",
  })
  async errorReports(
    @Ctx() ctx: RequestContext,
    @Root() root: ConstraintType,
  ): Promise<ErrorReportCount> {
    const counts = (await reportCounts(ctx)(root.constraintId)) ?? { open: 0, answered: 0 };
    return Object.assign(new ErrorReportCount(), counts);
  }
}
