import { createUnionType, Field, ID, ObjectType } from "type-graphql";

import type { ViewerIdentity } from "~server/common/context";
import { RoleEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { EventMark } from "~server/event/event.type";
import type { Role } from "~shared/review/states";

import type { User } from "./user.entity";
import { viewerOf } from "./viewer";

/** The signed-in person, as that person sees the account. */
@ObjectType()
export class Viewer {
  @Field(() => ID) id!: string;
  @Field(() => String) email!: string;
  @Field(() => String) nameOnPapers!: string;
  @Field(() => [String], {
    description:
      "Other names under which this person has published; they keep an editor off such papers.",
  })
  furtherNames!: string[];
  @Field(() => String, { nullable: true }) orcid!: string | null;
  @Field(() => [RoleEnum]) roles!: Role[];
}

export function viewerType(viewer: ViewerIdentity): Viewer {
  const { roles, furtherNames, ...rest } = viewer;
  return Object.assign(new Viewer(), {
    ...rest,
    furtherNames: [...furtherNames],
    roles: [...roles],
  });
}

@ObjectType()
export class Session {
  @Field(() => Viewer, { nullable: true }) viewer!: Viewer | null;

  @Field(() => Boolean, {
    description: "True when the registry holds the invented demonstration data.",
  })
  demonstration!: boolean;

  @Field(() => Boolean, { description: "Whether papers can be looked up by DOI or arXiv number." })
  looksUpCitations!: boolean;
  @Field(() => String, { description: "Data licence every export names." }) licence!: string;
  @Field(() => EventMark, { nullable: true }) lastEvent!: EventMark | null;
}

/** A person as a maintainer sees them. */
@ObjectType()
export class Person {
  @Field(() => ID) id!: string;
  @Field(() => String) email!: string;
  @Field(() => String) nameOnPapers!: string;
  @Field(() => Boolean) confirmed!: boolean;
  @Field(() => Date) registeredAt!: Date;
  @Field(() => [RoleEnum]) roles!: Role[];
}

export function personType(user: User): Person {
  const { id, email, nameOnPapers, roles } = viewerOf(user);
  return Object.assign(new Person(), {
    id,
    email,
    nameOnPapers,
    confirmed: user.confirmedAt !== null,
    registeredAt: user.createdAt,
    roles: [...roles],
  });
}

export const SignInResult = createUnionType({
  name: "SignInResult",
  types: () => [Viewer, Refusal] as const,
});

export const ViewerResult = createUnionType({
  name: "ViewerResult",
  types: () => [Viewer, Refusal] as const,
});

export const PersonResult = createUnionType({
  name: "PersonResult",
  types: () => [Person, Refusal] as const,
});
