import { Arg, Ctx, ID, Mutation, Query, Resolver } from "type-graphql";

import { requireViewer, type RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";

import { findTokens, makeToken, revokeToken } from "./apiToken.service";
import {
  ApiTokenInput,
  ApiTokenType,
  apiTokenType,
  MadeApiToken,
  MakeApiTokenResult,
} from "./apiToken.type";

@Resolver()
export class ApiTokenResolver {
  @Requires("keepTokens")
  @Query(() => [ApiTokenType], {
    description: "The signed-in person's API tokens, newest first; closed to tokens.",
  })
  async apiTokens(@Ctx() ctx: RequestContext): Promise<ApiTokenType[]> {
    const found = await findTokens(ctx.database.manager, requireViewer(ctx).id);
    return found.map((token) => apiTokenType(token));
  }

  @Requires("keepTokens")
  @Mutation(() => MakeApiTokenResult, {
    description: "Makes an API token. Its secret is in this answer only; closed to tokens.",
  })
  async makeApiToken(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => ApiTokenInput, { description: "Name, scopes and days." })
    input: ApiTokenInput,
    @Arg("password", () => String, { description: "The person's present password." })
    password: string,
  ): Promise<typeof MakeApiTokenResult> {
    const made = await makeToken(ctx, input, password);
    if (made instanceof Refusal) return made;
    return Object.assign(new MadeApiToken(), {
      token: apiTokenType(made.token),
      secret: made.secret,
    });
  }

  @Requires("keepTokens")
  @Mutation(() => DoneResult, {
    description: "Ends an API token of one's own, at once and for good; closed to tokens.",
  })
  revokeApiToken(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID, { description: "The token's id." }) id: string,
  ): Promise<typeof DoneResult> {
    return revokeToken(ctx, id);
  }
}
