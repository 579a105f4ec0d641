import { Arg, Ctx, Int, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Requires } from "~server/common/requires";

import { countEvents, findEvents } from "./log.query";
import { EventLogFilterInput, EventLogPage, LoggedEvent } from "./log.type";

const MOST = 200;

@Resolver()
export class EventLogResolver {
  @Requires("readEventLog")
  @Query(() => EventLogPage, { description: "The event log, newest first." })
  async eventLog(
    @Ctx() ctx: RequestContext,
    @Arg("filter", () => EventLogFilterInput, { nullable: true })
    filter: EventLogFilterInput | null,
    @Arg("before", () => Int, { nullable: true }) before: number | null | undefined,
    @Arg("limit", () => Int, { defaultValue: 50 }) limit: number,
  ): Promise<EventLogPage> {
    const { manager } = ctx.database;
    const wanted = Math.min(Math.max(limit, 1), MOST);
    // One more than wanted tells whether there is a next page.
    const found = await findEvents(manager, filter ?? {}, {
      before: before ?? null,
      limit: wanted + 1,
    });
    const events = found.slice(0, wanted);
    return Object.assign(new EventLogPage(), {
      events: events.map((event) => Object.assign(new LoggedEvent(), event)),
      next: found.length > wanted ? (events.at(-1)?.sequence ?? null) : null,
      total: await countEvents(manager, filter ?? {}),
    });
  }
}
