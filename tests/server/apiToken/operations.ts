import request from "supertest";

import { ApiToken } from "~server/apiToken/apiToken.entity";
import { hashOf, newSecret, startOf } from "~server/apiToken/secret";
import type { TokenScope } from "~shared/review/tokenScopes";

import { TEST_PASSWORD } from "../../factories/user";
import type { Agent, TestServer } from "../support/harness";

const MAKE = `mutation ($input: ApiTokenInput!, $password: String!) {
  makeApiToken(input: $input, password: $password) {
    __typename
    ... on MadeApiToken { secret token { id name scopes start state createdAt expiresAt lastUsedAt revokedAt } }
    ... on Refusal { code message field }
  }
}`;

export interface Wish {
  name?: string;
  scopes?: TokenScope[];
  days?: number;
}

/** A token's secret, kept in the database without asking anybody for a password. */
export async function plantToken(
  { dataSource }: TestServer,
  ownerId: string,
  scopes: TokenScope[] = ["read"],
): Promise<string> {
  const secret = newSecret();
  await dataSource.manager.insert(ApiToken, {
    ownerId,
    name: "planted",
    scopes,
    hash: hashOf(secret),
    start: startOf(secret),
    expiresAt: new Date(Date.now() + 3_600_000),
  });
  return secret;
}

export function tokenOperations(server: TestServer) {
  const ask = async (agent: Agent, wish: Wish = {}, password = TEST_PASSWORD) => {
    const input = { name: "nightly run", scopes: ["read"], ...wish };
    return (await server.graphql(agent, MAKE, { input, password })).data.makeApiToken;
  };
  return {
    /** What comes of asking for a token. */
    ask,
    /** A token's secret and id. */
    make: async (agent: Agent, wish: Wish = {}): Promise<{ secret: string; id: string }> => {
      const made = await ask(agent, wish);
      if (made.__typename !== "MadeApiToken") throw new Error(`no token: ${made.message}`);
      return { secret: made.secret, id: made.token.id };
    },
    list: async (agent: Agent) =>
      (
        await server.graphql(
          agent,
          `{ apiTokens { id name scopes start state lastUsedAt revokedAt expiresAt } }`,
        )
      ).data.apiTokens,
    revoke: async (agent: Agent, id: string) =>
      (
        await server.graphql(
          agent,
          `mutation ($id: ID!) { revokeApiToken(id: $id) { __typename
             ... on Done { message } ... on Refusal { code } } }`,
          { id },
        )
      ).data.revokeApiToken,
    /** GraphQL with an Authorization header and no cookie. */
    graphql: (authorization: string, query: string, variables: object = {}) =>
      request(server.app)
        .post("/graphql")
        .set("Authorization", authorization)
        .send({ query, variables }),
    get: (authorization: string, address: string) =>
      request(server.app).get(address).set("Authorization", authorization),
  };
}

export const WHO = "{ session { viewer { id email roles } } }";
