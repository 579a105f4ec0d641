import { Field, Int, ObjectType } from "type-graphql";

import type { LastEvent } from "./eventLog";

/** A point in the event log, by which an export says what the registry held. */
@ObjectType()
export class EventMark {
  @Field(() => Int) sequence!: number;
  @Field(() => String) digest!: string;
  @Field(() => Date) at!: Date;
}

export function eventMark(event: LastEvent): EventMark {
  return Object.assign(new EventMark(), event);
}
