import { Ctx, Field, ID, ObjectType, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { forbidden } from "~server/common/errors";
import { Requires } from "~server/common/requires";
import { isDemonstration } from "~server/database/settings";

import { CaughtMailRow } from "./caughtMail.entity";

const SHOWN = 200;

@ObjectType()
export class CaughtMail {
  @Field(() => ID) id!: string;
  @Field(() => Date) at!: Date;
  @Field(() => String) to!: string;
  @Field(() => String) subject!: string;
  @Field(() => String) text!: string;
}

@Resolver()
export class CaughtMailResolver {
  /** Mails open accounts, so only a registry of invented people shows them. */
  @Requires("readCaughtMail")
  @Query(() => [CaughtMail])
  async caughtMails(@Ctx() ctx: RequestContext): Promise<CaughtMail[]> {
    if (!(await isDemonstration(ctx.database.manager))) throw forbidden();
    const rows = await ctx.database.manager.find(CaughtMailRow, {
      order: { id: "DESC" },
      take: SHOWN,
    });
    return rows.map((row) => Object.assign(new CaughtMail(), row));
  }
}
