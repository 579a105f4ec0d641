import { Arg, Ctx, ID, Mutation, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { RoleEnum } from "~server/common/enums";
import { Requires } from "~server/common/requires";
import type { Role } from "~shared/review/states";

import { Person, PersonResult } from "./account.type";
import * as people from "./people.service";

@Resolver()
export class PeopleResolver {
  @Requires("readPeople")
  @Query(() => [Person])
  people(
    @Ctx() ctx: RequestContext,
    @Arg("text", () => String, { nullable: true }) text: string | null,
  ): Promise<Person[]> {
    return people.findPeople(ctx, text ?? "");
  }

  @Requires("grantRole")
  @Mutation(() => PersonResult)
  grantRole(
    @Ctx() ctx: RequestContext,
    @Arg("personId", () => ID) personId: string,
    @Arg("role", () => RoleEnum) role: Role,
  ): Promise<typeof PersonResult> {
    return people.grantRole(ctx, personId, role);
  }

  @Requires("revokeRole")
  @Mutation(() => PersonResult)
  revokeRole(
    @Ctx() ctx: RequestContext,
    @Arg("personId", () => ID) personId: string,
    @Arg("role", () => RoleEnum) role: Role,
  ): Promise<typeof PersonResult> {
    return people.revokeRole(ctx, personId, role);
  }
}
