import { getNamedType, isObjectType, isUnionType, type GraphQLSchema } from "graphql";

import { scopeNeeded } from "~server/apiToken/tokenGuard";
import type { OperationNote } from "~server/common/requires";
import { createSchema } from "~server/schema";
import { MAY } from "~shared/review/policy";
import { SCOPE_OF, type TokenScope } from "~shared/review/tokenScopes";

import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { tokenOperations } from "./operations";

/**
 * The operations that an API token opens, and by which scope: every mutation of the schema stands
 * here or in CLOSED, every query here as `read` unless it is in CLOSED.
 */
const OPEN: Record<string, TokenScope> = {
  changeTable: "tables",
  deleteTable: "tables",
  saveRecipe: "tables",
  saveTable: "tables",
};

/** Closed to tokens, whatever their scopes: the desk and the account. A new operation is put somewhere by hand. */
const CLOSED = {
  Mutation: [
    "acceptAnswer",
    "addMethodTag",
    "answerAuthorCheck",
    "answerErrorReport",
    "approveSet",
    "approveSubmission",
    "changeMethodTag",
    "changePassword",
    "claimSet",
    "claimSubmission",
    "closeAuthorCheck",
    "closeErrorReport",
    "confirmAddressChange",
    "confirmEmail",
    "correctReading",
    "correctSetReading",
    "cutRelease",
    "deleteAccount",
    "describeEvidence",
    "discardDraft",
    "discardSet",
    "editNamedData",
    "grantRole",
    "handOverClaim",
    "keepCitations",
    "leavePaper",
    "liftNotice",
    "lookUpCitation",
    "makeApiToken",
    "mergeNamedData",
    "objectToAddressChange",
    "previewImport",
    "recordErratum",
    "register",
    "relateNamedData",
    "releaseClaim",
    "releaseSet",
    "removeEvidence",
    "renewClaim",
    "replyToComment",
    "replyToReport",
    "reportError",
    "requestAddressChange",
    "requestPasswordReset",
    "resendConfirmation",
    "resetPassword",
    "retireMethodTag",
    "returnSet",
    "returnSubmission",
    "reviseSet",
    "reviseSubmission",
    "revokeApiToken",
    "revokeAuthorCheck",
    "revokeRole",
    "runImport",
    "saveDraft",
    "saveSet",
    "sendAuthorCheck",
    "signIn",
    "signOut",
    "signOutEverywhere",
    "startDraft",
    "startSet",
    "storeReading",
    "storeSetReading",
    "submitDraft",
    "submitSet",
    "supersedeRecord",
    "takePaperBack",
    "tickChecklist",
    "unrelateNamedData",
    "updateProfile",
    "withdrawRecord",
    "withdrawSet",
  ],
  Query: [
    "apiTokens",
    "authorCheck",
    "authorChecks",
    "caughtMails",
    "checkFields",
    "errorReport",
    "errorReports",
    "eventLog",
    "handOverList",
    "myCitation",
    "mySets",
    "mySubmissions",
    "papersLeft",
    "people",
    "previewCitations",
    "queue",
    "releaseReadiness",
    "review",
    "setCandidates",
    "setQueue",
    "setReview",
    "submission",
  ],
};

let server: TestServer;
let schema: GraphQLSchema;
let tokens: ReturnType<typeof tokenOperations>;
let maintainer: Agent;
beforeAll(async () => {
  schema = await createSchema();
  server = await startTestServer();
  tokens = tokenOperations(server);
  ({ agent: maintainer } = await server.signedIn(["contributor", "editor", "maintainer"]));
});
afterAll(() => server.stop());

const fieldsOf = (kind: "Query" | "Mutation") =>
  Object.values((kind === "Query" ? schema.getQueryType() : schema.getMutationType())!.getFields());

it("every mutation is opened by the scope that stands here, or closed here", () => {
  for (const { name, extensions } of fieldsOf("Mutation")) {
    const scope = scopeNeeded("mutation", extensions as OperationNote);
    const here = OPEN[name] ?? (CLOSED.Mutation.includes(name) ? null : "not classed");
    expect({ name, scope }).toEqual({ name, scope: here });
  }
});

it("every query is a reader's, or closed here", () => {
  for (const { name, extensions } of fieldsOf("Query")) {
    const scope = scopeNeeded("query", extensions as OperationNote);
    const here = OPEN[name] ?? (CLOSED.Query.includes(name) ? null : "read");
    expect({ name, scope }).toEqual({ name, scope: here });
  }
});

it("no scope opens an action that needs a role: that is the desk's", () => {
  for (const [action, scope] of Object.entries(SCOPE_OF)) {
    if (scope !== null)
      expect({ action, roles: MAY[action as never]["roles"] }).toEqual({ action, roles: null });
  }
});

describe("a token of somebody with every role and every scope", () => {
  let secret: string;
  beforeAll(async () => {
    ({ secret } = await tokens.make(maintainer, { scopes: ["read", "tables", "fits"] }));
  });

  it.each(
    (["Mutation", "Query"] as const).flatMap((kind) =>
      CLOSED[kind].map((name) => [kind, name] as const),
    ),
  )("does no desk or account work: %s %s", async (kind, name) => {
    const field = fieldsOf(kind).find((each) => each.name === name)!;
    const needed = field.args.filter(({ type }) => String(type).endsWith("!"));
    const declared = needed.map((arg) => `$${arg.name}: ${String(arg.type)}`).join(", ");
    const passed = needed.map((arg) => `${arg.name}: $${arg.name}`).join(", ");
    const named = getNamedType(field.type);
    const parts = isObjectType(named) || isUnionType(named) ? " { __typename }" : "";
    const { status, body } = await tokens.graphql(
      `Bearer ${secret}`,
      `${kind.toLowerCase()}${declared && ` (${declared})`} { ${name}${passed && `(${passed})`}${parts} }`,
    );
    expect({ name, status, code: body.errors?.[0].extensions.code }).toEqual({
      name,
      status: 403,
      code: "TOKEN_CLOSED",
    });
  });

  it.each([
    "query { ...on Query { people { id } } }",
    "query { ...parts } fragment parts on Query { renamed: people { id } }",
    "query { ...outer } fragment outer on Query { ...parts } fragment parts on Query { people { id } }",
    "query { session { licence } people @skip(if: true) { id } }",
  ])("finds no way round in a fragment, an alias or a directive: %s", async (query) => {
    const { body } = await tokens.graphql(`Bearer ${secret}`, query);
    expect(body.errors?.[0].extensions.code).toBe("TOKEN_CLOSED");
    expect(body.data).toBeUndefined();
  });

  it.each(["/api/log.csv", "/api/log.jsonl"])("reads no event log: %s", async (address) => {
    const { status, body } = await tokens.get(`Bearer ${secret}`, address);
    expect([status, body.code]).toEqual([403, "TOKEN_CLOSED"]);
  });

  it.each(["/api/uploads", "/api/evidence"])(
    "uploads nothing for the desk: %s",
    async (address) => {
      const { status, body } = await tokens
        .get(`Bearer ${secret}`, address)
        // supertest: the same request, posted
        .then(() =>
          server
            .agent()
            .post(address)
            .set("Authorization", `Bearer ${secret}`)
            .attach("file", Buffer.from("x"), "x.csv"),
        );
      expect([status, body.code]).toEqual([403, "TOKEN_CLOSED"]);
    },
  );

  it("reads what anybody and what its person reads, in one request with introspection", async () => {
    const { body } = await tokens.graphql(
      `Bearer ${secret}`,
      "{ __typename __schema { queryType { name } } fittingTables { slug } session { viewer { email } } }",
    );
    expect(body.errors).toBeUndefined();
    expect(body.data.session.viewer).not.toBeNull();
  });

  it("changes a table by the scope “tables”, as far as its person may", async () => {
    const { body } = await tokens.graphql(
      `Bearer ${secret}`,
      `mutation { deleteTable(slug: "none") { __typename ... on Refusal { code } } }`,
    );
    expect(body.errors).toBeUndefined();
    expect(body.data.deleteTable.__typename).toBe("Refusal");
  });
});
