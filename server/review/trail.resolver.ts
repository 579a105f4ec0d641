import { Ctx, FieldResolver, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Submission } from "~server/constraint/submission.type";

import { trailOf } from "./trail";
import { TrailRound } from "./trail.type";

@Resolver(() => Submission)
export class TrailResolver {
  @FieldResolver(() => [TrailRound], {
    description: "What was sent, asked, answered, changed and decided, oldest round first.",
  })
  trail(@Ctx() ctx: RequestContext, @Root() { revision }: Submission): Promise<TrailRound[]> {
    return trailOf(ctx, revision);
  }
}
