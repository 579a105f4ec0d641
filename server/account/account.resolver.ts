import { Arg, Authorized, Ctx, Mutation, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { CreditAfterwardsEnum } from "~server/common/enums";
import { Done, DoneResult, done } from "~server/common/outcomes";
import type { CreditAfterwards } from "~shared/review/formerMember";

import * as account from "./account.service";
import { SignInResult, ViewerResult } from "./account.type";
import {
  confirmAddressChange,
  objectToAddressChange,
  requestAddressChange,
} from "./address.service";
import { deleteAccount } from "./leave.service";

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
    @Arg("furtherNames", () => [String], { nullable: true }) furtherNames: string[] | null = null,
  ): Promise<typeof ViewerResult> {
    return account.updateProfile(ctx, nameOnPapers, orcid, furtherNames);
  }

  @Authorized()
  @Mutation(() => Done, { description: "Ends every session of this person, this one included." })
  signOutEverywhere(@Ctx() ctx: RequestContext): Promise<Done> {
    return account.signOutEverywhere(ctx);
  }

  @Authorized()
  @Mutation(() => DoneResult, {
    description: "Mails a link to the new address; the change is made when it is opened.",
  })
  requestAddressChange(
    @Ctx() ctx: RequestContext,
    @Arg("email", () => String) email: string,
    @Arg("password", () => String) password: string,
  ): Promise<typeof DoneResult> {
    return requestAddressChange(ctx, email, password);
  }

  @Mutation(() => DoneResult)
  confirmAddressChange(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
  ): Promise<typeof DoneResult> {
    return confirmAddressChange(ctx, token);
  }

  @Mutation(() => DoneResult, {
    description: "Stops or undoes a change of address, by the link that went to the old one.",
  })
  objectToAddressChange(
    @Ctx() ctx: RequestContext,
    @Arg("token", () => String) token: string,
  ): Promise<typeof DoneResult> {
    return objectToAddressChange(ctx, token);
  }

  @Authorized()
  @Mutation(() => DoneResult, {
    description: "Deletes the account; what the person brought to the registry stays in it.",
  })
  deleteAccount(
    @Ctx() ctx: RequestContext,
    @Arg("password", () => String) password: string,
    @Arg("credit", () => CreditAfterwardsEnum) credit: CreditAfterwards,
  ): Promise<typeof DoneResult> {
    return deleteAccount(ctx, password, credit);
  }
}
