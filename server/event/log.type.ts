import { Field, InputType, Int, ObjectType } from "type-graphql";

import type { LogFilter } from "./log.query";

@InputType({ description: "Whatever is left out or empty does not narrow the log." })
export class EventLogFilterInput implements LogFilter {
  @Field(() => String, { nullable: true, description: "Part of a name or address, or an id." })
  person!: string | null;

  @Field(() => String, {
    nullable: true,
    description: "FL-0042 with all its revisions, FL-0042.3, FLS-0003, or a subject as written.",
  })
  about!: string | null;

  @Field(() => String, { nullable: true })
  kind!: string | null;

  @Field(() => String, { nullable: true, description: "First day, as 2031-02-03, in UTC." })
  from!: string | null;

  @Field(() => String, { nullable: true, description: "Last day, likewise." })
  to!: string | null;
}

/** One event of the log, in words, with what chains it to the one before. */
@ObjectType()
export class LoggedEvent {
  @Field(() => Int) sequence!: number;
  @Field(() => Date) at!: Date;
  @Field(() => String) kind!: string;
  @Field(() => String) sentence!: string;
  @Field(() => String, { nullable: true, description: "Null: the program itself." })
  who!: string | null;
  @Field(() => String) subject!: string;
  @Field(() => String) digest!: string;
  @Field(() => String) previousDigest!: string;
}

@ObjectType()
export class EventLogPage {
  @Field(() => [LoggedEvent]) events!: LoggedEvent[];

  @Field(() => Int, {
    nullable: true,
    description: "Ask again with it as `before`; null: no more.",
  })
  next!: number | null;

  @Field(() => Int, { description: "Events of the filter, over all pages." })
  total!: number;
}
