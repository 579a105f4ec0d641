import { Ctx, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { isDemonstration } from "~server/database/settings";
import { eventMark } from "~server/event/event.type";
import { lastEvent } from "~server/event/eventLog";

import { Session, viewerType } from "./account.type";

@Resolver()
export class SessionResolver {
  @Query(() => Session)
  async session(@Ctx() ctx: RequestContext): Promise<Session> {
    const { manager } = ctx.database;
    const [demonstration, last] = await Promise.all([isDemonstration(manager), lastEvent(manager)]);
    return Object.assign(new Session(), {
      viewer: ctx.viewer && viewerType(ctx.viewer),
      demonstration,
      looksUpCitations: ctx.config.lookUpUrl !== null,
      licence: ctx.config.licence,
      lastEvent: last && eventMark(last),
    });
  }
}
