import type { Agent, TestServer } from "../support/harness";

const SET = `number state version label members { number fields { value } cannotJoin approved }
  matrixKind triangle printedRho usedRho place page note mine decisionNote submittedBy readBy
  withdrawnBecause follows changedMembers findings { code grade message fields } answers { code answer accepted }`;
const OUTCOME = `__typename ... on Refusal { code message field } ... on CorrelatedSet { ${SET} }`;
const REVIEW = `item { number state version members place barredBecause claimedByMe }
  members { number fields { value } } readingStoredAt blockers
  comparison { row column reading submitted agrees earlier } set { ${SET} }`;
const REVIEW_OUTCOME = `__typename ... on Refusal { code message field } ... on SetReview { ${REVIEW} }`;
const DONE = `__typename ... on Refusal { code message } ... on Done { message }`;

export interface SetParts {
  label?: string | null;
  members?: string[];
  matrixKind?: "correlation" | "covariance" | null;
  triangle?: string[][];
  place?: string | null;
  note?: string | null;
  answers?: { code: string; answer: string }[];
}

/** The correlated sets as their screens use them. */
export function setsOf(server: TestServer, agent: Agent) {
  const call = async (query: string, variables: object = {}) => {
    const { data, errors } = await server.graphql(agent, query, variables);
    if (errors) throw new Error(errors.map((error) => error.message).join("; "));
    // A test names what it expects of the answer; a type would only say it a second time.
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    return Object.values(data as Record<string, unknown>)[0] as any;
  };
  const mutation = (name: string, args: [string, string][], outcome: string) => {
    const declared = args.map(([arg, type]) => `$${arg}: ${type}`).join(", ");
    const passed = args.map(([arg]) => `${arg}: $${arg}`).join(", ");
    return `mutation (${declared}) { ${name}(${passed}) { ${outcome} } }`;
  };
  const NUMBER: [string, string] = ["number", "String!"];
  const VERSION: [string, string] = ["version", "Int!"];
  return {
    start: (citationId: string, members: string[]) =>
      call(mutation("startSet", [["input", "StartSetInput!"]], OUTCOME), {
        input: { citationId, members },
      }),
    save: (set: { number: string; version: number }, parts: SetParts) =>
      call(mutation("saveSet", [["input", "SaveSetInput!"]], OUTCOME), {
        input: { number: set.number, version: set.version, ...parts },
      }),
    submit: (number: string, version: number, agreeToLicence = true) =>
      call(mutation("submitSet", [NUMBER, VERSION, ["agreeToLicence", "Boolean!"]], OUTCOME), {
        number,
        version,
        agreeToLicence,
      }),
    discard: (number: string, version: number) =>
      call(mutation("discardSet", [NUMBER, VERSION], DONE), { number, version }),
    revise: (number: string) => call(mutation("reviseSet", [NUMBER], OUTCOME), { number }),
    claim: (number: string) => call(mutation("claimSet", [NUMBER], REVIEW_OUTCOME), { number }),
    release: (number: string) => call(mutation("releaseSet", [NUMBER], DONE), { number }),
    read: (number: string, triangle: string[][], matrixKind: string | null = "correlation") =>
      call(mutation("storeSetReading", [NUMBER, ["reading", "SetReadingInput!"]], REVIEW_OUTCOME), {
        number,
        reading: { matrixKind, triangle },
      }),
    correct: (number: string, entry: object) =>
      call(mutation("correctSetReading", [NUMBER, ["entry", "SetEntryInput!"]], REVIEW_OUTCOME), {
        number,
        entry,
      }),
    approve: (number: string, version: number, acceptedAnswers: string[] = []) =>
      call(mutation("approveSet", [NUMBER, VERSION, ["acceptedAnswers", "[String!]!"]], DONE), {
        number,
        version,
        acceptedAnswers,
      }),
    giveBack: (number: string, version: number, comment: string) =>
      call(mutation("returnSet", [NUMBER, VERSION, ["comment", "String!"]], DONE), {
        number,
        version,
        comment,
      }),
    withdraw: (number: string, version: number, reason: string) =>
      call(mutation("withdrawSet", [NUMBER, VERSION, ["reason", "String!"]], DONE), {
        number,
        version,
        reason,
      }),
    set: (number: string) =>
      call(`query ($number: String!) { correlatedSet(number: $number) { ${SET} } }`, { number }),
    inUse: (member: string | null = null) =>
      call(`query ($member: String) { correlatedSets(member: $member) { ${SET} } }`, { member }),
    mine: () => call(`{ mySets { ${SET} } }`),
    candidates: (citationId: string) =>
      call(
        `query ($citationId: ID!) { setCandidates(citationId: $citationId) { number approved cannotJoin } }`,
        { citationId },
      ),
    queue: () => call(`{ setQueue { number state members barredBecause claimedByMe } }`),
    review: (number: string) =>
      call(`query ($number: String!) { setReview(number: $number) { ${REVIEW} } }`, { number }),
    propose: (recipe: object) =>
      call(
        `query ($recipe: TableInput!) { tableProposal(recipe: $recipe) { __typename
          ... on TableProposal { open decisions { id proposed } } } }`,
        { recipe },
      ),
    linksOf: (number: string) =>
      call(
        `query ($number: String!) { constraint(number: $number) { correlatedSets { number label members } } }`,
        { number },
      ),
  };
}

/** A reading of two bins with this correlation, as the form sends it. */
export function pairReading(rho: string): string[][] {
  return [[""], [rho, ""]];
}
