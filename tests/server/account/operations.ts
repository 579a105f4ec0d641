import type { Agent, GraphqlBody, TestServer } from "../support/harness";

const DONE = "{ __typename ... on Done { message } ... on Refusal { code field message } }";
const VIEWER =
  "{ __typename ... on Viewer { id email nameOnPapers furtherNames orcid roles } ... on Refusal { code field message } }";
const PERSON =
  "{ __typename ... on Person { id email confirmed roles } ... on Refusal { code message } }";

/** The account's operations, as a client sends them; each answers the body's one field. */
export function accountOperations(server: TestServer) {
  // eslint-disable-next-line @typescript-eslint/no-explicit-any
  const one = async (agent: Agent, query: string, variables: object): Promise<any> => {
    const body = await server.graphql(agent, query, variables);
    if (body.errors) throw new Error(JSON.stringify(body.errors));
    return Object.values(body.data)[0];
  };
  return {
    register: (agent: Agent, input: { email: string; nameOnPapers?: string; password?: string }) =>
      one(
        agent,
        `mutation ($email: String!, $nameOnPapers: String!, $password: String!) {
          register(email: $email, nameOnPapers: $nameOnPapers, password: $password) ${DONE} }`,
        { nameOnPapers: "Oriel Vantongeren", password: "fog over the quay", ...input },
      ),
    confirm: (agent: Agent, token: string) =>
      one(agent, `mutation ($token: String!) { confirmEmail(token: $token) ${DONE} }`, { token }),
    resend: (agent: Agent, email: string) =>
      one(agent, `mutation ($email: String!) { resendConfirmation(email: $email) ${DONE} }`, {
        email,
      }),
    signIn: (agent: Agent, email: string, password: string) =>
      one(
        agent,
        `mutation ($email: String!, $password: String!) {
          signIn(email: $email, password: $password) ${VIEWER} }`,
        { email, password },
      ),
    signOut: (agent: Agent) => one(agent, "mutation { signOut { message } }", {}),
    changePassword: (agent: Agent, current: string, next: string) =>
      one(
        agent,
        `mutation ($current: String!, $next: String!) {
          changePassword(current: $current, next: $next) ${DONE} }`,
        { current, next },
      ),
    requestReset: (agent: Agent, email: string) =>
      one(agent, `mutation ($email: String!) { requestPasswordReset(email: $email) ${DONE} }`, {
        email,
      }),
    reset: (agent: Agent, token: string, next: string) =>
      one(
        agent,
        `mutation ($token: String!, $next: String!) { resetPassword(token: $token, next: $next) ${DONE} }`,
        { token, next },
      ),
    updateProfile: (
      agent: Agent,
      nameOnPapers: string,
      orcid: string | null,
      furtherNames?: string[],
    ) =>
      one(
        agent,
        `mutation ($nameOnPapers: String!, $orcid: String, $furtherNames: [String!]) {
          updateProfile(nameOnPapers: $nameOnPapers, orcid: $orcid, furtherNames: $furtherNames) ${VIEWER} }`,
        { nameOnPapers, orcid, furtherNames },
      ),
    signOutEverywhere: (agent: Agent) =>
      one(agent, "mutation { signOutEverywhere { message } }", {}),
    requestAddressChange: (agent: Agent, email: string, password: string) =>
      one(
        agent,
        `mutation ($email: String!, $password: String!) {
          requestAddressChange(email: $email, password: $password) ${DONE} }`,
        { email, password },
      ),
    confirmAddressChange: (agent: Agent, token: string) =>
      one(agent, `mutation ($token: String!) { confirmAddressChange(token: $token) ${DONE} }`, {
        token,
      }),
    objectToAddressChange: (agent: Agent, token: string) =>
      one(agent, `mutation ($token: String!) { objectToAddressChange(token: $token) ${DONE} }`, {
        token,
      }),
    deleteAccount: (agent: Agent, password: string, credit: "named" | "anonymous") =>
      one(
        agent,
        `mutation ($password: String!, $credit: CreditAfterwards!) {
          deleteAccount(password: $password, credit: $credit) ${DONE} }`,
        { password, credit },
      ),
    viewer: async (agent: Agent) =>
      (
        await one(
          agent,
          "{ session { viewer { id email nameOnPapers furtherNames orcid roles } } }",
          {},
        )
      ).viewer,
    changeRole: (
      agent: Agent,
      change: "grantRole" | "revokeRole",
      personId: string,
      role: string,
    ): Promise<GraphqlBody> =>
      server.graphql(
        agent,
        `mutation ($personId: ID!, $role: Role!) {
          result: ${change}(personId: $personId, role: $role) ${PERSON} }`,
        { personId, role },
      ),
  };
}

/** The token in the newest mail to this address. */
export async function tokenIn(server: TestServer, address: string): Promise<string> {
  const mail = (await server.mailsTo(address)).at(-1);
  const token = /[?]token=([\w-]+)/.exec(mail?.text ?? "")?.[1];
  if (token === undefined) throw new Error(`no link in the newest mail to ${address}`);
  return token;
}
