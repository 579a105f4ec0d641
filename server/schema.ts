import "reflect-metadata";

import { lexicographicSortSchema, printSchema, type GraphQLSchema } from "graphql";
import { buildSchema, type BuildSchemaOptions } from "type-graphql";

import { describeSchema } from "~server/apiWords/describe";
import { AccountResolver } from "~server/account/account.resolver";
import { PeopleResolver } from "~server/account/people.resolver";
import { SessionResolver } from "~server/account/session.resolver";
import { ApiTokenResolver } from "~server/apiToken/apiToken.resolver";
import {
  AuthorCheckMarkResolver,
  AuthorCheckResolver,
} from "~server/authorCheck/authorCheck.resolver";
import { CitationResolver } from "~server/citation/citation.resolver";
import { RoleChecker } from "~server/common/authChecker";
import { ConstraintResolver } from "~server/constraint/constraint.resolver";
import { CorrelatedSetResolver } from "~server/correlatedSet/correlatedSet.resolver";
import { EvidenceResolver } from "~server/evidence/evidence.resolver";
import { EventLogResolver } from "~server/event/log.resolver";
import { SubmissionResolver } from "~server/constraint/submission.resolver";
import { CreditResolver } from "~server/credit/credit.resolver";
import {
  ErrorReportCountResolver,
  ErrorReportResolver,
} from "~server/errorReport/errorReport.resolver";
import { ImportResolver } from "~server/import/import.resolver";
import { MethodResolver } from "~server/method/method.resolver";
import { NamedDataResolver, UsedDataResolver } from "~server/namedData/namedData.resolver";
import { RecordLifeResolver, SupersededByResolver } from "~server/recordLife/life.resolver";
import { RowsSinceResolver } from "~server/recordLife/rowsSince.resolver";
import { CaughtMailResolver } from "~server/mail/caughtMail.resolver";
import { ReleaseResolver } from "~server/release/release.resolver";
import { ReviewResolver } from "~server/review/review.resolver";
import { ThreadResolver } from "~server/review/thread.resolver";
import { TrailResolver } from "~server/review/trail.resolver";
import { TableResolver } from "~server/table/table.resolver";

/** Every resolver of the server; each folder adds its own here. */
export const resolvers = [
  SessionResolver,
  AccountResolver,
  PeopleResolver,
  ApiTokenResolver,
  CitationResolver,
  ImportResolver,
  CaughtMailResolver,
  ConstraintResolver,
  CreditResolver,
  ErrorReportResolver,
  ErrorReportCountResolver,
  SubmissionResolver,
  ReviewResolver,
  ThreadResolver,
  TrailResolver,
  AuthorCheckResolver,
  AuthorCheckMarkResolver,
  TableResolver,
  ReleaseResolver,
  CorrelatedSetResolver,
  MethodResolver,
  NamedDataResolver,
  UsedDataResolver,
  RecordLifeResolver,
  SupersededByResolver,
  RowsSinceResolver,
  EventLogResolver,
  EvidenceResolver,
] as const satisfies BuildSchemaOptions["resolvers"];

const HEAD = "# Written by npm run generate from the server's classes: never by hand.";

/** The schema as the decorators make it. */
export function createBareSchema(): Promise<GraphQLSchema> {
  return buildSchema({
    resolvers,
    authChecker: RoleChecker,
    validate: { forbidUnknownValues: false },
  });
}

/** Builds the schema with its words; needs no database. */
export async function createSchema(): Promise<GraphQLSchema> {
  return describeSchema(await createBareSchema());
}

/** The SDL that graphql/schema.graphql holds: sorted, so that its diff is the API's diff. */
export function printedSchema(schema: GraphQLSchema): string {
  return `${HEAD}\n\n${printSchema(lexicographicSortSchema(schema))}\n`;
}
