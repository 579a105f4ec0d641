import {
  getNamedType,
  isEnumType,
  isInputObjectType,
  isListType,
  isNonNullType,
  isObjectType,
  isUnionType,
  type GraphQLField,
  type GraphQLInputType,
  type GraphQLSchema,
} from "graphql";

import { createSchema } from "~server/schema";
import type { Role } from "~shared/review/states";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

type Rule = "public" | "signedIn" | Role | "editorOrMaintainer";
type Who = "nobody" | "noRole" | Role;

/** Who may call what. An operation without a row fails the first test below. */
const RULES: Record<"Query" | "Mutation", Record<string, Rule>> = {
  Query: {
    apiTokens: "signedIn",
    authorCheck: "editor",
    authorCheckByLink: "public",
    authorChecks: "editor",
    caughtMails: "maintainer",
    checkFields: "contributor",
    constraint: "public",
    constraints: "public",
    correlatedSet: "public",
    correlatedSets: "public",
    errorReport: "signedIn",
    eventLog: "maintainer",
    evidence: "public",
    errorReports: "editorOrMaintainer",
    fittingTable: "public",
    fittingTables: "public",
    methodVocabulary: "public",
    myCitation: "contributor",
    handOverList: "editor",
    mySets: "signedIn",
    mySubmissions: "signedIn",
    namedData: "public",
    namedDataList: "public",
    papersLeft: "editor",
    people: "maintainer",
    personCredit: "public",
    previewCitations: "contributor",
    queue: "editor",
    recordLife: "public",
    release: "public",
    releaseDifference: "public",
    reportedError: "public",
    releaseReadiness: "maintainer",
    releases: "public",
    review: "editor",
    session: "public",
    setCandidates: "contributor",
    setQueue: "editor",
    setReview: "editor",
    submission: "signedIn",
    tableChanges: "public",
    tableProposal: "public",
    tableSurroundings: "public",
  },
  Mutation: {
    acceptAnswer: "editor",
    addMethodTag: "maintainer",
    answerAuthorCheck: "public",
    answerErrorReport: "editorOrMaintainer",
    approveSet: "editor",
    approveSubmission: "editor",
    changeMethodTag: "maintainer",
    changePassword: "signedIn",
    changeTable: "signedIn",
    claimSet: "editor",
    claimSubmission: "editor",
    closeAuthorCheck: "editor",
    closeErrorReport: "editorOrMaintainer",
    confirmAddressChange: "public",
    confirmEmail: "public",
    correctReading: "editor",
    cutRelease: "maintainer",
    correctSetReading: "editor",
    deleteAccount: "signedIn",
    deleteTable: "signedIn",
    describeEvidence: "contributor",
    discardDraft: "contributor",
    discardSet: "contributor",
    editNamedData: "editorOrMaintainer",
    grantRole: "maintainer",
    handOverClaim: "editor",
    keepCitations: "contributor",
    leavePaper: "editor",
    liftNotice: "maintainer",
    lookUpCitation: "contributor",
    makeApiToken: "signedIn",
    mergeNamedData: "editorOrMaintainer",
    objectToAddressChange: "public",
    previewImport: "contributor",
    recordErratum: "maintainer",
    register: "public",
    relateNamedData: "editorOrMaintainer",
    releaseClaim: "editor",
    releaseSet: "editor",
    removeEvidence: "contributor",
    renewClaim: "editor",
    replyToComment: "signedIn",
    replyToReport: "public",
    reportError: "public",
    requestAddressChange: "signedIn",
    requestPasswordReset: "public",
    resendConfirmation: "public",
    resetPassword: "public",
    retireMethodTag: "maintainer",
    returnSet: "editor",
    returnSubmission: "editor",
    reviseSet: "contributor",
    reviseSubmission: "contributor",
    revokeApiToken: "signedIn",
    revokeAuthorCheck: "editor",
    revokeRole: "maintainer",
    runImport: "contributor",
    saveDraft: "contributor",
    saveSet: "contributor",
    saveRecipe: "signedIn",
    sendAuthorCheck: "editor",
    signIn: "public",
    signOut: "public",
    signOutEverywhere: "signedIn",
    startDraft: "contributor",
    startSet: "contributor",
    storeReading: "editor",
    storeSetReading: "editor",
    submitDraft: "contributor",
    submitSet: "contributor",
    supersedeRecord: "maintainer",
    takePaperBack: "editor",
    tickChecklist: "editor",
    unrelateNamedData: "editorOrMaintainer",
    updateProfile: "signedIn",
    withdrawRecord: "maintainer",
    withdrawSet: "maintainer",
  },
};

/** A value of the type: the guard stands before the resolver, so any will do. */
function sample(type: GraphQLInputType): unknown {
  if (isNonNullType(type)) return sample(type.ofType);
  if (isListType(type)) return [];
  if (isEnumType(type)) return type.getValues()[0]?.name;
  if (isInputObjectType(type)) {
    const required = Object.values(type.getFields()).filter(({ type: t }) => isNonNullType(t));
    return Object.fromEntries(required.map((field) => [field.name, sample(field.type)]));
  }
  switch (getNamedType(type).name) {
    case "Int":
    case "Float":
      return 1;
    case "Boolean":
      return true;
    default:
      return "no-such-thing";
  }
}

/** An operation that calls one field and asks for as little as it can. */
function call(kind: "Query" | "Mutation", field: GraphQLField<unknown, unknown>) {
  const args = field.args.filter(({ type }) => isNonNullType(type));
  const declared = args.map(({ name, type }) => `$${name}: ${String(type)}`).join(", ");
  const passed = args.map(({ name }) => `${name}: $${name}`).join(", ");
  const named = getNamedType(field.type);
  const selection = isObjectType(named) || isUnionType(named) ? " { __typename }" : "";
  return {
    query:
      `${kind.toLowerCase()}${declared && ` (${declared})`} ` +
      `{ ${field.name}${passed && `(${passed})`}${selection} }`,
    variables: Object.fromEntries(args.map(({ name, type }) => [name, sample(type)])),
  };
}

let server: TestServer;
let schema: GraphQLSchema;
beforeAll(async () => {
  schema = await createSchema();
  server = await startTestServer();
});
afterAll(() => server.stop());

const fieldsOf = (kind: "Query" | "Mutation") =>
  schema.getType(kind) as never as {
    getFields(): Record<string, GraphQLField<unknown, unknown>>;
  };

it("every operation of the API has a rule here", () => {
  for (const kind of ["Query", "Mutation"] as const) {
    expect(Object.keys(fieldsOf(kind).getFields()).sort()).toEqual(Object.keys(RULES[kind]).sort());
  }
});

function expected(rule: Rule, who: Who): "UNAUTHENTICATED" | "FORBIDDEN" | null {
  if (rule === "public") return null;
  if (who === "nobody") return "UNAUTHENTICATED";
  if (rule === "editorOrMaintainer")
    return who === "editor" || who === "maintainer" ? null : "FORBIDDEN";
  return rule === "signedIn" || rule === who ? null : "FORBIDDEN";
}

describe.each(["nobody", "noRole", "contributor", "editor", "maintainer"] as const)(
  "as %s",
  (who) => {
    let agent: Agent;
    beforeEach(async () => {
      // Anew each time: some of the operations end the session.
      agent =
        who === "nobody"
          ? server.agent()
          : (await server.signedIn(who === "noRole" ? [] : [who])).agent;
    });

    const cases = (["Query", "Mutation"] as const).flatMap((kind) =>
      Object.entries(RULES[kind]).map(([name, rule]) => ({
        kind,
        name,
        answer: expected(rule, who) ?? "no refusal",
        rule,
      })),
    );

    it.each(cases)("$name: $answer", async ({ kind, name, rule }) => {
      const field = fieldsOf(kind).getFields()[name]!;
      const { query, variables } = call(kind, field);
      const body = await server.graphql(agent, query, variables);
      const code = body.errors?.[0]?.extensions.code ?? null;
      const refusal = expected(rule, who);
      if (refusal !== null) {
        expect(code).toBe(refusal);
        expect(body.data?.[name] ?? null).toBeNull();
        return;
      }
      // Caught mails are refused to maintainers too where nothing is a demonstration.
      const byState = name === "caughtMails" ? ["FORBIDDEN"] : [];
      expect(
        [
          "UNAUTHENTICATED",
          "FORBIDDEN",
          "INTERNAL",
          "GRAPHQL_VALIDATION_FAILED",
          "BAD_USER_INPUT",
        ].filter((c) => !byState.includes(c)),
      ).not.toContain(code);
    });
  },
);
