import { randomBytes } from "node:crypto";

import type { APIRequestContext } from "playwright-core";

import { fromRoot } from "../../../scripts/lib/paths";
import { run } from "../../../scripts/lib/processes";

import { DEMONSTRATION_PASSWORD, type Fogline } from "./fogline";

/** Asks the API as whoever the context is signed in as. */
export async function ask<Data>(
  request: APIRequestContext,
  query: string,
  variables: Record<string, unknown> = {},
): Promise<Data> {
  const response = await request.post("/graphql", { data: { query, variables } });
  const body = (await response.json()) as { data?: Data; errors?: unknown };
  if (!body.data || body.errors) throw new Error(`the API answered ${JSON.stringify(body)}`);
  return body.data;
}

/** Somebody with an account of a registry without the demonstration, its mails waiting in the outbox. */
export async function newcomer(
  request: APIRequestContext,
  fogline: Fogline,
  roles: readonly string[],
): Promise<{ email: string; password: string }> {
  const email = `newcomer-${randomBytes(4).toString("hex")}@lanternmoor.example`;
  const password = DEMONSTRATION_PASSWORD;
  await ask(
    request,
    `mutation Register($email: String!, $password: String!) {
      register(email: $email, nameOnPapers: "Sunniva Kelterborn", password: $password) { __typename }
    }`,
    { email, password },
  );
  const address = new URL(fogline.linkIn(await fogline.waitingMail(email)), fogline.url);
  await ask(
    request,
    `mutation Confirm($token: String!) { confirmEmail(token: $token) { __typename } }`,
    { token: address.searchParams.get("token") },
  );
  for (const role of roles)
    await run(process.execPath, [fromRoot("build/server/account/grant.js"), email, role], {
      env: { ...process.env, DATABASE_URL: fogline.databaseUrl, NODE_ENV: "production" },
    });
  return { email, password };
}

/** A new draft of whoever the context is signed in as; nothing is typed in it yet. */
export async function emptyDraft(request: APIRequestContext): Promise<string> {
  const { startDraft } = await ask<{ startDraft: { id?: string } }>(
    request,
    "mutation Start { startDraft { __typename ... on Submission { id } } }",
  );
  if (!startDraft.id) throw new Error("no draft was started");
  return startDraft.id;
}
