import { Arg, Authorized, Ctx, Mutation, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Done, DoneResult, done } from "~server/common/outcomes";

import * as account from "./account.service";
import { SignInResult, ViewerResult } from "./account.type";

@Resolver()
export class AccountResolver {
  @Mutation(() => DoneResult)
  register(
    @Ctx() ctx: RequestContext,
    @Arg("email", () => String) email: string,
    @Arg("nameOnPapers", () => String) nameOnPapers: string,
    @Arg("password", () => String) password: string,
  ): Promise<typeof DoneResult> {
    return account.register(ctx, { email, nameOnPapers, password });
  }

  @Mutation(() => DoneResult)
  confirmEmail(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
  ): Promise<typeof DoneResult> {
    return account.confirmEmail(ctx, token);
  }

  @Mutation(() => DoneResult)
  resendConfirmation(
    @Ctx() ctx: RequestContext,
    @Arg("email", () => String) email: string,
  ): Promise<typeof DoneResult> {
    return account.resendConfirmation(ctx, email);
  }

  @Mutation(() => SignInResult)
  signIn(
    @Ctx() ctx: RequestContext,
    @Arg("email", () => String) email: string,
    @Arg("password", () => String) password: string,
  ): Promise<typeof SignInResult> {
    return account.signIn(ctx, email, password);
  }

  @Mutation(() => Done)
  async signOut(@Ctx() ctx: RequestContext): Promise<Done> {
    await ctx.signOut();
    return done("You are signed out.");
  }

  @Authorized()
  @Mutation(() => DoneResult)
  changePassword(
    @Ctx() ctx: RequestContext,
    @Arg("current", () => String) current: string,
    @Arg("next", () => String) next: string,
  ): Promise<typeof DoneResult> {
    return account.changePassword(ctx, current, next);
  }

  @Mutation(() => DoneResult)
  requestPasswordReset(
    @Ctx() ctx: RequestContext,
    @Arg("email", () => String) email: string,
  ): Promise<typeof DoneResult> {
    return account.requestPasswordReset(ctx, email);
  }

  @Mutation(() => DoneResult)
  resetPassword(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
    @Arg("next", () => String) next: string,
  ): Promise<typeof DoneResult> {
    return account.resetPassword(ctx, token, next);
  }

  @Authorized()
  @Mutation(() => ViewerResult)
  updateProfile(
    @Ctx() ctx: RequestContext,
    @Arg("nameOnPapers", () => String) nameOnPapers: string,
    @Arg("orcid", () => String, { nullable: true }) orcid: string | null,
  ): Promise<typeof ViewerResult> {
    return account.updateProfile(ctx, nameOnPapers, orcid);
  }
}
