import { Arg, Ctx, FieldResolver, ID, Query, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { PublicRevision } from "~server/constraint/constraint.type";

import { creditOf, personCredit } from "./credit.service";
import { Credit, PersonCredit } from "./credit.type";

@Resolver(() => PublicRevision)
export class CreditResolver {
  @Query(() => PersonCredit, {
    nullable: true,
    description: "A contributor's or an editor's page; null for who has brought nothing yet.",
  })
  personCredit(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<PersonCredit | null> {
    return personCredit(ctx, id);
  }

  @FieldResolver(() => Credit)
  enteredBy(@Ctx() ctx: RequestContext, @Root() root: PublicRevision): Promise<Credit> {
    return creditOf(ctx)(root.enteredById);
  }

  @FieldResolver(() => Credit)
  readBy(@Ctx() ctx: RequestContext, @Root() root: PublicRevision): Promise<Credit> {
    return creditOf(ctx)(root.readById);
  }
}
