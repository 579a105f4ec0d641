import { Arg, Ctx, FieldResolver, ID, Int, Mutation, Query, Resolver, Root } from "type-graphql";

import { citationType } from "~server/citation/citation.type";
import { requireViewer, type RequestContext } from "~server/common/context";
import { CheckVerdictEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { perRequest } from "~server/constraint/batch";
import { ConstraintType } from "~server/constraint/constraint.type";
import { fieldsType } from "~server/constraint/fields.type";
import { nameOf } from "~server/constraint/names";
import { acting } from "~server/event/acting";
import { papersLeftBy, barredBecause } from "~server/review/recusal.service";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { CheckVerdict } from "~shared/review/authorCheck";

import { answerLink, openLink, type OpenedLink } from "./answer.service";
import type { AuthorCheck } from "./authorCheck.entity";
import {
  editorName,
  entriesOf,
  findChecks,
  isOutdated,
  loadCheck,
  publicChecks,
  seesCheck,
} from "./authorCheck.query";
import {
  AuthorAnswerResult,
  AuthorCheckLine,
  AuthorCheckMark,
  AuthorCheckPage,
  AuthorCheckResult,
  AuthorCheckType,
  SendAuthorCheckInput,
} from "./authorCheck.type";
import { closeCheck, revokeCheck } from "./close.service";
import { sendCheck } from "./send.service";

@Resolver(() => AuthorCheckType)
export class AuthorCheckResolver {
  @Query(() => AuthorCheckPage, {
    nullable: true,
    description: "What an author's link opens; null for a made-up link.",
  })
  async authorCheckByLink(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
  ): Promise<AuthorCheckPage | null> {
    const opened = await openLink(ctx, token);
    return opened && pageOf(ctx, opened);
  }

  @Mutation(() => AuthorAnswerResult, {
    description: "Takes an author's answer; a later one corrects it until the editors close it.",
  })
  async answerAuthorCheck(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
    @Arg("version", () => Int) version: number,
    @Arg("verdict", () => CheckVerdictEnum) verdict: CheckVerdict,
    @Arg("text", () => String, { nullable: true }) text: string | null = null,
  ): Promise<typeof AuthorAnswerResult> {
    const result = await answerLink(ctx, token, { version, verdict, text });
    if (result instanceof Refusal) return result;
    return pageOf(ctx, { check: result, standing: "answered" });
  }

  @Requires("readAuthorChecks")
  @Query(() => [AuthorCheckType], {
    description: "Checks by authors; comments that wait stand first, the oldest on top.",
  })
  async authorChecks(
    @Ctx() ctx: RequestContext,
    @Arg("text", () => String, { nullable: true }) text: string | null = null,
  ): Promise<AuthorCheckType[]> {
    const checks = await findChecks(ctx, text ?? "");
    return Promise.all(checks.map((check) => deskType(ctx, check)));
  }

  @Requires("readAuthorChecks")
  @Query(() => AuthorCheckType, { nullable: true })
  async authorCheck(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<AuthorCheckType | null> {
    const check = await loadCheck(ctx.database.manager, { id });
    const seen = check && (await seesCheck(ctx.database.manager, ctx.viewer, check, new Date()));
    return check && seen ? deskType(ctx, check) : null;
  }

  @Requires("sendAuthorCheck")
  @Mutation(() => AuthorCheckResult, {
    description:
      "Mails an author of the paper a link that shows the revision; the link is in the mail only.",
  })
  async sendAuthorCheck(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => SendAuthorCheckInput) input: SendAuthorCheckInput,
  ): Promise<typeof AuthorCheckResult> {
    return deskOutcome(ctx, await sendCheck(ctx, input));
  }

  @Requires("closeAuthorCheck")
  @Mutation(() => AuthorCheckResult)
  async closeAuthorCheck(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
    @Arg("text", () => String, { nullable: true }) text: string | null = null,
  ): Promise<typeof AuthorCheckResult> {
    return deskOutcome(ctx, await closeCheck(acting(ctx), id, version, text));
  }

  @Requires("closeAuthorCheck")
  @Mutation(() => AuthorCheckResult)
  async revokeAuthorCheck(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
  ): Promise<typeof AuthorCheckResult> {
    return deskOutcome(ctx, await revokeCheck(acting(ctx), id, version));
  }

  @FieldResolver(() => [AuthorCheckLine], { description: "The answer trail, oldest first." })
  lines(@Ctx() ctx: RequestContext, @Root() { id }: AuthorCheckType): Promise<AuthorCheckLine[]> {
    return linesOf(ctx, id);
  }
}

/** On the record's own page: that an author checked it, and what came of it. */
@Resolver(() => ConstraintType)
export class AuthorCheckMarkResolver {
  @FieldResolver(() => [AuthorCheckMark], {
    description: "Answered checks of the approved revisions by authors of the paper.",
  })
  async authorChecks(
    @Ctx() ctx: RequestContext,
    @Root() { constraintId }: ConstraintType,
  ): Promise<AuthorCheckMark[]> {
    const checks = (await publicChecks(ctx)(constraintId)) ?? [];
    return checks.map((check) =>
      Object.assign(new AuthorCheckMark(), {
        id: check.id,
        ordinal: check.revision.ordinal,
        verdict: check.verdict,
        at: check.answeredAt,
        closed: check.state === "closed",
      }),
    );
  }
}

async function linesOf(ctx: RequestContext, checkId: string): Promise<AuthorCheckLine[]> {
  const entries = await entriesOf(ctx.database.manager, checkId);
  return Promise.all(
    entries.map(async ({ id, byId, verdict, text, at }) =>
      Object.assign(new AuthorCheckLine(), {
        id: String(id),
        by: byId === null ? null : await nameOf(ctx)(byId),
        verdict,
        text,
        at,
      }),
    ),
  );
}

async function pageOf(
  ctx: RequestContext,
  { check, standing }: OpenedLink,
): Promise<AuthorCheckPage> {
  const { manager } = ctx.database;
  const { revision } = check;
  const open = standing === "open" || standing === "answered";
  const shown = open || standing === "closed";
  return Object.assign(new AuthorCheckPage(), {
    standing,
    version: check.version,
    quotable: formatQuotable(check.constraintId, revision.ordinal),
    number: formatRecordNumber(check.constraintId),
    approved: revision.constraint.approvedRevisionId !== null,
    outdated: await isOutdated(manager, revision),
    expiresAt: check.expiresAt,
    askedBy: await editorName(manager, check.sentById),
    askedAt: check.sentAt,
    authorName: shown ? check.authorName : null,
    authorEmail: shown ? check.authorEmail : null,
    verdict: shown ? check.verdict : null,
    citation: shown && revision.citation ? citationType(revision.citation) : null,
    fields: open ? fieldsType(revision.fields) : null,
    lines: shown ? await linesOf(ctx, check.id) : [],
  });
}

const leftOnce = perRequest((ctx: RequestContext) =>
  papersLeftBy(ctx.database.manager, requireViewer(ctx).id),
);

async function deskType(ctx: RequestContext, check: AuthorCheck): Promise<AuthorCheckType> {
  const { revision } = check;
  const viewer = requireViewer(ctx);
  const left = await leftOnce(ctx);
  return Object.assign(new AuthorCheckType(), {
    id: check.id,
    version: check.version,
    number: formatRecordNumber(check.constraintId),
    quotable: formatQuotable(check.constraintId, revision.ordinal),
    citation: revision.citation && citationType(revision.citation),
    state: check.state,
    verdict: check.verdict,
    expired: check.expiresAt <= new Date(),
    authorName: check.authorName,
    authorEmail: check.authorEmail,
    sentBy: await nameOf(ctx)(check.sentById),
    sentAt: check.sentAt,
    expiresAt: check.expiresAt,
    answeredAt: check.answeredAt,
    endedAt: check.endedAt,
    barredBecause: barredBecause(revision, viewer, left),
  });
}

async function deskOutcome(
  ctx: RequestContext,
  result: AuthorCheck | Refusal,
): Promise<typeof AuthorCheckResult> {
  return result instanceof Refusal ? result : deskType(ctx, result);
}
