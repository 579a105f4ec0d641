import { createUnionType, Field, ObjectType } from "type-graphql";

/** A stated outcome that is not success; the message is a sentence for the person. */
@ObjectType({
  description: "A stated outcome that is not success. The message is a sentence for the person.",
})
export class Refusal {
  @Field(() => String) code!: string;
  @Field(() => String) message!: string;
  @Field(() => String, { nullable: true }) field!: string | null;
}

@ObjectType()
export class Done {
  @Field(() => String) message!: string;
}

export const DoneResult = createUnionType({
  name: "DoneResult",
  types: () => [Done, Refusal] as const,
});

export function refuse(code: string, message: string, field: string | null = null): Refusal {
  return Object.assign(new Refusal(), { code, message, field });
}

export function done(message: string): Done {
  return Object.assign(new Done(), { message });
}
