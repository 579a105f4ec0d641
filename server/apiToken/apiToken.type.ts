import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { TokenScopeEnum, TokenStateEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { TOKEN_DAYS, type TokenScope, type TokenState } from "~shared/review/tokenScopes";

import type { ApiToken } from "./apiToken.entity";

@ObjectType("ApiToken", {
  description: "A key by which a program acts for the signed-in person. Its secret is not kept.",
})
export class ApiTokenType {
  @Field(() => ID, { description: "Names the token; it opens nothing." })
  id!: string;

  @Field(() => String, { description: "What its person calls it." })
  name!: string;

  @Field(() => [TokenScopeEnum], { description: "What it may do." })
  scopes!: TokenScope[];

  @Field(() => String, { description: "The first characters of the token, to tell it by." })
  start!: string;

  @Field(() => TokenStateEnum, { description: "Whether it works now." })
  state!: TokenState;

  @Field(() => Date, { description: "When it was made." })
  createdAt!: Date;

  @Field(() => Date, { description: "When it ends, or ended, by itself." })
  expiresAt!: Date;

  @Field(() => Date, {
    nullable: true,
    description: "When it was last used, to a minute; null when it never was.",
  })
  lastUsedAt!: Date | null;

  @Field(() => Date, { nullable: true, description: "When it was revoked; null when it wasn't." })
  revokedAt!: Date | null;
}

export function apiTokenType(token: ApiToken, now = new Date()): ApiTokenType {
  const { id, name, scopes, start, createdAt, expiresAt, lastUsedAt, revokedAt } = token;
  return Object.assign(new ApiTokenType(), {
    ...{ id, name, scopes, start, createdAt, expiresAt, lastUsedAt, revokedAt },
    state: revokedAt ? "revoked" : expiresAt <= now ? "expired" : "active",
  } satisfies ApiTokenType);
}

@ObjectType({ description: "A token just made, with its secret, which is shown this once." })
export class MadeApiToken {
  @Field(() => ApiTokenType, { description: "The token as it is listed." })
  token!: ApiTokenType;

  @Field(() => String, {
    description: "What a program sends as “Authorization: Bearer …”. It can't be shown again.",
  })
  secret!: string;
}

export const MakeApiTokenResult = createUnionType({
  name: "MakeApiTokenResult",
  description: "The token with its secret, or why there is none.",
  types: () => [MadeApiToken, Refusal] as const,
});

@InputType({ description: "A token to be made." })
export class ApiTokenInput {
  @Field(() => String, { description: "A name of 1 to 60 characters: what uses it." })
  name!: string;

  @Field(() => [TokenScopeEnum], { description: "What it may do; “read” is always added." })
  scopes!: TokenScope[];

  @Field(() => Int, {
    defaultValue: TOKEN_DAYS.preset,
    description: `Days until it ends, from 1 to ${TOKEN_DAYS.most}.`,
  })
  days!: number;
}
