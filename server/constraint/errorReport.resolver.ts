import { Arg, Ctx, Mutation, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { DoneResult } from "~server/common/outcomes";

import { reportError } from "./errorReport.service";

@Resolver()
export class ErrorReportResolver {
  @Mutation(() => DoneResult, {
    description:
      "Tells the maintainers what is wrong with a record; anybody may, without an account.",
  })
  reportError(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("text", () => String) text: string,
    @Arg("email", () => String, { nullable: true }) email: string | null = null,
  ): Promise<typeof DoneResult> {
    return reportError(ctx, { number, text, email });
  }
}
